/** Waiters of one kind of answer, served in the order in which they came. */
export class Bell<T> {
  private readonly waiting: ((value: T) => void)[] = [];

  next(): Promise<T> {
    return new Promise((resolve) => this.waiting.push(resolve));
  }

  ring(value: T): void {
    this.waiting.shift()?.(value);
  }
}
