import { DomainError } from '@cresthold/shared';

/**
 * Keeps three duties of a session: one call is on the wire at a time and the others wait in order; every wait for
 * an answer is bounded; and once the connection ends, by `close` or by a loss, every call is told.
 *
 * @example
 * const calls = new CallQueue();
 * const reply = await calls.run(
 *   () => calls.waitFor(500, 'the bath', (settle) => { onLine = settle; socket.write('GET temp\n'); }),
 *   (ended) => ended.code,
 * );
 */
export class CallQueue {
  private tail: Promise<unknown> = Promise.resolve();
  private why: DomainError | null = null;
  private abandon: ((ended: DomainError) => void) | null = null;

  /** Why the connection has ended; null while it lives. */
  get ended(): DomainError | null {
    return this.why;
  }

  /**
   * Runs a call when its turn comes.
   *
   * @param whenEnded makes the outcome where the connection has ended, before or in the middle of the call
   */
  run<T>(call: () => Promise<T>, whenEnded: (ended: DomainError) => T): Promise<T> {
    const turn = this.tail.then(async () => {
      if (this.why) return whenEnded(this.why);
      try {
        return await call();
      } catch (error) {
        if (this.why && error === this.why) return whenEnded(this.why);
        throw error;
      }
    });
    this.tail = turn.catch(() => undefined);
    return turn;
  }

  /**
   * Within a call: waits until `settle` is called.
   *
   * @param timeoutMs longest wait, ms; what is not above 0 is over at once
   * @param who is named where it does not answer, e.g. "The bath"
   * @param begin sends the request, and calls `settle` when the answer is there
   * @throws adapter.timeout, or the error with which the connection ended
   */
  waitFor<T>(timeoutMs: number, who: string, begin: (settle: (answer: T) => void) => void): Promise<T> {
    if (this.why) return Promise.reject(this.why);
    return new Promise<T>((resolve, reject) => {
      const over = (): void => {
        clearTimeout(timer);
        this.abandon = null;
      };
      const timer = setTimeout(
        () => {
          over();
          reject(new DomainError('adapter.timeout', `${who} did not answer in time.`));
        },
        Math.max(0, timeoutMs),
      );
      this.abandon = (ended) => {
        over();
        reject(ended);
      };
      begin((answer) => {
        over();
        resolve(answer);
      });
    });
  }

  /** Ends all calls, under way and to come; the first error stays. */
  end(error: DomainError): void {
    if (this.why) return;
    this.why = error;
    this.abandon?.(error);
  }
}
