/** Keeps the least value of something and when it was. */
export class Least {
  private value = Infinity;
  private atTS = NaN;

  /** A value that is no number is passed over. */
  take(value: number, tS: number): void {
    if (!(value < this.value)) return;
    this.value = value;
    this.atTS = tS;
  }

  /** @returns null where no number was taken */
  get found(): { value: number; atTS: number } | null {
    return Number.isFinite(this.value) ? { value: this.value, atTS: this.atTS } : null;
  }
}
