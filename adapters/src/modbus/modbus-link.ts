import { DomainError } from '@cresthold/shared';
import {
  type ModbusClient,
  ModbusRefusal,
  type ModbusRequest,
  payloadOf,
  placeOf,
  sendRequest,
} from './modbus-request.js';

/** The payload of an answer, or why there is none. */
export type LinkOutcome = Buffer | DomainError;

export interface ModbusLinkOptions {
  /** The wire as messages name it, e.g. `10.0.0.5:502`. */
  label: string;
  /** Requests in a row without any answer after which the connection counts as lost. */
  silencesUntilLost: number;
  /** Lets go of the wire; resolves when it is released. Called once. */
  release: () => Promise<void>;
}

/**
 * One request on the wire at a time, its outcome as a value. The library tells late answers from
 * fresh ones by their transaction number and drops them; here an answer is taken only for the
 * request that waits.
 */
export class ModbusLink {
  /** Set for good once the connection is of no more use. */
  lost: DomainError | null = null;
  private settlePending: ((outcome: LinkOutcome) => void) | null = null;
  private silences = 0;
  private released: Promise<void> | null = null;

  constructor(
    private readonly client: ModbusClient,
    private readonly options: ModbusLinkOptions,
  ) {}

  /** @param timeoutMs longest wait for the answer, at least 1 */
  exchange(request: ModbusRequest, timeoutMs: number): Promise<LinkOutcome> {
    if (this.lost) return Promise.resolve(this.lost);
    return new Promise((resolve) => {
      const settle = (outcome: LinkOutcome): void => {
        this.settlePending = null;
        resolve(outcome);
      };
      this.settlePending = settle;
      this.client.setTimeout(timeoutMs);
      sendRequest(this.client, request, (error, answer) => {
        if (this.settlePending !== settle) return;
        const payload = error ? null : payloadOf(request, answer);
        if (payload) this.silences = 0;
        settle(payload ?? this.judge(request, error, timeoutMs));
      });
    });
  }

  /** Ends the link: the request under way ends with the given error, later ones too. */
  end(error: DomainError): Promise<void> {
    this.lost ??= error;
    this.settlePending?.(error);
    this.released ??= this.options.release();
    return this.released;
  }

  private judge(request: ModbusRequest, error: unknown, timeoutMs: number): DomainError {
    const place = placeOf(request);
    const { modbusCode, errno } = (error ?? {}) as { modbusCode?: number; errno?: unknown };
    if (errno === 'ETIMEDOUT') return this.judgeSilence(request, place, timeoutMs);
    this.silences = 0;
    if (modbusCode !== undefined) return new ModbusRefusal(place, modbusCode);
    if (errno === 'ECONNREFUSED') {
      const gone = new DomainError('adapter.disconnected', `${this.options.label}: the connection is gone.`);
      void this.end(gone);
      return gone;
    }
    const detail = error instanceof Error ? error.message : 'the answer does not fit the request';
    return new DomainError('adapter.corrupt', `${place}: no valid answer (${detail}).`);
  }

  private judgeSilence(request: ModbusRequest, place: string, timeoutMs: number): DomainError {
    this.silences += 1;
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
