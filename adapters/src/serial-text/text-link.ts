import { DomainError } from '@cresthold/shared';
import { closeSerialPort, type OpenSerialPort, portFault } from '../serial/open-serial-port.js';
import { plainText, showText } from './escaped-text.js';
import type { Expectation, Frame } from './frame-reader.js';
import { LineCodec } from './line-codec.js';
import { fitsAny, fitsPattern } from './pattern.js';
import { PortOutput } from './port-output.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import { StreamBoard } from './stream-board.js';
import { TextInbox } from './text-inbox.js';
import { Waiter } from './waiter.js';

export interface TextRequest {
  /** What is sent, without checksum and terminator. */
  command: string;
  /** Null where the device sends no reply. */
  expectation: Expectation | null;
}

/** The text of a line, the bytes of a block, an empty text where none is due; or why there is none. */
export type TextReply = string | Buffer | DomainError;

const line: Expectation = { kind: 'line' };

/**
 * One command on the wire at a time, its reply as a value.
 *
 * Which reply belongs to which command only their order tells. After a missed or corrupt reply, or a line that nobody
 * asked for, the link is out of step: before the next command it drops what comes until the line has been silent for
 * `resyncMs`, and where an identification is configured it then asks for that and drops everything before its reply,
 * which the device cannot send before the replies it still owes.
 */
export class TextLink {
  /** Set for good once the port is of no more use. */
  lost: DomainError | null = null;
  /** Told of everything that is sent and received. */
  onTraffic: ((direction: 'sent' | 'received', text: string) => void) | null = null;
  readonly board: StreamBoard;
  private readonly codec: LineCodec;
  private readonly inbox: TextInbox;
  private readonly output: PortOutput;
  private readonly waiter = new Waiter();
  private isBusy = false;
  private silences = 0;
  private released: Promise<void> | null = null;

  constructor(
    private readonly port: OpenSerialPort,
    private readonly settings: SerialTextConfiguration,
    private readonly nowMs: () => number,
  ) {
    this.codec = new LineCodec(settings);
    this.board = new StreamBoard(this.codec, settings.unsolicited);
    this.inbox = new TextInbox(settings, { board: this.board, waiter: this.waiter, nowMs });
    const around = { nowMs, waiter: this.waiter, lost: () => this.lost };
    this.output = new PortOutput(port, settings, around);
    port.on('data', this.receive);
    port.on('error', (error: Error) => void this.end(portFault(settings.path, error)));
    port.on('close', () => {
      void this.end(new DomainError('adapter.disconnected', `${settings.path}: the port is gone.`));
    });
  }

  prepare(): Promise<DomainError | null> {
    return this.output.prepare();
  }

  /** @param deadlineMs when the outcome must be there, on the clock of the link */
  async exchange(request: TextRequest, deadlineMs: number): Promise<TextReply> {
    if (this.isBusy) throw new Error('another command is on the wire');
    this.isBusy = true;
    try {
      return (await this.comeIntoStep(deadlineMs)) ?? (await this.ask(request, deadlineMs));
    } finally {
      this.isBusy = false;
      this.inbox.dropStrays();
    }
  }

  /** Waits for the next unsolicited line. @returns false where none came in time */
  async awaitStream(deadlineMs: number): Promise<boolean> {
    let hasCome = false;
    this.board.onLine = () => {
      hasCome = true;
      this.waiter.wake();
    };
    for (let leftMs = 1; leftMs > 0 && !hasCome && !this.lost; leftMs = deadlineMs - this.nowMs()) {
      await this.waiter.wait(Math.max(1, deadlineMs - this.nowMs()));
    }
    this.board.onLine = null;
    return hasCome;
  }

  /** Ends the link: the command under way ends with the given error, later ones too. */
  end(error: DomainError): Promise<void> {
    this.lost ??= error;
    this.waiter.wake();
    this.released ??= closeSerialPort(this.port);
    return this.released;
  }

  private readonly receive = (chunk: Buffer): void => {
    this.inbox.push(chunk);
    if (this.isBusy) this.waiter.wake();
    else this.inbox.dropStrays();
  };

  private async ask({ command, expectation }: TextRequest, deadlineMs: number): Promise<TextReply> {
    const { text, wire } = this.codec.encode(command);
    this.inbox.dropNoise();
    this.onTraffic?.('sent', wire);
    const fault = await this.send(wire, deadlineMs);
    if (fault) return fault;
    if (this.settings.hasEcho) {
      const echoFault = await this.awaitEcho(text, deadlineMs);
      if (echoFault) return echoFault;
    }
    if (!expectation) return '';
    const waitMs = this.output.wireMs(wire) + this.settings.replyTimeoutMs;
    return this.awaitReply(text, expectation, this.nowMs() + waitMs, deadlineMs);
  }

  /** A link whose commands do not get out is lost: they must not go out, old, when the device lets them. */
  private async send(wire: string, deadlineMs: number): Promise<DomainError | null> {
    const fault = await this.output.send(wire, deadlineMs);
    if (fault && this.output.isStuck) void this.end(fault);
    return fault && (this.lost ?? fault);
  }

  private async awaitEcho(text: string, deadlineMs: number): Promise<DomainError | null> {
    const limitMs = this.nowMs() + 2 * this.output.wireMs(text) + this.settings.replyTimeoutMs;
    for (;;) {
      if (this.lost) return this.lost;
      const echo = this.inbox.takeEcho(text);
      if (echo === 'taken') {
        this.onTraffic?.('received', text);
        return null;
      }
      if (echo === 'other') {
        const frame = this.inbox.next(line);
        if (frame) return this.corrupt(text, frame, 'the echo is not what was sent');
      }
      if (!(await this.inbox.waitUntil(limitMs, deadlineMs))) return this.silence(text);
    }
  }

  private async awaitReply(
    text: string,
    expectation: Expectation,
    limitMs: number,
    deadlineMs: number,
  ): Promise<TextReply> {
    for (;;) {
      if (this.lost) return this.lost;
      const frame = this.inbox.next(expectation);
      if (frame) return this.judge(text, frame, expectation);
      if (!(await this.inbox.waitUntil(limitMs, deadlineMs))) return this.silence(text);
    }
  }

  private judge(text: string, frame: Frame, expectation: Expectation): TextReply {
    if (frame.kind === 'noise') return this.corrupt(text, frame, frame.fault);
    this.tellFrame(frame);
    if (frame.kind === 'block') {
      this.silences = 0;
      return frame.bytes;
    }
    const reply = this.codec.decode(frame.text);
    if (typeof reply !== 'string') return this.corrupt(text, frame, reply.fault);
    if (fitsAny(reply, this.settings.refusals)) {
      this.silences = 0;
      const message = `${this.place(text)}: the device answered "${showText(reply)}".`;
      return new DomainError('adapter.refused', message);
    }
    if (expectation.kind === 'block') return this.corrupt(text, frame, 'a line came in place of a block');
    this.silences = 0;
    return reply;
  }

  private async comeIntoStep(deadlineMs: number): Promise<DomainError | null> {
    this.inbox.dropStrays();
    if (this.lost || this.inbox.isInStep) return this.lost;
    const fault = (await this.awaitSilence(deadlineMs)) ?? (await this.identify(deadlineMs));
    if (!fault) this.inbox.isInStep = true;
    return fault;
  }

  private async awaitSilence(deadlineMs: number): Promise<DomainError | null> {
    for (;;) {
      this.inbox.dropStrays();
      if (this.lost) return this.lost;
      const leftMs = this.inbox.silenceLeftMs();
      if (leftMs <= 0) break;
      if (this.nowMs() + leftMs > deadlineMs) return this.noTime();
      await this.waiter.wait(leftMs);
    }
    this.inbox.discard();
    return null;
  }

  /** Everything that the device still owes comes before the reply to a question whose answer is known. */
  private async identify(deadlineMs: number): Promise<DomainError | null> {
    const { identification, identificationQuery, replyTimeoutMs } = this.settings;
    if (identification === '') return null;
    const { text, wire } = this.codec.encode(plainText(identificationQuery));
    const fault = await this.send(wire, deadlineMs);
    if (fault) return fault;
    const limitMs = this.nowMs() + this.output.wireMs(wire) + replyTimeoutMs;
    for (;;) {
      if (this.lost) return this.lost;
      const frame = this.inbox.next(line);
      if (!frame) {
        if (!(await this.inbox.waitUntil(limitMs, deadlineMs))) return this.silence(text);
      } else if (frame.kind === 'line') {
        const reply = this.codec.decode(frame.text);
        if (typeof reply === 'string' && fitsPattern(reply, identification)) return null;
      }
    }
  }

  private silence(text: string): DomainError {
    this.silences += 1;
    const begun = this.inbox.begun;
    // The commonest slip of a new connection shows here: a terminator that the device does not send.
    const what = begun === '' ? 'no reply in time' : `the reply "${showText(begun, 60)}" did not end in time`;
    const message = `${this.place(text)}: ${what}.`;
    if (this.silences < this.settings.silencesUntilLost) {
      return this.outOfStep(new DomainError('adapter.timeout', message));
    }
    const lost = new DomainError(
      'adapter.disconnected',
      `${message} ${this.silences} commands in a row were left unanswered: the connection counts as lost.`,
    );
    void this.end(lost);
    return lost;
  }

  private corrupt(text: string, frame: Frame, fault: string): DomainError {
    this.silences = 0;
    const shown = frame.kind === 'line' ? ` "${showText(frame.text)}"` : '';
    const message = `${this.place(text)}: no valid reply${shown}: ${fault}.`;
    return this.outOfStep(new DomainError('adapter.corrupt', message));
  }

  private noTime(): DomainError {
    const message = `${this.settings.path}: not asked: no time was left after waiting for a late reply.`;
    return new DomainError('adapter.timeout', message);
  }

  private outOfStep(fault: DomainError): DomainError {
    this.inbox.disturb();
    return fault;
  }

  private tellFrame(frame: Frame): void {
    if (frame.kind === 'line') this.onTraffic?.('received', frame.text);
    else if (frame.kind === 'block') {
      const first = [...frame.bytes.subarray(0, 16)]
        .map((byte) => byte.toString(16).padStart(2, '0'))
        .join(' ');
      this.onTraffic?.('received', `#... ${frame.bytes.length} bytes: ${first} ...`);
    }
  }

  private place(text: string): string {
    return `${this.settings.path}, "${showText(text, 60)}"`;
  }
}
