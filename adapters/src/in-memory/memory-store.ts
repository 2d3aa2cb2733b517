import type { RigModel } from '@cresthold/shared';
import { type MemoryValues, ModelValues, PlainValues } from './memory-values.js';

/** How a store behaves towards the sessions on it. */
export type MemoryMood =
  /** Answers. */
  | 'answering'
  /** Accepts requests and never answers. */
  | 'silent'
  /** Answers with something that is no valid answer. */
  | 'garbled'
  /** Ends open sessions and takes no new ones. */
  | 'gone';

/**
 * Named values that sessions of one process share, with hooks for tests and rehearsals. The values are set by
 * hand, or shown by a model.
 */
export class MemoryStore {
  mood: MemoryMood = 'answering';
  /** Every accepted write in order; emptied by the test that looks. */
  readonly writes: { name: string; value: number }[] = [];
  /** Called before each read, so that fresh values can be set, or a model taken on. */
  onRead: (() => void) | null = null;
  /** Called after each accepted write. */
  onWrite: ((name: string, value: number) => void) | null = null;
  private readonly plain = new PlainValues();
  private values: MemoryValues = this.plain;
  private generation = 0;

  /**
   * From now on the store shows the model's values, and writes go to the model. Virtual time is the caller's:
   * nothing moves until `model.advanceTo` is called.
   *
   * @example
   * memoryStore('rehearsal').useModel(model);
   * const session = await inMemoryAdapter.open({ store: 'rehearsal', timeoutMs: 100 }, signal);
   * model.advanceTo(0.05);
   * const outcome = await session.read(plan); // what the instruments show at 50 ms
   */
  useModel(model: RigModel): this {
    this.values = new ModelValues(model);
    return this;
  }

  /** Ends the open sessions as a broken wire would; new ones are welcome. */
  endSessions(): void {
    this.generation += 1;
  }

  /** What a session remembers to see that it was ended. */
  get sessionGeneration(): number {
    return this.generation;
  }

  /** @throws TypeError where a model shows the values */
  set(name: string, value: number): void {
    this.byHand().set(name, value);
  }

  /** @throws TypeError where a model shows the values */
  setTrace(name: string, points: Float64Array): void {
    this.byHand().setTrace(name, points);
  }

  /** @throws TypeError where a model shows the values */
  remove(name: string): void {
    this.byHand().remove(name);
  }

  /** The value, or undefined where the store has none of this name. */
  get(name: string): number | undefined {
    return this.values.get(name);
  }

  /** The points of a trace, owned by the store; undefined where it has none of this name. */
  trace(name: string): Float64Array | undefined {
    return this.values.trace(name);
  }

  has(name: string): boolean {
    return this.values.has(name);
  }

  /** False for what only can be read, however it is addressed. */
  isWritable(name: string): boolean {
    return this.values.isWritable(name);
  }

  /** What a session does with a write. @returns whether it was accepted */
  take(name: string, value: number): boolean {
    if (!this.values.take(name, value)) return false;
    this.writes.push({ name, value });
    this.onWrite?.(name, value);
    return true;
  }

  private byHand(): PlainValues {
    if (this.values !== this.plain) throw new TypeError('a model shows the values of this store');
    return this.plain;
  }
}

const stores = new Map<string, MemoryStore>();

/** The store of this name in this process, made at its first use. */
export function memoryStore(name: string): MemoryStore {
  const known = stores.get(name);
  if (known) return known;
  const store = new MemoryStore();
  stores.set(name, store);
  return store;
}

/** Forgets a store; sessions on it keep their own. */
export function dropMemoryStore(name: string): void {
  stores.delete(name);
}
