import { DomainError } from '@cresthold/shared';
import { type ModbusClient, type ModbusPort, clientOver, payloadOf, sendRequest } from './modbus-client.js';
import { ModbusRefusal, type ModbusRequest, placeOf } from './modbus-request.js';

/** The payload of an answer, or why there is none. */
export type LinkOutcome = Buffer | DomainError;

/** What a session needs of its wire; the real one, or a simulated bus in tests. */
export interface ModbusExchanger {
  /** Set for good once the connection is of no more use. */
  readonly lost: DomainError | null;
  /** One request and its answer. @param timeoutMs longest wait for the answer, at least 1 */
  exchange(request: ModbusRequest, timeoutMs: number): Promise<LinkOutcome>;
  /** Waits; ends early when the link does. */
  pause(delayMs: number): Promise<void>;
  /** Ends the link: the request under way ends with the given error, later ones too. */
  end(error: DomainError): Promise<void>;
}

export interface ModbusLinkOptions {
  /** The wire as messages name it, e.g. `10.0.0.5:502`. */
  label: string;
  /** Requests in a row without any answer after which the connection counts as lost. */
  silencesUntilLost: number;
  /** Lets go of the wire; resolves when it is released. Called once. */
  release: () => Promise<void>;
  /**
   * Waits, where the wire needs it, until the next request may go out; null where it may at once. Resolves to
   * false where it may still not after the given time.
   */
  quiet?: (mostMs: number) => Promise<boolean> | null;
  /** What came in, of late, that is no answer to the request under way; null where nothing did. */
  heard?: () => string | null;
}

/** One request on the wire at a time, its outcome as a value. */
export class ModbusLink implements ModbusExchanger {
  lost: DomainError | null = null;
  private readonly client: ModbusClient;
  private settlePending: ((outcome: LinkOutcome) => void) | null = null;
  private pending: ModbusRequest | null = null;
  private endPause: (() => void) | null = null;
  private silences = 0;
  private released: Promise<void> | null = null;

  constructor(
    port: ModbusPort,
    private readonly options: ModbusLinkOptions,
  ) {
    this.client = clientOver(port);
    port.on('corrupt', (text) => {
      this.reject(text);
    });
    port.on('broken', (error) => void this.end(error));
  }

  async exchange(request: ModbusRequest, timeoutMs: number): Promise<LinkOutcome> {
    const quiet = this.lost ? null : (this.options.quiet?.(timeoutMs) ?? null);
    const isQuiet = quiet === null || (await quiet);
    if (this.lost) return this.lost;
    if (!isQuiet) return corrupt(request, 'the line is never silent, so that no request can go out');
    return this.send(request, timeoutMs);
  }

  pause(delayMs: number): Promise<void> {
    if (this.lost) return Promise.resolve();
    return new Promise((resolve) => {
      const finish = (): void => {
        clearTimeout(timer);
        this.endPause = null;
        resolve();
      };
      const timer = setTimeout(finish, delayMs);
      this.endPause = finish;
    });
  }

  end(error: DomainError): Promise<void> {
    this.lost ??= error;
    this.settlePending?.(error);
    this.endPause?.();
    this.released ??= this.release();
    return this.released;
  }

  private async release(): Promise<void> {
    // Stops the library's timer of the request under way.
    this.client.destroy(() => undefined);
    await this.options.release();
  }

  private send(request: ModbusRequest, timeoutMs: number): Promise<LinkOutcome> {
    return new Promise((resolve) => {
      const settle = (outcome: LinkOutcome): void => {
        this.settlePending = null;
        this.pending = null;
        resolve(outcome);
      };
      this.settlePending = settle;
      this.pending = request;
      this.client.setTimeout(timeoutMs);
      sendRequest(this.client, request, (error, answer) => {
        if (this.settlePending !== settle) return;
        const payload = error ? null : payloadOf(request, answer);
        if (payload) this.silences = 0;
        settle(payload ?? this.judge(request, error, timeoutMs));
      });
    });
  }

  /** What came is no answer to the request under way; a sign of life all the same. */
  private reject(text: string): void {
    if (!this.pending) return;
    this.silences = 0;
    this.settlePending?.(corrupt(this.pending, text));
  }

  private judge(request: ModbusRequest, error: unknown, timeoutMs: number): DomainError {
    const { modbusCode, errno } = (error ?? {}) as { modbusCode?: number; errno?: unknown };
    if (errno === 'ETIMEDOUT') {
      const heard = this.options.heard?.() ?? null;
      if (heard === null) return this.judgeSilence(request, timeoutMs);
      this.silences = 0;
      return corrupt(request, heard);
    }
    this.silences = 0;
    if (modbusCode !== undefined) {
      return new ModbusRefusal(placeOf(request), modbusCode, adviceOn(request, modbusCode));
    }
    if (errno === 'ECONNREFUSED') {
      const gone = new DomainError('adapter.disconnected', `${this.options.label}: the connection is gone.`);
      void this.end(gone);
      return gone;
    }
    return corrupt(request, error instanceof Error ? error.message : 'the answer does not fit the request');
  }

  private judgeSilence(request: ModbusRequest, timeoutMs: number): DomainError {
    this.silences += 1;
    const place = placeOf(request);
    if (this.silences >= this.options.silencesUntilLost) {
      const lost = new DomainError(
        'adapter.disconnected',
        `${this.options.label} left ${this.silences} requests in a row unanswered, the last to ${place}: ` +
          'the connection counts as lost.',
      );
      void this.end(lost);
      return lost;
    }
    const doubt = request.kind === 'read' ? '' : ' The write may have been carried out or not.';
    return new DomainError(
      'adapter.timeout',
      `${place}: no answer within ${Math.round(timeoutMs)} ms.${doubt}`,
    );
  }
}

function corrupt(request: ModbusRequest, detail: string): DomainError {
  return new DomainError('adapter.corrupt', `${placeOf(request)}: no valid answer (${detail}).`);
}

function adviceOn(request: ModbusRequest, exceptionCode: number): string {
  if (exceptionCode !== 1) return '';
  if (request.kind === 'mask-write') {
    return ' If it has no mask write (function code 22), set "Has mask write" to false for this address.';
  }
  if (request.kind === 'write-and-read-back') {
    return ' If it has no function code 23, turn "Read back" of the connection off.';
  }
  return '';
}
