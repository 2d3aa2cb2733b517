import { DomainError, type ErrorRecord } from '@cresthold/shared';

interface Pending {
  resolve: (data: unknown) => void;
  reject: (error: DomainError) => void;
  timer: NodeJS.Timeout;
}

/** Joins the replies of a host to the requests that wait for them; none waits for ever. */
export class PendingRequests {
  private readonly pending = new Map<number, Pending>();
  private nextId = 1;

  /**
   * @returns the id to send, and a promise that follows the reply and gives its data
   * @throws host.timeout (the promise) when no reply came within `timeoutMs`
   */
  open(what: string, timeoutMs: number): { requestId: number; reply: Promise<unknown> } {
    const requestId = this.nextId++;
    const reply = new Promise<unknown>((resolve, reject) => {
      const timer = setTimeout(() => {
        this.pending.delete(requestId);
        const text = `The rig host did not answer "${what}" within ${timeoutMs} ms.`;
        reject(new DomainError('host.timeout', text));
      }, timeoutMs);
      this.pending.set(requestId, { resolve, reject, timer });
    });
    return { requestId, reply };
  }

  /** A reply that nobody waits for any more is late, not wrong: it is dropped. */
  settle(requestId: number, error: ErrorRecord | null, data?: unknown): void {
    const pending = this.pending.get(requestId);
    if (!pending) return;
    this.pending.delete(requestId);
    clearTimeout(pending.timer);
    if (error) pending.reject(DomainError.fromRecord(error));
    else pending.resolve(data);
  }

  /** The host is gone: every request that still waits fails with this. */
  failAll(message: string): void {
    for (const pending of this.pending.values()) {
      clearTimeout(pending.timer);
      pending.reject(new DomainError('host.unavailable', message));
    }
    this.pending.clear();
  }
}
