import { DomainError } from '@cresthold/shared';
import type { LinkOutcome, ModbusExchanger } from '../modbus-link.js';
import type { ModbusRequest } from '../modbus-request.js';

/** A line with several units in virtual time: every answer takes its time, a dead unit takes the whole timeout. */
export class SimulatedBus implements ModbusExchanger {
  lost: DomainError | null = null;
  nowMs = 0;
  readonly asked = new Map<number, number>();
  readonly dead = new Set<number>();

  /** @param exchangeMs what a request and its answer take, with the silence between them */
  constructor(private readonly exchangeMs: number) {}

  exchange(request: ModbusRequest, timeoutMs: number): Promise<LinkOutcome> {
    const { unit } = request;
    this.asked.set(unit, (this.asked.get(unit) ?? 0) + 1);
    if (this.dead.has(unit)) {
      this.nowMs += timeoutMs;
      return Promise.resolve(new DomainError('adapter.timeout', `unit ${unit}: no answer`));
    }
    this.nowMs += this.exchangeMs;
    return Promise.resolve(Buffer.alloc(request.kind === 'read' ? request.count * 2 : 0));
  }

  pause(delayMs: number): Promise<void> {
    this.nowMs += delayMs;
    return Promise.resolve();
  }

  end(error: DomainError): Promise<void> {
    this.lost ??= error;
    return Promise.resolve();
  }
}
