import { fitsAny, fitsPattern } from './pattern.js';
import type { LineCodec } from './line-codec.js';

interface LatestLine {
  text: string;
  atMs: number;
}

/** Keeps what a device sends by itself: the latest valid line of each pattern that a channel reads. */
export class StreamBoard {
  /** Unsolicited lines dropped because of their checksum or characters. */
  corrupt = 0;
  private readonly latestLines = new Map<string, LatestLine | null>();
  /** Called at each valid line. */
  onLine: (() => void) | null = null;

  constructor(
    private readonly codec: LineCodec,
    private readonly unsolicited: readonly string[],
  ) {}

  /** Whether the device may send lines by itself at all. */
  get expectsLines(): boolean {
    return this.unsolicited.length > 0 || this.latestLines.size > 0;
  }

  /** From now on lines of this pattern are kept. */
  watch(pattern: string): void {
    if (!this.latestLines.has(pattern)) this.latestLines.set(pattern, null);
  }

  /** The latest line of a watched pattern; null where none has come. */
  latest(pattern: string): LatestLine | null {
    return this.latestLines.get(pattern) ?? null;
  }

  /** Takes a line where it is unsolicited. @returns false where it may be a reply */
  take(line: string, nowMs: number): boolean {
    const trimmed = this.codec.trim(line);
    const patterns = [...this.latestLines.keys()].filter((pattern) => fitsPattern(trimmed, pattern));
    if (patterns.length === 0 && !fitsAny(trimmed, this.unsolicited)) return false;
    const text = this.codec.decode(line);
    if (typeof text !== 'string') {
      this.corrupt += 1;
      return true;
    }
    for (const pattern of patterns) this.latestLines.set(pattern, { text, atMs: nowMs });
    this.onLine?.();
    return true;
  }
}
