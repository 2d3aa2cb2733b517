import { describe, expect, it } from 'vitest';
import type { ConformanceFixture } from '../conformance/conformance-fixture.js';
import { describeAdapterConformance } from '../conformance/describe-adapter-conformance.js';
import { inMemoryAdapter } from '../in-memory/in-memory.adapter.js';
import type { InMemoryAddress, InMemoryConfiguration } from '../in-memory/in-memory.schema.js';
import { memoryStore } from '../in-memory/memory-store.js';
import { FaultControl } from './fault-control.js';
import { withFaults } from './with-faults.js';

const address = (name: string): InMemoryAddress => inMemoryAdapter.manifest.addressSchema.parse({ name });
const control = new FaultControl();
const adapter = withFaults(inMemoryAdapter, control);
const never = new AbortController().signal;

const fixture: ConformanceFixture<InMemoryConfiguration, InMemoryAddress> = {
  title: 'an adapter with faults',
  adapter,
  timeoutMs: 50,
  provokes: ['silence', 'garble', 'cut'],
  malformedConfiguration: {},
  malformedAddress: {},
  start() {
    const store = memoryStore('with-faults-conformance');
    for (const name of ['a', 'b', 'c']) store.set(name, 0);
    control.fault = { kind: 'none' };
    return Promise.resolve({
      configuration: { store: 'with-faults-conformance', timeoutMs: 50 },
      cells: ['a', 'b', 'c'].map((name, index) => ({ address: address(name), values: [index, -1] as const })),
      peek: ({ name }) => store.get(name) ?? NaN,
      silence: () => (control.fault = { kind: 'drop', timeoutMs: 50 }),
      garble: () => (control.fault = { kind: 'corrupt' }),
      recover: () => (control.fault = { kind: 'none' }),
      cut: () => {
        control.disconnect();
      },
      stop: () => Promise.resolve(),
    });
  },
};

describeAdapterConformance(fixture, { describe, it });

describe('a frozen wire', () => {
  it('answers with the last good values and swallows writes', async () => {
    const store = memoryStore('with-faults-freeze');
    store.set('a', 5);
    control.fault = { kind: 'none' };
    const session = await adapter.open({ store: 'with-faults-freeze', timeoutMs: 50 }, never);
    const plan = session.planRead([address('a')]);
    await session.read(plan);
    control.fault = { kind: 'freeze' };
    store.set('a', 6);
    expect((await session.read(plan)).values[0]).toBe(5);
    expect(await session.write([address('a')], [7])).toEqual({ faults: [null], lost: null });
    expect(store.get('a')).toBe(6);
    control.fault = { kind: 'none' };
    expect((await session.read(plan)).values[0]).toBe(6);
    await session.close();
  });
});

describe('a slow wire', () => {
  it('delays, and a close does not wait for it', async () => {
    memoryStore('with-faults-slow').set('a', 5);
    const session = await adapter.open({ store: 'with-faults-slow', timeoutMs: 50 }, never);
    control.fault = { kind: 'delay', delayMs: 1 };
    const plan = session.planRead([address('a')]);
    expect((await session.read(plan)).values[0]).toBe(5);
    control.fault = { kind: 'delay', delayMs: 60_000 };
    const reading = session.read(plan);
    await new Promise((resolve) => setImmediate(resolve));
    await session.close();
    expect((await reading).lost?.code).toBe('adapter.cancelled');
  });
});
