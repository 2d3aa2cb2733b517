import { plainText } from './escaped-text.js';
import { type Expectation, type Frame, FrameReader } from './frame-reader.js';
import type { SerialTextConfiguration } from './serial-text-configuration.js';
import type { StreamBoard } from './stream-board.js';
import type { Waiter } from './waiter.js';

type InboxSettings = Pick<
  SerialTextConfiguration,
  'replyTerminator' | 'mostReplyChars' | 'replyTimeoutMs' | 'resyncMs'
>;

interface Surroundings {
  board: StreamBoard;
  waiter: Waiter;
  nowMs: () => number;
}

const line: Expectation = { kind: 'line' };

/** What comes in over a port. Unsolicited lines go to the board; the rest belongs to the command on the wire, or to none. */
export class TextInbox {
  /** Whether what comes next belongs to the next command: not after a missed reply or a line that nobody asked for. */
  isInStep = true;
  private readonly reader: FrameReader;
  /** When the last thing that does not belong here came, or a reply was missed. */
  private disturbedMs = 0;
  private lastByteMs = 0;

  constructor(
    private readonly settings: InboxSettings,
    private readonly around: Surroundings,
  ) {
    this.reader = new FrameReader(plainText(settings.replyTerminator), settings.mostReplyChars);
  }

  /** The beginning of what has come and has no end yet. */
  get begun(): string {
    return this.reader.begun;
  }

  push(chunk: Buffer): void {
    this.lastByteMs = this.around.nowMs();
    this.reader.push(chunk);
  }

  /** The next frame that may be a reply, or null where more must come. */
  next(expectation: Expectation): Frame | null {
    for (;;) {
      const frame = this.reader.next(expectation);
      if (frame?.kind !== 'line' || !this.around.board.take(frame.text, this.around.nowMs())) return frame;
    }
  }

  takeEcho(command: string): 'taken' | 'more' | 'other' {
    return this.reader.takeEcho(command);
  }

  /** Waits for more. A reply that has begun gets time for each further character. @returns false when time is up */
  async waitUntil(limitMs: number, deadlineMs: number): Promise<boolean> {
    const hasBegun = this.reader.pendingChars > 0;
    const extendedMs = hasBegun ? Math.max(limitMs, this.lastByteMs + this.settings.replyTimeoutMs) : limitMs;
    const leftMs = Math.min(extendedMs, deadlineMs) - this.around.nowMs();
    if (leftMs <= 0) return false;
    await this.around.waiter.wait(leftMs);
    return true;
  }

  /** Drops whole lines while no command is on the wire: they belong to none. */
  dropStrays(): void {
    while (this.next(line)) this.disturb();
  }

  disturb(): void {
    this.isInStep = false;
    this.disturbedMs = this.around.nowMs();
  }

  /** How much longer the line must be silent, ms; 0 or less where it has been so long enough. */
  silenceLeftMs(): number {
    // What came last may be the start of a line that somebody reads: that is judged when it is whole.
    const unknownMs = this.reader.pendingChars > 0 ? this.lastByteMs : 0;
    return Math.max(this.disturbedMs, unknownMs) + this.settings.resyncMs - this.around.nowMs();
  }

  /** Noise without an end would stand before the reply. What may be the start of an unsolicited line is kept. */
  dropNoise(): void {
    if (!this.around.board.expectsLines) this.reader.discard();
  }

  discard(): void {
    this.reader.discard();
  }
}
