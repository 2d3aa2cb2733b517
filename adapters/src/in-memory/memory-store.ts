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

/** Named values that sessions of one process share, with hooks for tests and rehearsals. */
export class MemoryStore {
  mood: MemoryMood = 'answering';
  /** Every accepted write in order; emptied by the test that looks. */
  readonly writes: { name: string; value: number }[] = [];
  /** Called before each read, so that a model can set fresh values. */
  onRead: (() => void) | null = null;
  /** Called after each accepted write. */
  onWrite: ((name: string, value: number) => void) | null = null;
  private readonly values = new Map<string, number>();
  private generation = 0;

  /** Ends the open sessions as a broken wire would; new ones are welcome. */
  endSessions(): void {
    this.generation += 1;
  }

  /** What a session remembers to see that it was ended. */
  get sessionGeneration(): number {
    return this.generation;
  }

  set(name: string, value: number): void {
    this.values.set(name, value);
  }

  /** The value, or undefined where the store has none of this name. */
  get(name: string): number | undefined {
    return this.values.get(name);
  }

  has(name: string): boolean {
    return this.values.has(name);
  }

  remove(name: string): void {
    this.values.delete(name);
  }

  /** What a session does with an accepted write. */
  take(name: string, value: number): void {
    this.values.set(name, value);
    this.writes.push({ name, value });
    this.onWrite?.(name, value);
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
