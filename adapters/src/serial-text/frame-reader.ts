import { readBlockHeader } from './definite-block.js';

/** What the next reply is to be. */
export type Expectation = { kind: 'line' } | { kind: 'block'; prefix: string };

/** One thing that the device sent, without its terminator. */
export type Frame =
  { kind: 'line'; text: string } | { kind: 'block'; bytes: Buffer } | { kind: 'noise'; fault: string };

/**
 * Cuts what comes in into lines and blocks, wherever the chunks were cut. What grows beyond the most allowed length
 * is noise: it is dropped up to the next terminator. Empty lines are no frames.
 *
 * @example
 * const reader = new FrameReader('\r\n', 80);
 * reader.push(Buffer.from('1.5\r'));
 * reader.next({ kind: 'line' }); // null
 * reader.push(Buffer.from('\n2'));
 * reader.next({ kind: 'line' }); // { kind: 'line', text: '1.5' }
 */
export class FrameReader {
  private text = '';
  /** Up to here no terminator begins: a long line is searched once. */
  private searched = 0;
  private isDropping = false;

  /**
   * @param terminator what ends a line, at least one character
   * @param mostChars longest line or block
   */
  constructor(
    private readonly terminator: string,
    private readonly mostChars: number,
  ) {
    if (terminator === '') throw new RangeError('a terminator has at least one character');
  }

  /** Characters that have come and belong to no whole frame yet. */
  get pendingChars(): number {
    return this.text.length;
  }

  /** The beginning of what has come and has no end yet. */
  get begun(): string {
    return this.text.slice(0, 1000);
  }

  push(chunk: Buffer): void {
    this.text += chunk.toString('latin1');
  }

  /** Forgets what has come. */
  discard(): void {
    this.text = '';
    this.searched = 0;
    this.isDropping = false;
  }

  /** The next whole frame, or null where more must come. */
  next(expectation: Expectation): Frame | null {
    if (expectation.kind === 'block' && !this.isDropping) {
      const block = this.nextBlock(expectation.prefix);
      if (block !== 'is a line') return block;
    }
    return this.nextLine();
  }

  /**
   * Takes the echo of a command from the beginning of what has come.
   *
   * @returns `other` where something else has come in its place
   */
  takeEcho(command: string): 'taken' | 'more' | 'other' {
    const skipped = /^[\r\n]*/.exec(this.text)?.[0].length ?? 0;
    const come = this.text.slice(skipped, skipped + command.length);
    if (come === command) {
      this.advance(skipped + command.length);
      return 'taken';
    }
    return command.startsWith(come) ? 'more' : 'other';
  }

  private nextLine(): Frame | null {
    for (;;) {
      const end = this.text.indexOf(this.terminator, this.searched);
      if (end < 0) {
        this.searched = Math.max(0, this.text.length - this.terminator.length + 1);
        return this.dropNoise();
      }
      const line = this.text.slice(0, end);
      this.advance(end + this.terminator.length);
      const wasDropping = this.isDropping;
      this.isDropping = false;
      if (wasDropping) continue;
      if (line.length > this.mostChars) return { kind: 'noise', fault: tooLong(this.mostChars) };
      const text = line.replace(/^[\r\n]+/, '').trimEnd();
      if (text !== '') return { kind: 'line', text };
    }
  }

  private nextBlock(prefix: string): Frame | null | 'is a line' {
    // Rests of an echo or of the reply before.
    const blank = /^[\r\n]+/.exec(this.text);
    if (blank) this.advance(blank[0].length);
    const text = this.text;
    if (text.length < prefix.length) return prefix.startsWith(text) ? null : 'is a line';
    if (!text.startsWith(prefix)) return 'is a line';
    const header = readBlockHeader(text.slice(prefix.length, prefix.length + 11));
    if (header.kind === 'more') return null;
    if (header.kind === 'none') return 'is a line';
    if (header.count > this.mostChars) return this.noise(tooLong(this.mostChars));
    const from = prefix.length + header.from;
    return this.endOfBlock(from, from + header.count);
  }

  private endOfBlock(from: number, end: number): Frame | null {
    const rest = this.text.slice(end, end + this.terminator.length + 1);
    // Some devices end every reply with CR LF although only LF is asked for.
    const gap = rest.startsWith('\r') && !rest.startsWith(this.terminator) ? 1 : 0;
    const tail = rest.slice(gap, gap + this.terminator.length);
    if (!this.terminator.startsWith(tail)) return this.noise('its block is longer than its header says');
    if (tail.length < this.terminator.length) return null;
    const bytes = Buffer.from(this.text.slice(from, end), 'latin1');
    this.advance(end + gap + this.terminator.length);
    return { kind: 'block', bytes };
  }

  private noise(fault: string): Frame {
    this.discard();
    return { kind: 'noise', fault };
  }

  /** Keeps no more of a line that is noise already than may be the start of its terminator. */
  private dropNoise(): Frame | null {
    if (this.text.length <= this.mostChars + this.terminator.length) return null;
    const wasDropping = this.isDropping;
    this.isDropping = true;
    this.text = this.text.slice(this.text.length - this.terminator.length);
    this.searched = 0;
    return wasDropping ? null : { kind: 'noise', fault: tooLong(this.mostChars) };
  }

  private advance(count: number): void {
    this.text = this.text.slice(count);
    this.searched = 0;
  }
}

function tooLong(mostChars: number): string {
  return `it is longer than ${mostChars} characters`;
}
