/**
 * What is to be written on one line. A newer value of an actuator replaces an older one that is still
 * waiting; a value that the device did not accept waits for the next scan. Arrays are reused.
 */
export class PendingWrites {
  private indexes: number[] = [];
  private values: number[] = [];
  private sentIndexes: number[] = [];
  private sentValues: number[] = [];
  private readonly sentAddresses: unknown[] = [];
  /** Something was put since the last `take`. */
  hasNew = false;

  /** @param addressByIndex wire address of each channel index of the line */
  constructor(private readonly addressByIndex: ReadonlyMap<number, unknown>) {}

  get isEmpty(): boolean {
    return this.indexes.length === 0;
  }

  put(channelIndex: number, value: number): void {
    this.hasNew = true;
    const at = this.indexes.indexOf(channelIndex);
    if (at >= 0) this.values[at] = value;
    else {
      this.indexes.push(channelIndex);
      this.values.push(value);
    }
  }

  /** @returns everything that waits, in order; owned by this object until the next `take` */
  take(): { addresses: readonly unknown[]; values: readonly number[] } {
    [this.indexes, this.sentIndexes] = [this.sentIndexes, this.indexes];
    [this.values, this.sentValues] = [this.sentValues, this.values];
    this.indexes.length = 0;
    this.values.length = 0;
    this.hasNew = false;
    this.sentAddresses.length = 0;
    for (const index of this.sentIndexes) this.sentAddresses.push(this.addressByIndex.get(index));
    return { addresses: this.sentAddresses, values: this.sentValues };
  }

  /** Keeps what was not accepted, unless something newer waits already. */
  settle(faults: readonly unknown[]): void {
    for (let i = 0; i < this.sentIndexes.length; i += 1) {
      const index = this.sentIndexes[i];
      if (faults[i] === null || faults[i] === undefined || index === undefined) continue;
      if (this.indexes.includes(index)) continue;
      this.indexes.push(index);
      this.values.push(this.sentValues[i] ?? NaN);
    }
  }

  clear(): void {
    this.indexes.length = 0;
    this.values.length = 0;
    this.hasNew = false;
  }
}
