import { checkSettings } from './check-settings.js';
import { MomentReadings } from './moment-readings.js';
import { clearMoments, joinMoments, momentStride, setSingleMoment } from './moments.js';

/**
 * Statistics of the last `length` values, in constant time per value and without ever taking a value out of a
 * sum: after any number of values the digits are as good as in a fresh computation.
 *
 * The window is three parts: the rest of an old block, a whole block and the beginning of the newest, each
 * half a window long. The rests of a block are all computed beforehand, one with each value of the block after
 * it; so a step joins four groups, whatever the length, and there is no step that costs more.
 *
 * Values that are no finite number are left out: the window then reaches back to the last `length` good ones.
 *
 * @source idea of two-part windows: M. van Herk (1992), Pattern Recognition Letters 13:517–521; worst-case
 * constant time by spreading the computation of the rests over the next block: derived here
 * @realtime `add` is safe: constant time, allocates nothing
 */
export class SlidingStatistics extends MomentReadings {
  private readonly blockLength: number;
  /** Groups of the rests of the block before the whole one: entry i holds its last i + 1 values. */
  private rests: Float64Array;
  /** The same of the whole block, being filled from its last value forwards. */
  private nextRests: Float64Array;
  private whole: Float64Array;
  private newest: Float64Array;
  private readonly single = new Float64Array(momentStride);
  /** Group of the whole block, and of the values so far in the newest. */
  private readonly wholeGroup = new Float64Array(momentStride);
  private readonly newestGroup = new Float64Array(momentStride);
  private filled = 0;
  private hasWhole = false;
  private hasRests = false;

  /**
   * @param length values in the window, 1 or more
   * @throws analysis.invalid-input
   */
  constructor(readonly length: number) {
    checkSettings([Number.isInteger(length) && length >= 1, 'length', 'must be a whole number from 1.']);
    super(new Float64Array(momentStride));
    this.blockLength = Math.ceil(length / 2);
    this.rests = new Float64Array(momentStride * this.blockLength);
    this.nextRests = new Float64Array(momentStride * this.blockLength);
    this.whole = new Float64Array(this.blockLength);
    this.newest = new Float64Array(this.blockLength);
  }

  /** True once the window is full. */
  get isFull(): boolean {
    return this.count === this.length;
  }

  /** @returns false where the value is no finite number and was left out */
  add(value: number): boolean {
    if (!Number.isFinite(value)) return false;
    if (this.filled === this.blockLength) this.beginBlock();
    this.newest[this.filled] = value;
    this.filled += 1;
    setSingleMoment(this.single, 0, value);
    joinMoments(this.newestGroup, 0, this.single, 0, this.newestGroup, 0);
    if (this.hasWhole) this.computeRest(this.filled);
    this.joinParts();
    return true;
  }

  clear(): void {
    this.filled = 0;
    this.hasWhole = false;
    this.hasRests = false;
    for (const group of [this.group, this.wholeGroup, this.newestGroup]) clearMoments(group);
  }

  private beginBlock(): void {
    [this.rests, this.nextRests] = [this.nextRests, this.rests];
    [this.whole, this.newest] = [this.newest, this.whole];
    this.wholeGroup.set(this.newestGroup);
    clearMoments(this.newestGroup);
    this.hasRests = this.hasWhole;
    this.hasWhole = true;
    this.filled = 0;
  }

  /** Group of the last `size` values of the whole block, from that of one value fewer. */
  private computeRest(size: number): void {
    const at = (size - 1) * momentStride;
    setSingleMoment(this.nextRests, at, this.whole[this.blockLength - size]!);
    if (size === 1) return;
    joinMoments(this.nextRests, at, this.nextRests, at - momentStride, this.nextRests, at);
  }

  private joinParts(): void {
    const restSize = this.length - (this.hasWhole ? this.blockLength : 0) - this.filled;
    const isRestUsed = this.hasRests && restSize > 0;
    const isWholeUsed = this.hasWhole && restSize >= 0;
    clearMoments(this.group);
    if (isRestUsed) joinMoments(this.group, 0, this.rests, (restSize - 1) * momentStride, this.group, 0);
    if (isWholeUsed) joinMoments(this.group, 0, this.wholeGroup, 0, this.group, 0);
    // In a window of odd length the newest block pushes the first value of the whole one out when it is full.
    else if (this.hasWhole && this.blockLength > 1) {
      const at = (this.blockLength - 2) * momentStride;
      joinMoments(this.group, 0, this.nextRests, at, this.group, 0);
    }
    joinMoments(this.group, 0, this.newestGroup, 0, this.group, 0);
  }
}
