import { createTransport } from 'nodemailer';
import type { MailConfig } from '../config/config.schema.js';

export interface Mail {
  to: readonly string[];
  subject: string;
  text: string;
}

/** Sends mail. */
export abstract class Mailer {
  /** Rejects where the mail server does not take it within 30 s. */
  abstract send(mail: Mail): Promise<void>;
  abstract close(): void;
}

/** For an installation without a mail server. */
export class NoMailer extends Mailer {
  send(): Promise<void> {
    return Promise.resolve();
  }

  close(): void {}
}

const timeoutMs = 10_000;

/** Sends over SMTP, by the URL of the configuration. */
export class SmtpMailer extends Mailer {
  private readonly transport;

  constructor(private readonly config: MailConfig) {
    super();
    this.transport = createTransport({
      url: config.smtpUrl,
      connectionTimeout: timeoutMs,
      greetingTimeout: timeoutMs,
      socketTimeout: timeoutMs,
    });
  }

  async send({ to, subject, text }: Mail): Promise<void> {
    await this.transport.sendMail({ from: this.config.from, to: [...to], subject, text });
  }

  close(): void {
    this.transport.close();
  }
}
