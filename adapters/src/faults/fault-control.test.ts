import { describe, expect, it } from 'vitest';
import { inMemoryAdapter } from '../in-memory/in-memory.adapter.js';
import { memoryStore } from '../in-memory/memory-store.js';
import { FaultControl } from './fault-control.js';
import { withFaults } from './with-faults.js';

describe('a fault', () => {
  const drawn = (seed: number, probability = 0.3) => {
    const control = new FaultControl();
    control.fault = { kind: 'corrupt', probability, seed };
    return Array.from({ length: 1000 }, () => control.draw() !== null);
  };

  it('strikes by its probability, the same calls for the same seed', () => {
    expect(drawn(7)).toEqual(drawn(7));
    expect(drawn(7)).not.toEqual(drawn(8));
    // A binomial count of 1000 at 0.3 is within 5 standard deviations (14.5 each) of 300.
    expect(Math.abs(drawn(7).filter(Boolean).length - 300)).toBeLessThan(73);
    expect(drawn(7, 0).some(Boolean)).toBe(false);
    expect(drawn(7, 1).every(Boolean)).toBe(true);
  });

  it('begins and ends at its times', () => {
    let nowMs = 5000;
    const control = new FaultControl({ nowMs: () => nowMs });
    control.fault = { kind: 'corrupt', fromS: 1, untilS: 2 };
    const isActive = [0, 999, 1000, 1999, 2000].map((sinceMs) => {
      nowMs = 5000 + sinceMs;
      return control.isActive && control.draw() !== null;
    });
    expect(isActive).toEqual([false, false, true, true, false]);
  });

  it('is refused where it is none', () => {
    const control = new FaultControl();
    expect(() => control.put({ kind: 'delay', delayMs: -1 })).toThrow();
    expect(control.fault).toBeNull();
  });
});

describe('through the wrapper', () => {
  it('a delay takes as long as it says, on the clock that is given', async () => {
    const waits: number[] = [];
    const timers = {
      after: (delayMs: number, task: () => void) => {
        waits.push(delayMs);
        queueMicrotask(task);
        return () => undefined;
      },
    };
    const control = new FaultControl({ timers });
    const store = memoryStore('fault-waits');
    for (const name of ['a', 'b']) store.set(name, 1);
    const adapter = withFaults(inMemoryAdapter, control);
    const session = await adapter.open({ store: 'fault-waits', timeoutMs: 50 }, new AbortController().signal);
    const addresses = ['a', 'b'].map((name) => inMemoryAdapter.manifest.addressSchema.parse({ name }));
    const plan = session.planRead(addresses);
    control.fault = { kind: 'delay', delayMs: 40 };
    await session.read(plan);
    control.fault = { kind: 'slow-device', perValueMs: 7 };
    await session.read(plan);
    control.fault = { kind: 'jitter', mostMs: 100, seed: 3 };
    for (let i = 0; i < 50; i += 1) await session.read(plan);
    expect(waits.slice(0, 2)).toEqual([40, 14]);
    const jitter = waits.slice(2);
    expect(Math.min(...jitter)).toBeLessThan(20);
    expect(Math.max(...jitter)).toBeGreaterThan(80);
    expect(Math.max(...jitter)).toBeLessThan(100);
    await session.close();
  });

  it('probes and estimates come through, and a fault hits a probe as it does a read', async () => {
    const control = new FaultControl();
    memoryStore('fault-probe').set('a', 20);
    const adapter = withFaults(inMemoryAdapter, control);
    const configuration = { store: 'fault-probe', timeoutMs: 50 };
    const session = await adapter.open(configuration, new AbortController().signal);
    const address = inMemoryAdapter.manifest.addressSchema.parse({ name: 'a' });
    expect(adapter.estimate?.(configuration, [address])).toEqual({ requests: 1, wireS: 0 });
    control.fault = { kind: 'wrong-scale' };
    expect(await session.probe?.(address)).toMatchObject({ value: 68, fault: null, raw: 'a = 20' });
    control.fault = { kind: 'exception', text: 'busy' };
    const refused = await session.probe?.(address);
    expect([refused?.fault?.code, refused?.raw, refused?.value]).toEqual(['adapter.refused', '', NaN]);
    await session.close();
  });

  it('traces are frozen and damaged as values are', async () => {
    const control = new FaultControl();
    const store = memoryStore('fault-trace');
    store.setTrace('t', Float64Array.of(1, 2));
    const adapter = withFaults(inMemoryAdapter, control);
    const session = await adapter.open({ store: 'fault-trace', timeoutMs: 50 }, new AbortController().signal);
    const plan = session.planRead([inMemoryAdapter.manifest.addressSchema.parse({ name: 't', points: 2 })]);
    const points = async () => [...((await session.read(plan)).traces?.[0] ?? [])];
    expect(await points()).toEqual([1, 2]);
    store.setTrace('t', Float64Array.of(3, 4));
    control.fault = { kind: 'freeze' };
    expect(await points()).toEqual([1, 2]);
    control.fault = { kind: 'wrong-scale', factor: 10, offset: 1 };
    expect(await points()).toEqual([31, 41]);
    control.fault = { kind: 'corrupt' };
    expect(await points()).toEqual([NaN, NaN]);
    await session.close();
  });
});
