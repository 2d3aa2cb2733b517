import type { RigModel, RigModelValue } from '@cresthold/shared';

/** Where the values of a store come from. */
export interface MemoryValues {
  has(name: string): boolean;
  isWritable(name: string): boolean;
  get(name: string): number | undefined;
  trace(name: string): Float64Array | undefined;
  /** @returns whether the value was taken */
  take(name: string, value: number): boolean;
}

/** Values set by hand. */
export class PlainValues implements MemoryValues {
  private readonly values = new Map<string, number>();
  private readonly traces = new Map<string, Float64Array>();

  has(name: string): boolean {
    return this.values.has(name) || this.traces.has(name);
  }

  isWritable(name: string): boolean {
    return !this.traces.has(name);
  }

  get(name: string): number | undefined {
    return this.values.get(name);
  }

  trace(name: string): Float64Array | undefined {
    return this.traces.get(name);
  }

  take(name: string, value: number): boolean {
    this.values.set(name, value);
    return true;
  }

  set(name: string, value: number): void {
    this.values.set(name, value);
  }

  setTrace(name: string, points: Float64Array): void {
    this.traces.set(name, points);
  }

  remove(name: string): void {
    this.values.delete(name);
    this.traces.delete(name);
  }
}

/** What a model's instruments show, and what its device takes. */
export class ModelValues implements MemoryValues {
  private readonly valueOf: ReadonlyMap<string, RigModelValue>;

  constructor(private readonly model: RigModel) {
    this.valueOf = new Map(model.values.map((value) => [value.name, value]));
  }

  has(name: string): boolean {
    return this.valueOf.has(name);
  }

  isWritable(name: string): boolean {
    return this.valueOf.get(name)?.isWritable ?? false;
  }

  get(name: string): number | undefined {
    return this.valueOf.get(name)?.points === 1 ? this.model.read(name) : undefined;
  }

  trace(name: string): Float64Array | undefined {
    const points = this.valueOf.get(name)?.points ?? 1;
    return points > 1 ? this.model.readTrace(name) : undefined;
  }

  take(name: string, value: number): boolean {
    return this.model.write(name, value);
  }
}
