import type { RigModel } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { inMemoryAdapter } from './in-memory.adapter.js';
import type { InMemoryAddress } from './in-memory.schema.js';
import { memoryStore } from './memory-store.js';

/** A tank that fills at the commanded rate, with the ripple of its surface as a trace. */
class TankModel implements RigModel {
  readonly values = [
    { name: 'inflow', unit: 'l/s', isWritable: true, points: 1 },
    { name: 'level', unit: 'l', isWritable: false, points: 1 },
    { name: 'surface', unit: 'mm', isWritable: false, points: 4 },
  ];
  tS = 0;
  private inflow = 0;
  private level = 0;
  private readonly surface = new Float64Array(4);

  advanceTo(tS: number): void {
    if (tS <= this.tS) return;
    this.level += this.inflow * (tS - this.tS);
    this.tS = tS;
    this.surface.forEach((_, index) => (this.surface[index] = this.level + index));
  }

  read(name: string): number {
    return name === 'inflow' ? this.inflow : this.level;
  }

  readTrace(): Float64Array {
    return this.surface;
  }

  write(name: string, value: number): boolean {
    if (name !== 'inflow' || value > 10) return false;
    this.inflow = value;
    return true;
  }
}

const address = (name: string, more: object = {}): InMemoryAddress =>
  inMemoryAdapter.manifest.addressSchema.parse({ name, ...more });
const level = address('level');
const inflow = address('inflow');
const surface = address('surface', { points: 4 });

let tanks = 0;

async function openTank() {
  const model = new TankModel();
  tanks += 1;
  const store = memoryStore(`tank-${tanks}`).useModel(model);
  const configuration = { store: `tank-${tanks}`, timeoutMs: 50 };
  const session = await inMemoryAdapter.open(configuration, new AbortController().signal);
  return { model, store, session };
}

describe('a model behind the in-memory adapter', () => {
  it('goes on only as its caller says, and shows its instruments of then', async () => {
    const { model, session } = await openTank();
    const plan = session.planRead([level, surface, inflow]);
    await session.write([inflow], [2]);
    expect([...(await session.read(plan)).values]).toEqual([0, NaN, 2]);
    model.advanceTo(1.5);
    const outcome = await session.read(plan);
    expect([...outcome.values]).toEqual([3, NaN, 2]);
    expect(outcome.traces?.[1]).toEqual(Float64Array.of(3, 4, 5, 6));
    expect(outcome.traces?.[0]).toBeNull();
    expect(outcome.faults).toEqual([null, null, null]);
  });

  it('is not written where the model says so, and refuses what its device refuses', async () => {
    const { session, store } = await openTank();
    expect(session.describe(level).isWritable).toBe(false);
    expect(session.describe(inflow).isWritable).toBe(true);
    const outcome = await session.write([level, inflow, inflow], [1, 11, 7]);
    expect(outcome.faults.map((fault) => fault?.code ?? null)).toEqual([
      'adapter.misconfigured',
      'adapter.refused',
      null,
    ]);
    expect(store.writes).toEqual([{ name: 'inflow', value: 7 }]);
  });

  it('refuses names and lengths that the model does not have, and leaves nothing of an earlier trace', async () => {
    const { session, store } = await openTank();
    const wrong = [
      address('depth'),
      address('surface'),
      address('surface', { points: 5 }),
      address('level', { points: 2 }),
    ];
    const outcome = await session.read(session.planRead(wrong));
    expect(outcome.faults.map((fault) => fault?.code)).toEqual(wrong.map(() => 'adapter.refused'));
    const plan = session.planRead([surface]);
    await session.read(plan);
    store.endSessions();
    expect((await session.read(plan)).traces?.[0]).toEqual(new Float64Array(4).fill(NaN));
  });

  it('is probed', async () => {
    const { session } = await openTank();
    expect(await session.probe?.(inflow)).toEqual({ raw: 'inflow = 0', value: 0, trace: null, fault: null });
    expect((await session.probe?.(surface))?.trace).toHaveLength(4);
    expect((await session.probe?.(address('depth')))?.fault?.code).toBe('adapter.refused');
  });

  it('is not set by hand', () => {
    const store = memoryStore('tank-by-hand').useModel(new TankModel());
    expect(() => store.set('level', 1)).toThrow(TypeError);
  });
});
