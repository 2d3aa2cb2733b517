import { DomainError } from '@cresthold/shared';
import { type OpenSerialPort, portFault } from '../serial/open-serial-port.js';
import { characterTimeS } from '../serial/serial-port.schema.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import type { Waiter } from './waiter.js';

export type OutputSettings = Pick<
  SerialTextConfiguration,
  | 'path'
  | 'baudRate'
  | 'dataBits'
  | 'parity'
  | 'stopBits'
  | 'flowControl'
  | 'rs485'
  | 'rs485BeforeMs'
  | 'rs485AfterMs'
  | 'commandGapMs'
>;

interface Surroundings {
  nowMs: () => number;
  waiter: Waiter;
  /** Why the link is at its end; null while it is not. */
  lost: () => DomainError | null;
}

/** Puts commands on the wire, with their pauses and the direction of a two-wire line. */
export class PortOutput {
  private lastSentMs = -Infinity;

  constructor(
    private readonly port: OpenSerialPort,
    private readonly settings: OutputSettings,
    private readonly around: Surroundings,
  ) {}

  /** Listens from the start. @returns adapter.misconfigured where the port has no line RTS to turn the line with */
  async prepare(): Promise<DomainError | null> {
    if (!this.turnsByRts) return null;
    const error = await this.setRts(false);
    if (!error) return null;
    const message =
      `${this.settings.path}: this port cannot switch RTS (${error.message}): ` +
      'use "automatic" and a converter that turns the line round by itself.';
    return new DomainError('adapter.misconfigured', message, [{ field: 'rs485', message }]);
  }

  /** Set for good once the device has held a command back for all of its time: what is stuck must not go out later. */
  isStuck = false;

  /** @returns why the command was not sent whole */
  async send(text: string, deadlineMs: number): Promise<DomainError | null> {
    const { commandGapMs, rs485BeforeMs } = this.settings;
    const readyMs = Math.max(this.around.nowMs(), this.lastSentMs + commandGapMs);
    if (readyMs + rs485BeforeMs > deadlineMs) return this.noTime();
    await this.sleepUntil(readyMs);
    if (this.turnsByRts) await this.setRts(true);
    await this.sleepUntil(readyMs + rs485BeforeMs);
    const fault = this.around.lost() ?? (await this.sendNow(text, deadlineMs));
    if (this.turnsByRts) await this.setRts(false);
    this.lastSentMs = this.around.nowMs();
    return this.around.lost() ?? fault;
  }

  private async sendNow(text: string, deadlineMs: number): Promise<DomainError | null> {
    const fault = await this.bounded(this.write(text), deadlineMs);
    const mustDrain = this.turnsByRts || this.settings.flowControl !== 'none';
    const rest = fault || !mustDrain ? fault : await this.bounded(this.drain(), deadlineMs);
    if (!rest && this.turnsByRts) await this.sleepUntil(this.around.nowMs() + this.settings.rs485AfterMs);
    if (this.isStuck) await this.flush();
    return rest;
  }

  /** Time that a text takes on the wire, ms. */
  wireMs(text: string): number {
    return text.length * characterTimeS(this.settings) * 1000;
  }

  /** Throws away what the device has not let us send. */
  private flush(): Promise<void> {
    return new Promise((resolve) => {
      this.port.flush(() => {
        resolve();
      });
    });
  }

  private get turnsByRts(): boolean {
    return this.settings.rs485 === 'rts-high' || this.settings.rs485 === 'rts-low';
  }

  private setRts(isSending: boolean): Promise<Error | null> {
    const rts = isSending === (this.settings.rs485 === 'rts-high');
    return new Promise((resolve) => {
      this.port.set({ rts }, (error) => {
        resolve(error ?? null);
      });
    });
  }

  private write(text: string): Promise<DomainError | null> {
    return new Promise((resolve) => {
      this.port.write(Buffer.from(text, 'latin1'), (error) => {
        resolve(error ? portFault(this.settings.path, error) : null);
      });
    });
  }

  private drain(): Promise<null> {
    return new Promise((resolve) => {
      this.port.drain(() => {
        resolve(null);
      });
    });
  }

  private noTime(): DomainError {
    const message = `${this.settings.path}: not sent: no time was left after the pause between commands.`;
    return new DomainError('adapter.timeout', message);
  }

  /** A device that holds us back for good must not hold the caller back. */
  private async bounded(task: Promise<DomainError | null>, deadlineMs: number): Promise<DomainError | null> {
    let timer: NodeJS.Timeout | undefined;
    const tooLate = new Promise<DomainError>((resolve) => {
      timer = setTimeout(
        () => {
          this.isStuck = true;
          const message = `${this.settings.path}: the device lets nothing be sent: check flow control and cable.`;
          resolve(new DomainError('adapter.disconnected', message));
        },
        Math.max(1, deadlineMs - this.around.nowMs()),
      );
    });
    try {
      return await Promise.race([task, tooLate]);
    } finally {
      clearTimeout(timer);
    }
  }

  private async sleepUntil(untilMs: number): Promise<void> {
    for (;;) {
      const leftMs = untilMs - this.around.nowMs();
      if (!(leftMs > 0) || this.around.lost()) return;
      await this.around.waiter.wait(leftMs);
    }
  }
}
