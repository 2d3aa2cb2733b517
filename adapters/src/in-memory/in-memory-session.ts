import { DomainError } from '@cresthold/shared';
import type { AdapterSession, AddressFacts, ReadOutcome, ReadPlan, WriteOutcome } from '../contract.js';
import { parseOrMisconfigured } from '../parse-or-misconfigured.js';
import { type InMemoryAddress, inMemoryAddressSchema } from './in-memory.schema.js';
import type { MemoryStore } from './memory-store.js';

class MemoryReadPlan implements ReadPlan {
  readonly requests = 1;
  readonly outcome: ReadOutcome;

  constructor(readonly names: readonly string[]) {
    this.outcome = {
      values: new Float64Array(names.length).fill(NaN),
      faults: new Array<DomainError | null>(names.length).fill(null),
      lost: null,
    };
  }

  get count(): number {
    return this.names.length;
  }
}

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
    const { isWritable, quantum, min, max } = parseOrMisconfigured(inMemoryAddressSchema, address, 'address');
    return { isWritable, quantum, quantumOrigin: 0, min, max };
  }

  planRead(addresses: readonly InMemoryAddress[]): ReadPlan {
    return new MemoryReadPlan(
      addresses.map(
        (address, index) => parseOrMisconfigured(inMemoryAddressSchema, address, `addresses[${index}]`).name,
      ),
    );
  }

  read(plan: ReadPlan): Promise<ReadOutcome> {
    if (!(plan instanceof MemoryReadPlan)) throw new TypeError('the plan is of another adapter');
    return this.inTurn(async () => {
      const failure = await this.answer();
      if (!failure) this.store.onRead?.();
      plan.outcome.lost = this.ended;
      plan.names.forEach((name, index) => {
        const value = failure ? undefined : this.store.get(name);
        plan.outcome.values[index] = value ?? NaN;
        plan.outcome.faults[index] = failure ?? (value === undefined ? this.unknown(name) : null);
      });
      return plan.outcome;
    });
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

  private writeOne(address: InMemoryAddress, value: number): DomainError | null {
    const { name, quantum, min, max } = address;
    if (!address.isWritable) return new DomainError('adapter.misconfigured', `"${name}" can only be read.`);
    if (!(value >= min && value <= max)) {
      const text = `"${name}": ${value} is outside what can be written: ${min} to ${max}.`;
      return new DomainError('adapter.misconfigured', text);
    }
    if (!this.store.has(name)) return this.unknown(name);
    this.store.take(name, quantum > 0 ? Math.round(value / quantum) * quantum : value);
    return null;
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
