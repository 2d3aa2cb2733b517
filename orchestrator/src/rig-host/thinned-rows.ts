/** Rows of unknown number in bounded room: where it is full every second one goes, and later ones come half as often. */
export class ThinnedRows<Row> {
  private rows: Row[] = [];
  private newest: Row | null = null;
  private every = 1;
  private count = 0;

  constructor(private readonly max: number) {}

  add(row: Row): void {
    this.newest = row;
    if (this.count++ % this.every !== 0) return;
    this.rows.push(row);
    // One place is kept for the newest.
    if (this.rows.length < this.max) return;
    this.rows = this.rows.filter((_, index) => index % 2 === 0);
    this.every *= 2;
  }

  /** Oldest first; the newest row is always the last, at most `max` in all. */
  all(): Row[] {
    const { rows, newest } = this;
    return newest === null || rows.at(-1) === newest ? [...rows] : [...rows, newest];
  }
}
