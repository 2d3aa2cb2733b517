import type { ConformanceFixture } from '../conformance/conformance-fixture.js';
import { inMemoryAdapter } from './in-memory.adapter.js';
import type { InMemoryAddress, InMemoryConfiguration } from './in-memory.schema.js';
import { dropMemoryStore, memoryStore } from './memory-store.js';

const address = (name: string, quantum = 0): InMemoryAddress =>
  inMemoryAdapter.manifest.addressSchema.parse({ name, quantum, min: -100, max: 100 });

let started = 0;

export const inMemoryFixture: ConformanceFixture<InMemoryConfiguration, InMemoryAddress> = {
  title: 'in-memory',
  adapter: inMemoryAdapter,
  timeoutMs: 50,
  provokes: ['refuse', 'read-only', 'silence', 'garble', 'cut', 'unreachable', 'trace'],
  malformedConfiguration: { store: '' },
  malformedAddress: { name: 7 },
  start() {
    started += 1;
    const name = `conformance-${started}`;
    const store = memoryStore(name);
    memoryStore(`${name}-gone`).mood = 'gone';
    for (const id of ['a', 'b', 'c', 'fixed']) store.set(id, 0);
    store.setTrace('pulse', Float64Array.of(0, 1, 0.5));
    return Promise.resolve({
      configuration: { store: name, timeoutMs: 50 },
      cells: [
        { address: address('a'), values: [1.25, -7] },
        { address: address('b', 0.5), values: [2.5, 3] },
        { address: address('c'), values: [0, 99] },
      ],
      traces: [
        {
          address: inMemoryAdapter.manifest.addressSchema.parse({ name: 'pulse', points: 3 }),
          points: [0, 1, 0.5],
        },
      ],
      peek: ({ name: id }) => store.get(id) ?? NaN,
      refused: address('missing'),
      readOnly: { ...address('fixed'), isWritable: false },
      unreachable: { store: `${name}-gone`, timeoutMs: 50 },
      silence: () => (store.mood = 'silent'),
      garble: () => (store.mood = 'garbled'),
      recover: () => (store.mood = 'answering'),
      cut: () => {
        store.endSessions();
      },
      stop: () => {
        dropMemoryStore(name);
        return Promise.resolve();
      },
    });
  },
};
