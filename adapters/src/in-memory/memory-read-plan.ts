import type { DomainError } from '@cresthold/shared';
import type { ReadOutcome, ReadPlan } from '../contract.js';
import type { InMemoryAddress } from './in-memory.schema.js';

/** Addresses with the outcome that each read writes over. */
export class MemoryReadPlan implements ReadPlan {
  readonly requests = 1;
  readonly outcome: ReadOutcome;
  readonly traces: readonly (Float64Array | null)[];

  constructor(readonly addresses: readonly InMemoryAddress[]) {
    const count = addresses.length;
    this.traces = addresses.map(({ points }) => (points > 1 ? new Float64Array(points).fill(NaN) : null));
    this.outcome = {
      values: new Float64Array(count).fill(NaN),
      faults: new Array<DomainError | null>(count).fill(null),
      ...(this.traces.some((trace) => trace !== null) ? { traces: this.traces } : {}),
      lost: null,
    };
  }

  get count(): number {
    return this.addresses.length;
  }

  take(index: number, value: number): void {
    this.outcome.values[index] = value;
    this.outcome.faults[index] = null;
  }

  takeTrace(index: number, points: Float64Array): void {
    this.traces[index]?.set(points);
    this.outcome.faults[index] = null;
  }

  /** Leaves nothing of an earlier read. */
  fail(index: number, fault: DomainError): void {
    this.outcome.values[index] = NaN;
    this.traces[index]?.fill(NaN);
    this.outcome.faults[index] = fault;
  }
}
