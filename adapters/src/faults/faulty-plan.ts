import type { DomainError, WireFault } from '@cresthold/shared';
import type { ReadOutcome, ReadPlan } from '../contract.js';
import { type Catch, damagedCatch, type Held, intactCount } from './damage.js';
import type { FaultControl } from './fault-control.js';

/** A read plan of the inner session with an outcome of its own, so that it can be damaged and held frozen. */
export class FaultyPlan implements ReadPlan {
  readonly outcome: { values: Float64Array; faults: (DomainError | null)[]; lost: DomainError | null } & {
    traces?: (Float64Array | null)[];
  };
  private readonly held: Held[];
  private concerned: number[] = [];
  private concernedRevision = -1;

  constructor(
    readonly inner: ReadPlan,
    private readonly addresses: readonly unknown[],
  ) {
    const { length } = addresses;
    this.held = new Array<Held>(length).fill(null);
    this.outcome = {
      values: new Float64Array(length).fill(NaN),
      faults: new Array<DomainError | null>(length).fill(null),
      lost: null,
    };
  }

  get count(): number {
    return this.inner.count;
  }

  get requests(): number {
    return this.inner.requests;
  }

  /** Takes what the device answered, as far as the fault lets it through. */
  take(read: ReadOutcome, fault: WireFault | null, control: FaultControl): ReadOutcome {
    this.copy(read);
    if (read.lost) return this.outcome;
    if (fault) this.damage(fault, control);
    if (fault?.kind !== 'freeze') this.hold();
    return this.outcome;
  }

  fail(fault: DomainError, lost: DomainError | null): ReadOutcome {
    this.outcome.values.fill(NaN);
    this.outcome.faults.fill(fault);
    this.outcome.traces?.forEach((trace) => trace?.fill(NaN));
    this.outcome.lost = lost;
    return this.outcome;
  }

  /** Indices of the addresses that faults of this control hit. */
  private concernedBy(control: FaultControl): readonly number[] {
    if (this.concernedRevision !== control.revision) {
      this.concernedRevision = control.revision;
      this.concerned = [...this.addresses.keys()].filter((index) => control.concerns(this.addresses[index]));
    }
    return this.concerned;
  }

  private copy({ values, faults, traces, lost }: ReadOutcome): void {
    this.outcome.values.set(values);
    faults.forEach((fault, index) => (this.outcome.faults[index] = fault));
    this.outcome.lost = lost;
    if (!traces) return;
    this.outcome.traces ??= traces.map((trace) => trace && new Float64Array(trace.length));
    traces.forEach((trace, index) => {
      if (trace) this.outcome.traces?.[index]?.set(trace);
    });
  }

  private damage(fault: WireFault, control: FaultControl): void {
    const concerned = this.concernedBy(control);
    const intact = intactCount(fault, concerned.length);
    for (const index of concerned.slice(intact)) {
      this.put(index, damagedCatch(fault, this.caught(index), this.held[index] ?? null));
    }
  }

  private hold(): void {
    for (let index = 0; index < this.held.length; index += 1) {
      if (this.outcome.faults[index] !== null) continue;
      const { value, trace } = this.caught(index);
      this.held[index] = { value, trace: trace && Float64Array.from(trace), fault: null };
    }
  }

  private caught(index: number): Catch {
    return {
      value: this.outcome.values[index] ?? NaN,
      trace: this.outcome.traces?.[index] ?? null,
      fault: this.outcome.faults[index] ?? null,
    };
  }

  private put(index: number, { value, trace, fault }: Catch): void {
    this.outcome.values[index] = value;
    this.outcome.faults[index] = fault;
    const own = this.outcome.traces?.[index];
    if (!own) return;
    if (trace) own.set(trace);
    else own.fill(NaN);
  }
}
