/** One wait at a time that something else can end. */
export class Waiter {
  private finish: (() => void) | null = null;

  /** Resolves after the delay, or earlier when woken. @param delayMs above 0 */
  wait(delayMs: number): Promise<void> {
    if (this.finish) throw new Error('somebody waits already');
    return new Promise((resolve) => {
      const finish = (): void => {
        clearTimeout(timer);
        this.finish = null;
        resolve();
      };
      const timer = setTimeout(finish, Math.ceil(delayMs));
      this.finish = finish;
    });
  }

  wake(): void {
    this.finish?.();
  }
}
