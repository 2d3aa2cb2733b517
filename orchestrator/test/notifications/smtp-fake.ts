import { once } from 'node:events';
import { createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import { createInterface } from 'node:readline';

export interface ReceivedMail {
  from: string;
  to: string[];
  data: string;
}

/** The least of a mail server that takes mail (RFC 5321); can be told to refuse some first. */
export class SmtpFake {
  readonly mails: ReceivedMail[] = [];
  /** Mails still to be refused for now with code 451. */
  refusals = 0;

  private constructor(private readonly server: Server) {}

  static async listen(): Promise<SmtpFake> {
    const server = createServer();
    const fake = new SmtpFake(server);
    server.on('connection', (socket) => void fake.serve(socket));
    server.listen(0, '127.0.0.1');
    await once(server, 'listening');
    return fake;
  }

  get url(): string {
    return `smtp://127.0.0.1:${(this.server.address() as AddressInfo).port}`;
  }

  async close(): Promise<void> {
    this.server.close();
    await once(this.server, 'close');
  }

  private async serve(socket: Socket): Promise<void> {
    const say = (line: string) => socket.write(`${line}\r\n`);
    socket.on('error', () => socket.destroy());
    say('220 fake ready');
    let mail: ReceivedMail = { from: '', to: [], data: '' };
    let isInData = false;
    for await (const line of createInterface({ input: socket })) {
      if (isInData && line !== '.') mail.data += `${line}\n`;
      else if (isInData) {
        isInData = false;
        this.take(mail, say);
        mail = { from: '', to: [], data: '' };
      } else if (/^(EHLO|HELO)/i.test(line)) say('250 fake');
      else if (/^MAIL FROM:/i.test(line)) {
        mail.from = addressIn(line);
        say('250 ok');
      } else if (/^RCPT TO:/i.test(line)) {
        mail.to.push(addressIn(line));
        say('250 ok');
      } else if (/^DATA/i.test(line)) {
        isInData = true;
        say('354 go on');
      } else if (/^QUIT/i.test(line)) {
        say('221 bye');
        socket.end();
      } else say('502 not known');
    }
  }

  private take(mail: ReceivedMail, say: (line: string) => void): void {
    if (this.refusals > 0) {
      this.refusals -= 1;
      say('451 try again later');
      return;
    }
    this.mails.push(mail);
    say('250 taken');
  }
}

function addressIn(line: string): string {
  return /<([^>]*)>/.exec(line)?.[1] ?? '';
}
