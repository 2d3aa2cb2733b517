import { DomainError } from '@cresthold/shared';
import type { AdapterSession, AddressFacts, ReadOutcome, ReadPlan, WriteOutcome } from '../contract.js';
import type { FaultControl } from './fault-control.js';

/** A read plan of the inner session with an outcome of its own, so that it can be held frozen. */
class FaultyPlan implements ReadPlan {
  readonly outcome: ReadOutcome;

  constructor(readonly inner: ReadPlan) {
    this.outcome = {
      values: new Float64Array(inner.count).fill(NaN),
      faults: new Array<DomainError | null>(inner.count).fill(null),
      lost: null,
    };
  }

  get count(): number {
    return this.inner.count;
  }

  get requests(): number {
    return this.inner.requests;
  }

  take({ values, faults, lost }: ReadOutcome): ReadOutcome {
    this.outcome.values.set(values);
    faults.forEach((fault, index) => (this.outcome.faults[index] = fault));
    this.outcome.lost = lost;
    return this.outcome;
  }

  fail(fault: DomainError, lost: DomainError | null): ReadOutcome {
    this.outcome.values.fill(NaN);
    this.outcome.faults.fill(fault);
    this.outcome.lost = lost;
    return this.outcome;
  }
}

const ignore = (): void => undefined;

/** Passes calls on, or fails them as its control says; keeps the duties of the contract either way. */
export class FaultySession<Address> implements AdapterSession<Address> {
  private readonly generation: number;
  private tail: Promise<unknown> = Promise.resolve();
  private ended: DomainError | null = null;
  private cancelWait: (() => void) | null = null;

  constructor(
    private readonly inner: AdapterSession<Address>,
    private readonly control: FaultControl,
  ) {
    this.generation = control.sessionGeneration;
  }

  describe(address: Address): AddressFacts {
    return this.inner.describe(address);
  }

  planRead(addresses: readonly Address[]): ReadPlan {
    return new FaultyPlan(this.inner.planRead(addresses));
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof FaultyPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(async () => {
      const failure = await this.failure();
      if (failure) return plan.fail(failure, this.ended);
      const hasValues = plan.outcome.values.some((value) => !Number.isNaN(value));
      if (this.control.fault.kind === 'freeze' && hasValues) return plan.outcome;
      const outcome = await this.inner.read(plan.inner);
      return this.control.fault.kind === 'corrupt' && !outcome.lost
        ? plan.fail(corrupt(), null)
        : plan.take(outcome);
    });
  }

  write(addresses: readonly Address[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const asked = new Float64Array(values);
    const asking = [...addresses];
    return this.inTurn(async () => {
      const failure = await this.failure();
      if (failure) return { faults: asking.map(() => failure), lost: this.ended };
      if (this.control.fault.kind === 'freeze') return { faults: asking.map(() => null), lost: null };
      const outcome = await this.inner.write(asking, asked);
      return this.control.fault.kind === 'corrupt' && !outcome.lost
        ? { faults: asking.map(corrupt), lost: null }
        : outcome;
    });
  }

  async close(): Promise<void> {
    this.ended ??= new DomainError('adapter.cancelled', 'The connection was closed.');
    this.cancelWait?.();
    await this.inner.close();
  }

  private inTurn<T>(task: () => Promise<T>): Promise<T> {
    const turn = this.tail.then(task);
    this.tail = turn.catch(ignore);
    return turn;
  }

  /** What befalls a call before it reaches the inner session; null where it gets through. */
  private async failure(): Promise<DomainError | null> {
    const { fault } = this.control;
    if (!this.ended && fault.kind === 'delay') await this.wait(fault.delayMs);
    if (!this.ended && fault.kind === 'drop') await this.wait(fault.timeoutMs);
    if (!this.ended && this.control.sessionGeneration !== this.generation) {
      this.ended = new DomainError('adapter.disconnected', 'The connection was cut on purpose.');
    }
    if (this.ended) return this.ended;
    if (fault.kind !== 'drop') return null;
    return new DomainError('adapter.timeout', `The answer was dropped on purpose (${fault.timeoutMs} ms).`);
  }

  private wait(delayMs: number): Promise<void> {
    return new Promise((resolve) => {
      const finish = (): void => {
        clearTimeout(timer);
        this.cancelWait = null;
        resolve();
      };
      const timer = setTimeout(finish, delayMs);
      this.cancelWait = finish;
    });
  }
}

function corrupt(): DomainError {
  return new DomainError('adapter.corrupt', 'The answer was corrupted on purpose.');
}
