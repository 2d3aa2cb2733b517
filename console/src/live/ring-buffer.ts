/**
 * The last rows of a table of numbers in typed arrays; the oldest are overwritten. One time column, any
 * number of value columns that may come later. NaN means "no good value".
 */
export class RingBuffer {
  private readonly times: Float64Array;
  private readonly columns = new Map<string, Float64Array>();
  private written = 0;

  constructor(readonly capacity: number) {
    this.times = new Float64Array(capacity);
  }

  /** Number of rows held. */
  get length(): number {
    return Math.min(this.written, this.capacity);
  }

  /** Number of rows ever written; grows with each, so that readers can see whether anything is new. */
  get version(): number {
    return this.written;
  }

  get columnNames(): string[] {
    return [...this.columns.keys()];
  }

  /** @param timeMs must not go backwards; a row that does is left out */
  push(timeMs: number, names: readonly string[], values: readonly (number | null)[]): void {
    if (this.length > 0 && timeMs < this.timeAt(this.length - 1)) return;
    const slot = this.written % this.capacity;
    this.times[slot] = timeMs;
    for (const column of this.columns.values()) column[slot] = NaN;
    names.forEach((name, index) => {
      this.columnOf(name)[slot] = values[index] ?? NaN;
    });
    this.written += 1;
  }

  /** Time of the nth oldest row, ms; NaN outside. */
  timeAt(index: number): number {
    return index < 0 || index >= this.length ? NaN : (this.times[this.slotOf(index)] ?? NaN);
  }

  valueAt(name: string, index: number): number {
    if (index < 0 || index >= this.length) return NaN;
    return this.columns.get(name)?.[this.slotOf(index)] ?? NaN;
  }

  /** Newest value of a column; NaN where the newest row has none. */
  latest(name: string): number {
    return this.valueAt(name, this.length - 1);
  }

  /** Index of the first row at or after a time; `length` where there is none. */
  firstAtOrAfter(timeMs: number): number {
    let low = 0;
    let high = this.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.timeAt(middle) < timeMs) low = middle + 1;
      else high = middle;
    }
    return low;
  }

  private slotOf(index: number): number {
    return (this.written - this.length + index) % this.capacity;
  }

  private columnOf(name: string): Float64Array {
    let column = this.columns.get(name);
    if (!column) {
      column = new Float64Array(this.capacity).fill(NaN);
      this.columns.set(name, column);
    }
    return column;
  }
}
