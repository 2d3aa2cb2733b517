/**
 * Follows how long the objective has been invalid. An episode is over once a whole dither period was valid,
 * so that an objective which flickers neither floods the record nor escapes the time to give up.
 */
export class SeekRetreat {
  private invalidS = 0;
  private validS = 0;

  /** @param periodS dither period, s */
  constructor(private readonly periodS: number) {}

  /** @returns true in the scan in which an episode begins */
  note(isValid: boolean, dtS: number): boolean {
    if (!isValid) {
      const isNew = this.invalidS === 0;
      this.invalidS += dtS;
      this.validS = 0;
      return isNew;
    }
    this.validS += dtS;
    if (this.validS >= this.periodS) this.invalidS = 0;
    return false;
  }

  /** Invalid time in the present episode, s. */
  get lastedS(): number {
    return this.invalidS;
  }
}
