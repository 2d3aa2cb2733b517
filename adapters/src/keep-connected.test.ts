import { describe, expect, it } from 'vitest';
import type { Adapter, AdapterSession } from './contract.js';
import { inMemoryAdapter } from './in-memory/in-memory.adapter.js';
import type { InMemoryAddress, InMemoryConfiguration } from './in-memory/in-memory.schema.js';
import { type MemoryStore, memoryStore } from './in-memory/memory-store.js';
import { keepConnected, type KeptConnection } from './keep-connected.js';
import type { TimerPort } from './timer-port.js';

/** Waits end as soon as they can; a busy machine gets time. */
const patient = { timeout: 4000, interval: 1 };

class FakeTimers implements TimerPort {
  readonly delaysMs: number[] = [];
  private task: (() => void) | null = null;

  after(delayMs: number, task: () => void): () => void {
    this.delaysMs.push(delayMs);
    this.task = task;
    return () => {
      this.task = null;
    };
  }

  get isWaiting(): boolean {
    return this.task !== null;
  }

  fire(): void {
    const task = this.task;
    this.task = null;
    task?.();
  }
}

const address: InMemoryAddress = inMemoryAdapter.manifest.addressSchema.parse({ name: 'a' });

interface Bench {
  store: MemoryStore;
  timers: FakeTimers;
  sessions: AdapterSession<InMemoryAddress>[];
  losses: string[];
  states: string[];
  link: KeptConnection;
}

let benches = 0;

function startBench(mood: MemoryStore['mood'] = 'answering', adapter = inMemoryAdapter): Bench {
  benches += 1;
  const name = `keep-connected-${benches}`;
  const store = memoryStore(name);
  store.set('a', 1);
  store.mood = mood;
  const bench: Omit<Bench, 'link'> = {
    store,
    timers: new FakeTimers(),
    sessions: [],
    losses: [],
    states: [],
  };
  const link = keepConnected<InMemoryConfiguration, InMemoryAddress>(
    adapter,
    { store: name, timeoutMs: 20 },
    {
      onOpen: (session) => bench.sessions.push(session),
      onLost: (error) => bench.losses.push(error.code),
      onStatus: ({ state }) => bench.states.push(state),
    },
    { timers: bench.timers },
  );
  return { ...bench, link };
}

async function nextWait({ timers }: Bench): Promise<void> {
  await expect.poll(() => timers.isWaiting, patient).toBe(true);
}

const newest = ({ sessions }: Bench): AdapterSession<InMemoryAddress> => {
  const session = sessions.at(-1);
  if (!session) throw new Error('no session yet');
  return session;
};

const readOnce = async (session: AdapterSession<InMemoryAddress>) =>
  session.read(session.planRead([address]));

describe('keepConnected', () => {
  it('hands out a session and closes it', async () => {
    const bench = startBench();
    await expect.poll(() => bench.sessions.length, patient).toBe(1);
    expect((await readOnce(newest(bench))).values[0]).toBe(1);
    await bench.link.close();
    expect((await readOnce(newest(bench))).lost?.code).toBe('adapter.cancelled');
    expect([bench.states, bench.losses]).toEqual([['opening', 'open', 'closed'], []]);
  });

  it('waits 100, 200, 400 … 2000 ms while nobody answers, the same every time', async () => {
    const bench = startBench('gone');
    for (let attempt = 0; attempt < 7; attempt += 1) {
      await nextWait(bench);
      bench.timers.fire();
    }
    await nextWait(bench);
    expect(bench.timers.delaysMs).toEqual([100, 200, 400, 800, 1600, 2000, 2000, 2000]);
    expect(bench.link.status).toMatchObject({ state: 'waiting', retryInMs: 2000 });
    expect(bench.link.status.error?.code).toBe('adapter.disconnected');
    await bench.link.close();
    expect(bench.timers.isWaiting).toBe(false);
  });

  it('tells once of a loss that a read reports, and opens again', async () => {
    const bench = startBench();
    await expect.poll(() => bench.sessions.length, patient).toBe(1);
    const first = newest(bench);
    await readOnce(first);
    bench.store.endSessions();
    await readOnce(first);
    await readOnce(first);
    expect(bench.losses).toEqual(['adapter.disconnected']);
    bench.timers.fire();
    await expect.poll(() => bench.sessions.length, patient).toBe(2);
    expect((await readOnce(newest(bench))).values[0]).toBe(1);
    expect(bench.states).toEqual(['opening', 'open', 'waiting', 'opening', 'open']);
    await bench.link.close();
  });

  it('tells of a loss that a write reports', async () => {
    const bench = startBench();
    await expect.poll(() => bench.sessions.length, patient).toBe(1);
    bench.store.endSessions();
    await newest(bench).write([address], [3]);
    expect(bench.losses).toEqual(['adapter.disconnected']);
    await bench.link.close();
  });

  it('starts the waits over only once the device has answered', async () => {
    const bench = startBench();
    const loseAfter = async (hasAnswered: boolean): Promise<void> => {
      const count = bench.sessions.length;
      if (bench.timers.isWaiting) bench.timers.fire();
      await expect.poll(() => bench.sessions.length, patient).toBe(count === 0 ? 1 : count + 1);
      if (hasAnswered) await readOnce(newest(bench));
      bench.store.endSessions();
      await readOnce(newest(bench));
    };
    await loseAfter(false);
    await loseAfter(false);
    await loseAfter(false);
    await loseAfter(true);
    expect(bench.timers.delaysMs).toEqual([100, 200, 400, 100]);
    await bench.link.close();
  });

  it('gives up where the configuration is wrong', async () => {
    const states: string[] = [];
    const timers = new FakeTimers();
    const link = keepConnected(
      inMemoryAdapter,
      { store: '', timeoutMs: 1 },
      { onOpen: () => undefined, onLost: () => undefined, onStatus: ({ state }) => states.push(state) },
      { timers },
    );
    await expect.poll(() => link.status.state, patient).toBe('failed');
    expect([link.status.error?.code, timers.delaysMs]).toEqual(['adapter.misconfigured', []]);
    await link.close();
    expect(states).toEqual(['opening', 'failed', 'closed']);
  });

  it('gives up, with the wire released, where the plan of the new session is wrong', async () => {
    let session: AdapterSession<InMemoryAddress> | null = null;
    const link = keepConnected(
      inMemoryAdapter,
      { store: 'keep-connected-plan', timeoutMs: 20 },
      {
        onOpen: (opened) => {
          session = opened;
          opened.planRead([{ ...address, name: '' }]);
        },
        onLost: () => undefined,
      },
    );
    await expect.poll(() => link.status.state, patient).toBe('failed');
    expect(link.status.error?.details[0]?.field).toBe('addresses[0].name');
    expect((await readOnce(session!)).lost?.code).toBe('adapter.cancelled');
    await link.close();
  });

  it('closed while it opens: hands out nothing and leaves nothing open', async () => {
    let closed = 0;
    const slow: Adapter<InMemoryConfiguration, InMemoryAddress> = {
      ...inMemoryAdapter,
      async open(configuration) {
        // An adapter that opens in spite of the abort.
        const session = await inMemoryAdapter.open(configuration, new AbortController().signal);
        const close = session.close.bind(session);
        session.close = () => {
          closed += 1;
          return close();
        };
        return session;
      },
    };
    const bench = startBench('answering', slow);
    await bench.link.close();
    expect([bench.sessions.length, closed, bench.link.status.state]).toEqual([0, 1, 'closed']);
  });

  it('does not open the next wire before the old one is released', async () => {
    let release: () => void = () => undefined;
    let openings = 0;
    const sticky: Adapter<InMemoryConfiguration, InMemoryAddress> = {
      ...inMemoryAdapter,
      async open(configuration, signal) {
        openings += 1;
        const session = await inMemoryAdapter.open(configuration, signal);
        session.close = () => new Promise((resolve) => (release = resolve));
        return session;
      },
    };
    const bench = startBench('answering', sticky);
    await expect.poll(() => bench.sessions.length, patient).toBe(1);
    bench.store.endSessions();
    await readOnce(newest(bench));
    bench.timers.fire();
    await new Promise((resolve) => setImmediate(resolve));
    expect(openings).toBe(1);
    release();
    await expect.poll(() => openings, patient).toBe(2);
    const closing = bench.link.close();
    await new Promise((resolve) => setTimeout(resolve, 5));
    release();
    await closing;
  });

  it('may be closed twice', async () => {
    const bench = startBench();
    await Promise.all([bench.link.close(), bench.link.close()]);
    expect(bench.states).toEqual(['opening', 'closed']);
  });
});

it('passes probes and traces of the session on', async () => {
  const bench = startBench();
  bench.store.setTrace('t', Float64Array.of(1, 2));
  await expect.poll(() => bench.sessions.length, patient).toBe(1);
  const session = newest(bench);
  expect(await session.probe?.(address)).toMatchObject({ value: 1, fault: null });
  const trace = inMemoryAdapter.manifest.addressSchema.parse({ name: 't', points: 2 });
  expect((await session.read(session.planRead([trace]))).traces?.[0]).toEqual(Float64Array.of(1, 2));
  await bench.link.close();
});
