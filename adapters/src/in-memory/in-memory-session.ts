import { DomainError } from '@cresthold/shared';
import type {
  AdapterSession,
  AddressFacts,
  ProbeOutcome,
  ReadOutcome,
  ReadPlan,
  WriteOutcome,
} from '../contract.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { type InMemoryAddress, inMemoryAddressSchema } from './in-memory.schema.js';
import { MemoryReadPlan } from './memory-read-plan.js';
import type { MemoryStore } from './memory-store.js';

const ignore = (): void => undefined;

/** A session on a store of this process; the reference for what the contract asks. */
export class InMemorySession implements AdapterSession<InMemoryAddress> {
  private tail: Promise<unknown> = Promise.resolve();
  private readonly generation: number;
  private ended: DomainError | null = null;
  private cancelWait: (() => void) | null = null;

  constructor(
    private readonly store: MemoryStore,
    private readonly storeName: string,
    private readonly timeoutMs: number,
  ) {
    this.generation = store.sessionGeneration;
  }

  describe(address: InMemoryAddress): AddressFacts {
    const { points, quantum, min, max } = parseOrMisconfigured(inMemoryAddressSchema, address, 'address');
    return { isWritable: this.isWritable(address), quantum, quantumOrigin: 0, min, max, points };
  }

  planRead(addresses: readonly InMemoryAddress[]): ReadPlan {
    return new MemoryReadPlan(
      addresses.map((address, index) =>
        parseOrMisconfigured(inMemoryAddressSchema, address, `addresses[${index}]`),
      ),
    );
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof MemoryReadPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(async () => {
      const failure = await this.answer();
      if (!failure) this.store.onRead?.();
      for (let i = 0; i < plan.count; i += 1) this.readOne(plan, i, failure);
      plan.outcome.lost = this.ended;
      return plan.outcome;
    });
  }

  async probe(address: InMemoryAddress): Promise<ProbeOutcome> {
    const plan = this.planRead([address]) as MemoryReadPlan;
    const { values, faults } = await this.read(plan);
    const fault = faults[0] ?? null;
    const trace = fault ? null : (plan.traces[0] ?? null);
    const value = values[0] ?? NaN;
    const shown = trace ? `${trace.length} points` : String(value);
    return { raw: fault ? '' : `${address.name} = ${shown}`, value, trace, fault };
  }

  async write(addresses: readonly InMemoryAddress[], values: ArrayLike<number>): Promise<WriteOutcome> {
    const parsed = addresses.map((address, index) =>
      parseOrMisconfigured(inMemoryAddressSchema, address, `addresses[${index}]`),
    );
    const asked = new Float64Array(values);
    return this.inTurn(async () => {
      const failure = await this.answer();
      const faults = parsed.map((address, index) => failure ?? this.writeOne(address, asked[index] ?? NaN));
      return { faults, lost: this.ended };
    });
  }

  close(): Promise<void> {
    this.ended ??= new DomainError('adapter.cancelled', 'The connection was closed.');
    this.cancelWait?.();
    return Promise.resolve();
  }

  private readOne(plan: MemoryReadPlan, index: number, failure: DomainError | null): void {
    const address = plan.addresses[index];
    if (address === undefined) return;
    if (failure) return plan.fail(index, failure);
    const { name, points } = address;
    const found = points > 1 ? this.store.trace(name) : this.store.get(name);
    if (found === undefined) plan.fail(index, this.unknown(name));
    else if (typeof found === 'number') plan.take(index, found);
    else if (found.length === points) plan.takeTrace(index, found);
    else plan.fail(index, this.otherLength(name, found.length, points));
  }

  private isWritable({ name, points, isWritable }: InMemoryAddress): boolean {
    return isWritable && points === 1 && (!this.store.has(name) || this.store.isWritable(name));
  }

  private writeOne(address: InMemoryAddress, value: number): DomainError | null {
    const { name, quantum, min, max } = address;
    if (!this.isWritable(address))
      return new DomainError('adapter.misconfigured', `"${name}" can only be read.`);
    if (!(value >= min && value <= max)) {
      const text = `"${name}": ${value} is outside what can be written: ${min} to ${max}.`;
      return new DomainError('adapter.misconfigured', text);
    }
    if (!this.store.has(name)) return this.unknown(name);
    if (this.store.take(name, quantum > 0 ? Math.round(value / quantum) * quantum : value)) return null;
    return new DomainError(
      'adapter.refused',
      `Store "${this.storeName}" did not take ${value} as "${name}".`,
    );
  }

  private otherLength(name: string, has: number, asked: number): DomainError {
    const text = `"${name}" of store "${this.storeName}" has ${has} points, not ${asked}.`;
    return new DomainError('adapter.refused', text);
  }

  private unknown(name: string): DomainError {
    return new DomainError('adapter.refused', `Store "${this.storeName}" has no value "${name}".`);
  }

  private inTurn<T>(task: () => Promise<T>): Promise<T> {
    const turn = this.tail.then(task);
    this.tail = turn.catch(ignore);
    return turn;
  }

  /** Null where the store answers; the session ends where the store is gone. */
  private async answer(): Promise<DomainError | null> {
    if (!this.ended && this.store.mood === 'silent') await this.waitInVain();
    const isGone = this.store.mood === 'gone' || this.store.sessionGeneration !== this.generation;
    if (isGone && !this.ended) {
      this.ended = new DomainError('adapter.disconnected', `Store "${this.storeName}" is gone.`);
    }
    if (this.ended) return this.ended;
    if (this.store.mood === 'silent') {
      const text = `Store "${this.storeName}" did not answer within ${this.timeoutMs} ms.`;
      return new DomainError('adapter.timeout', text);
    }
    if (this.store.mood === 'garbled') {
      return new DomainError('adapter.corrupt', `Store "${this.storeName}" sent no valid answer.`);
    }
    return null;
  }

  private waitInVain(): Promise<void> {
    return new Promise((resolve) => {
      const finish = (): void => {
        clearTimeout(timer);
        this.cancelWait = null;
        resolve();
      };
      const timer = setTimeout(finish, this.timeoutMs);
      this.cancelWait = finish;
    });
  }
}
