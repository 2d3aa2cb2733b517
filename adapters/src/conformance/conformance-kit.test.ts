import { DomainError } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import type { Adapter, AdapterSession, ReadOutcome } from '../contract.js';
import { inMemoryFixture } from '../in-memory/in-memory-conformance.fixture.js';
import type { InMemoryAddress, InMemoryConfiguration } from '../in-memory/in-memory.schema.js';
import { describeAdapterConformance } from './describe-adapter-conformance.js';

type MemoryAdapter = Adapter<InMemoryConfiguration, InMemoryAddress>;
type MemorySession = AdapterSession<InMemoryAddress>;

/** Titles of those of the chosen checks that an adapter fails. */
async function failures(adapter: MemoryAdapter, chosen = /./): Promise<string[]> {
  const checks: { title: string; body: () => Promise<void> }[] = [];
  const runner = {
    describe: (_: string, body: () => void) => body(),
    it: (title: string, body: () => Promise<void>) => void checks.push({ title, body }),
  };
  describeAdapterConformance({ ...inMemoryFixture, adapter }, runner, { cycles: 20 });
  const failed: string[] = [];
  for (const { title, body } of checks) {
    if (chosen.test(title)) await body().catch(() => failed.push(title));
  }
  return failed;
}

const good = inMemoryFixture.adapter;

/** The good adapter with sessions that do something else in places. */
const withSession = (change: (session: MemorySession) => Partial<MemorySession>): MemoryAdapter => ({
  ...good,
  open: async (configuration, signal) => {
    const session = await good.open(configuration, signal);
    const whole: MemorySession = {
      describe: (address) => session.describe(address),
      planRead: (addresses) => session.planRead(addresses),
      read: (plan) => session.read(plan),
      write: (addresses, values) => session.write(addresses, values),
      probe: (address) => session.probe?.(address) ?? Promise.reject(new Error('no probe')),
      close: () => session.close(),
    };
    return { ...whole, ...change(session) };
  },
});

const read = (change: (outcome: ReadOutcome) => ReadOutcome) =>
  withSession((session) => ({ read: async (plan) => change(await session.read(plan)) }));

const leaked: unknown[] = [];
let timers: NodeJS.Timeout[] = [];

/** Each is wrong in one way that was seen in the field, and the check that must find it. */
const wrong: Record<string, [MemoryAdapter, RegExp]> = {
  'shows an older value beside a fault': [
    (() => {
      let last = NaN;
      return read((outcome) => {
        outcome.values.forEach((value, index) => {
          if (outcome.faults[index] === null) last = value;
          else if (outcome.traces?.[index] === undefined) outcome.values[index] = last;
        });
        return outcome;
      });
    })(),
    /silence is adapter.timeout|spoils no other read|no valid answer/,
  ],
  'throws where a device is silent': [
    withSession((session) => ({
      read: async (plan) => {
        const outcome = await session.read(plan);
        const [fault] = outcome.faults;
        if (fault?.code === 'adapter.timeout') throw fault;
        return outcome;
      },
    })),
    /silence is adapter.timeout/,
  ],
  'takes a corrupt answer for a refusal': [
    read((outcome) => {
      outcome.faults.forEach((fault, index) => {
        if (fault?.code === 'adapter.corrupt') outcome.faults[index] = new DomainError('adapter.refused');
      });
      return outcome;
    }),
    /adapter.corrupt/,
  ],
  'does not say that the connection is lost': [
    read((outcome) => ({ ...outcome, lost: null })),
    /cut connection is lost/,
  ],
  'spoils the whole read for one refused address': [
    read((outcome) => {
      const refused = outcome.faults.find((fault) => fault?.code === 'adapter.refused');
      if (refused) {
        outcome.values.fill(NaN);
        outcome.faults.fill(refused);
      }
      return outcome;
    }),
    /spoils no other read/,
  ],
  'keeps the caller’s array instead of its values': [
    withSession((session) => ({
      write: async (addresses, values) => {
        await new Promise((resolve) => setImmediate(resolve));
        return session.write(addresses, values);
      },
    })),
    /values of the moment/,
  ],
  'writes nothing and says it did': [
    withSession(() => ({
      write: (addresses) => Promise.resolve({ faults: addresses.map(() => null), lost: null }),
    })),
    /what the device holds/,
  ],
  'goes by the signal after it is open': [
    {
      ...good,
      open: async (configuration, signal) => {
        const session = await good.open(configuration, signal);
        signal.addEventListener('abort', () => void session.close(), { once: true });
        return session;
      },
    },
    /says nothing more|nothing is left/,
  ],
  'ignores an abort': [
    { ...good, open: (configuration) => good.open(configuration, new AbortController().signal) },
    /aborting while it opens|aborted signal/,
  ],
  'leaves a timer at each close': [
    withSession((session) => ({
      close: async () => {
        timers.push(setTimeout(() => undefined, 600_000));
        await session.close();
      },
    })),
    /nothing is left/,
  ],
  'leaves a listener on the process at each opening': [
    {
      ...good,
      open: (configuration, signal) => {
        process.on('SIGUSR2', ignore);
        return good.open(configuration, signal);
      },
    },
    /nothing is left/,
  ],
  'keeps memory of each session': [
    withSession((session) => {
      leaked.push(new Array(40_000).fill(leaked.length));
      return { close: () => session.close() };
    }),
    /nothing is left/,
  ],
  'hands out one outcome for all plans': [
    (() => {
      let shared: ReadOutcome | null = null;
      return read((outcome) => {
        if (shared?.values.length !== outcome.values.length) shared = outcome;
        shared.values.set(outcome.values);
        return shared;
      });
    })(),
    /each plan owns/,
  ],
  'estimates too little': [{ ...good, estimate: () => ({ requests: 0, wireS: 0 }) }, /estimate/],
  'probes without showing the wire': [
    withSession((session) => ({
      probe: async (address) => ({ ...(await session.probe?.(address)), raw: '' }) as never,
    })),
    /a probe/,
  ],
  'loses the traces': [read(({ traces: _, ...outcome }) => outcome), /a trace is read whole/],
  'is of another contract': [
    { ...good, manifest: { ...good.manifest, contract: '^3.0.0' } },
    /of this contract/,
  ],
};

function ignore(): void {}

describe('the kit', () => {
  it('is passed by the adapter that ships with it', async () => {
    expect(await failures(good)).toEqual([]);
  });

  it.each(Object.entries(wrong))('finds an adapter that %s', async (_, [adapter, check]) => {
    try {
      expect(await failures(adapter, check)).not.toEqual([]);
    } finally {
      for (const timer of timers) clearTimeout(timer);
      timers = [];
      leaked.length = 0;
      process.removeAllListeners('SIGUSR2');
    }
  });
});
