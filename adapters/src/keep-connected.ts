import type { DomainError } from '@cresthold/shared';
import type { Adapter, AdapterSession } from './contract.js';
import { asDomainError } from './known-error.js';
import { systemTimers, type TimerPort } from './timer-port.js';
import { WatchedSession } from './watched-session.js';

export type LinkState =
  /** The adapter is being asked to open. */
  | 'opening'
  | 'open'
  /** An opening failed or the session was lost; the next opening follows after `retryInMs`. */
  | 'waiting'
  /** Retrying is of no use: the configuration is wrong. */
  | 'failed'
  | 'closed';

export interface LinkStatus {
  state: LinkState;
  /** Why it is not open; null while open, closed and at the first opening. */
  error: DomainError | null;
  /** Wait before the next opening, ms; null unless `waiting`. */
  retryInMs: number | null;
}

export interface KeepConnectedHandlers<Address> {
  /** A fresh session: plans are made anew for each. */
  onOpen(session: AdapterSession<Address>): void;
  /** The session handed out last is dead. */
  onLost(error: DomainError): void;
  onStatus?(status: LinkStatus): void;
}

export interface KeepConnectedOptions {
  /** First wait before opening again; doubles up to `mostDelayMs`, and starts over once the device has answered. */
  firstDelayMs?: number;
  mostDelayMs?: number;
  timers?: TimerPort;
}

export interface KeptConnection {
  readonly status: LinkStatus;
  /** Ends openings, waits and session; resolves when the wire is released. No handler is called afterwards. */
  close(): Promise<void>;
}

/**
 * Keeps one connection open: opens it, and opens it again whenever an opening fails or a read or
 * write of its session reports `lost`. Waits are the same every time: 100, 200, 400 … 2000 ms.
 *
 * @example
 * const link = keepConnected(modbusTcpAdapter, configuration, { onOpen, onLost });
 * await link.close();
 */
export function keepConnected<Configuration, Address>(
  adapter: Adapter<Configuration, Address>,
  configuration: Configuration,
  handlers: KeepConnectedHandlers<Address>,
  options: KeepConnectedOptions = {},
): KeptConnection {
  const keeper = new ConnectionKeeper(adapter, configuration, handlers, options);
  keeper.start();
  return keeper;
}

class ConnectionKeeper<Configuration, Address> implements KeptConnection {
  status: LinkStatus = { state: 'opening', error: null, retryInMs: null };
  private readonly firstDelayMs: number;
  private readonly mostDelayMs: number;
  private readonly timers: TimerPort;
  private readonly abort = new AbortController();
  private nextDelayMs: number;
  private cancelWait: (() => void) | null = null;
  private session: AdapterSession<Address> | null = null;
  /** Opening or releasing that `close` must wait for. */
  private underWay: Promise<void> = Promise.resolve();

  constructor(
    private readonly adapter: Adapter<Configuration, Address>,
    private readonly configuration: Configuration,
    private readonly handlers: KeepConnectedHandlers<Address>,
    options: KeepConnectedOptions,
  ) {
    this.firstDelayMs = options.firstDelayMs ?? 100;
    this.mostDelayMs = options.mostDelayMs ?? 2000;
    this.timers = options.timers ?? systemTimers;
    this.nextDelayMs = this.firstDelayMs;
  }

  start(): void {
    this.underWay = this.open();
  }

  async close(): Promise<void> {
    const wasClosed = this.status.state === 'closed';
    this.status = { state: 'closed', error: null, retryInMs: null };
    if (!wasClosed) this.handlers.onStatus?.(this.status);
    this.abort.abort();
    this.cancelWait?.();
    await this.underWay;
    await this.session?.close();
  }

  private async open(): Promise<void> {
    this.report('opening', this.status.error, null);
    let session: AdapterSession<Address>;
    try {
      session = await this.adapter.open(this.configuration, this.abort.signal);
    } catch (error) {
      this.judgeFailure(error);
      return;
    }
    this.session = session;
    if (this.isClosed()) return;
    this.report('open', null, null);
    try {
      this.handlers.onOpen(this.watched(session));
    } catch (error) {
      // E.g. an address that cannot be planned: an open wire would be of no use.
      this.session = null;
      await session.close();
      this.judgeFailure(error);
    }
  }

  private judgeFailure(thrown: unknown): void {
    const error = asDomainError(thrown);
    if (error === null) throw thrown;
    if (this.isClosed()) return;
    if (error.code === 'adapter.misconfigured') this.report('failed', error, null);
    else this.waitAndOpen(error);
  }

  private watched(session: AdapterSession<Address>): AdapterSession<Address> {
    return new WatchedSession(session, {
      onAnswered: () => {
        this.nextDelayMs = this.firstDelayMs;
      },
      onLost: (error) => {
        this.lose(session, error);
      },
    });
  }

  private lose(session: AdapterSession<Address>, error: DomainError): void {
    if (this.session !== session || this.isClosed()) return;
    this.session = null;
    this.underWay = session.close();
    this.handlers.onLost(error);
    this.waitAndOpen(error);
  }

  private waitAndOpen(error: DomainError): void {
    if (this.isClosed()) return;
    const delayMs = this.nextDelayMs;
    this.nextDelayMs = Math.min(delayMs * 2, this.mostDelayMs);
    this.report('waiting', error, delayMs);
    this.cancelWait = this.timers.after(delayMs, () => {
      this.cancelWait = null;
      // One wire at a time: some devices take a single connection only.
      this.underWay = this.underWay.then(() => (this.isClosed() ? undefined : this.open()));
    });
  }

  private report(state: LinkState, error: DomainError | null, retryInMs: number | null): void {
    this.status = { state, error, retryInMs };
    this.handlers.onStatus?.(this.status);
  }

  private isClosed(): boolean {
    return this.status.state === 'closed';
  }
}
