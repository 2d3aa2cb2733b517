import { DomainError } from '@cresthold/shared';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { LineSplitter } from './line-splitter.js';
import {
  closeSerialPort,
  type OpenSerialPort,
  openSerialPort,
  portFault,
  type SerialPortMaker,
} from './open-serial-port.js';
import { type SerialLineConfiguration, serialLineConfigurationSchema } from './serial-line.schema.js';

/**
 * Opens a serial port for lines of text.
 *
 * @param makePort for tests
 * @throws adapter.misconfigured, adapter.cancelled, adapter.disconnected
 */
export async function openSerialLine(
  configuration: SerialLineConfiguration,
  signal: AbortSignal,
  makePort?: SerialPortMaker,
): Promise<SerialLine> {
  const parsed = parseOrMisconfigured(serialLineConfigurationSchema, configuration);
  return new SerialLine(await openSerialPort(parsed, signal, makePort), parsed);
}

/** An open serial port as lines of text; outcomes are values. */
export class SerialLine {
  /** Set for good once the port is of no more use. */
  lost: DomainError | null = null;
  private readonly lines: string[] = [];
  private readonly splitter: LineSplitter;
  private wake: (() => void) | null = null;

  constructor(
    private readonly port: OpenSerialPort,
    private readonly configuration: Pick<SerialLineConfiguration, 'path' | 'delimiter' | 'mostLineChars'>,
  ) {
    this.splitter = new LineSplitter(configuration.delimiter, configuration.mostLineChars);
    port.on('data', (chunk: Buffer) => {
      this.lines.push(...this.splitter.push(chunk));
      if (this.lines.length > 0) this.wake?.();
    });
    port.on('error', (error: Error) => {
      this.end(portFault(configuration.path, error));
    });
    port.on('close', () => {
      this.end(new DomainError('adapter.disconnected', `${configuration.path}: the port was closed.`));
    });
  }

  /** Sends bytes; resolves when the operating system has sent them all. */
  send(text: string): Promise<DomainError | null> {
    if (this.lost) return Promise.resolve(this.lost);
    return new Promise((resolve) => {
      const settle = (error: Error | null | undefined): void => {
        resolve(this.lost ?? (error ? portFault(this.configuration.path, error) : null));
      };
      this.port.write(Buffer.from(text, 'latin1'), (error) => {
        if (error) settle(error);
        else this.port.drain(settle);
      });
    });
  }

  /** The oldest line not yet taken, or the next one to come. One caller at a time. */
  async nextLine(timeoutMs: number): Promise<string | DomainError> {
    if (this.wake) throw new Error('somebody else waits for the next line');
    if (this.lines.length === 0 && !this.lost) await this.waitForLine(timeoutMs);
    const line = this.lines.shift();
    if (line !== undefined) return line;
    if (this.lost) return this.lost;
    const message = `${this.configuration.path}: no line within ${timeoutMs} ms.`;
    return new DomainError('adapter.timeout', message);
  }

  /** Forgets what has come in, so that a late reply is not taken for that of the next request. */
  discard(): void {
    this.lines.length = 0;
    this.splitter.discard();
  }

  /** Resolves when the port is released; whoever waits gets adapter.cancelled. */
  async close(): Promise<void> {
    this.end(new DomainError('adapter.cancelled', 'The connection was closed.'));
    await closeSerialPort(this.port);
  }

  private end(error: DomainError): void {
    this.lost ??= error;
    this.wake?.();
  }

  private waitForLine(timeoutMs: number): Promise<void> {
    return new Promise((resolve) => {
      const finish = (): void => {
        clearTimeout(timer);
        this.wake = null;
        resolve();
      };
      const timer = setTimeout(finish, timeoutMs);
      this.wake = finish;
    });
  }
}
