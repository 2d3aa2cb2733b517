import { inMemoryAdapter, memoryStore } from '@cresthold/adapters';
import { describe, expect, it } from 'vitest';
import type { BenchDefinition } from '../kit/bench-definition.js';
import { benches } from './benches.js';

function modelOf(bench: BenchDefinition) {
  const own = Object.entries(bench.ownOptions ?? {}).map(
    ([name, { schema }]) => [name, schema.parse(undefined)] as const,
  );
  return bench.makeModel({ seed: 1, isNoisy: true, isDrifting: true }, Object.fromEntries(own));
}

describe('every bench as a model in virtual time behind the in-memory adapter', () => {
  it.each(benches.map((bench) => [bench.name, bench] as const))('%s', async (name, bench) => {
    const model = modelOf(bench);
    const store = `bench-${name}`;
    memoryStore(store).useModel(model);
    const configuration = inMemoryAdapter.manifest.configurationSchema.parse({ store });
    const session = await inMemoryAdapter.open(configuration, new AbortController().signal);
    const addresses = model.values.map((value) =>
      inMemoryAdapter.manifest.addressSchema.parse({ name: value.name, points: value.points }),
    );
    const plan = session.planRead(addresses);
    for (const tS of [0.5, 3]) {
      model.advanceTo(tS);
      const { values, traces, faults, lost } = await session.read(plan);
      expect([lost, ...faults]).toEqual([null, ...model.values.map(() => null)]);
      model.values.forEach((value, i) => {
        if (value.points === 1) expect(values[i]).toBe(model.read(value.name));
        else expect(traces?.[i]).toEqual(model.readTrace(value.name));
      });
    }
    const heartbeat = model.values.findIndex((value) => value.name === 'heartbeat');
    const { faults } = await session.write([addresses[heartbeat] ?? addresses[0]!], [7]);
    expect(faults).toEqual([null]);
    expect(model.read('heartbeat')).toBe(7);
    await session.close();
  });
});
