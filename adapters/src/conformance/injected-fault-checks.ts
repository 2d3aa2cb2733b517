import assert from 'node:assert/strict';
import type { WireFaultInput, WireFaultKind } from '@cresthold/shared';
import { FaultControl } from '../faults/fault-control.js';
import { withFaults } from '../faults/with-faults.js';
import {
  addressesOf,
  type Check,
  codesOf,
  readAll,
  type Setting,
  valuesOf,
  within,
  writeAll,
} from './conformance-setting.js';

interface Injection<C, A> extends Setting<C, A> {
  control: FaultControl;
}

/** Runs a check on a session through the faults wrapper, with the first values on the device and read once. */
async function injected<C, A>(
  setting: Setting<C, A>,
  check: (injection: Injection<C, A>) => Promise<void>,
): Promise<void> {
  const { fixture, peer } = setting;
  await setting.session.close();
  const control = new FaultControl();
  const adapter = withFaults(fixture.adapter, control);
  const session = await adapter.open(peer.configuration, new AbortController().signal);
  try {
    await check({ ...setting, fixture: { ...fixture, adapter }, session, control });
  } finally {
    await session.close();
  }
}

const peeked = <C, A>({ peer, cells }: Setting<C, A>): number[] =>
  cells.map(({ address }) => peer.peek(address));

/** A fault that fails each call: its code, and whether writes reach the device all the same. */
function failing(fault: WireFaultInput, code: string, doesWrite: boolean): Check {
  return (setting) =>
    injected(setting, async (injection) => {
      const { session, cells, control, fixture } = injection;
      await writeAll(injection, 0);
      const plan = session.planRead(addressesOf(cells));
      await session.read(plan);
      control.fault = fault;
      const read = await within(fixture.timeoutMs, 'read', session.read(plan));
      assert.deepEqual([...new Set(codesOf(read.faults))], [code]);
      assert.ok([...read.values].every(Number.isNaN));
      const written = await session.write(addressesOf(cells), valuesOf(cells, 1));
      assert.deepEqual([...new Set(codesOf(written.faults))], [code]);
      assert.deepEqual(peeked(injection), valuesOf(cells, doesWrite ? 1 : 0));
      control.clear();
      await writeAll(injection, 1);
      await readAll(injection, 1);
    });
}

/** A fault under which everything comes through, only later. */
function slowing(fault: WireFaultInput): Check {
  return (setting) =>
    injected(setting, async (injection) => {
      injection.control.fault = fault;
      await writeAll(injection, 1);
      await readAll(injection, 1);
    });
}

const oneHit: Check = (setting) =>
  injected(setting, async (injection) => {
    const { session, cells, control } = injection;
    await writeAll(injection, 0);
    const plan = session.planRead(addressesOf(cells));
    control.put({ kind: 'corrupt' }, addressesOf(cells).slice(1, 2));
    const { faults, values } = await session.read(plan);
    assert.deepEqual(
      codesOf(faults),
      cells.map((_, index) => (index === 1 ? 'adapter.corrupt' : null)),
    );
    assert.deepEqual(
      [...values],
      valuesOf(cells, 0).map((value, index) => (index === 1 ? NaN : value)),
    );
  });

const frozen: Check = (setting) =>
  injected(setting, async (injection) => {
    const { session, cells, control } = injection;
    await writeAll(injection, 0);
    const plan = session.planRead(addressesOf(cells));
    await session.read(plan);
    await writeAll(injection, 1);
    control.fault = { kind: 'freeze' };
    assert.deepEqual([...(await session.read(plan)).values], valuesOf(cells, 0));
    await writeAll(injection, 0);
    assert.deepEqual(peeked(injection), valuesOf(cells, 1));
    control.clear();
    assert.deepEqual([...(await session.read(plan)).values], valuesOf(cells, 1));
  });

const scaledWrongly: Check = (setting) =>
  injected(setting, async (injection) => {
    const { session, cells, control } = injection;
    await writeAll(injection, 0);
    control.fault = { kind: 'wrong-scale', factor: 2, offset: 1 };
    const { values, faults } = await session.read(session.planRead(addressesOf(cells)));
    assert.ok(faults.every((fault) => fault === null));
    assert.deepEqual(
      [...values],
      valuesOf(cells, 0).map((value) => 2 * value + 1),
    );
  });

const brokenOff: Check = (setting) =>
  injected(setting, async (injection) => {
    const { session, cells, control } = injection;
    await writeAll(injection, 0);
    const three = cells.slice(0, 3);
    control.fault = { kind: 'truncate', keptShare: 0.4 };
    const { values, faults } = await session.read(session.planRead(addressesOf(three)));
    assert.deepEqual(codesOf(faults), [null, 'adapter.corrupt', 'adapter.corrupt']);
    assert.deepEqual([...values], [three[0]?.values[0], NaN, NaN]);
  });

function cutOff(canReconnect: boolean): Check {
  return (setting) =>
    injected(setting, async (injection) => {
      const { session, cells, control, fixture, peer } = injection;
      control.fault = { kind: 'disconnect', canReconnect };
      const { lost } = await session.read(session.planRead(addressesOf(cells)));
      assert.equal(lost?.code, 'adapter.disconnected');
      await session.close();
      const opening = fixture.adapter.open(peer.configuration, new AbortController().signal);
      if (canReconnect) await (await opening).close();
      else await assert.rejects(opening, { code: 'adapter.disconnected' });
      control.clear();
      const again = await fixture.adapter.open(peer.configuration, new AbortController().signal);
      await writeAll({ ...injection, session: again }, 0);
      await again.close();
    });
}

const checkOfKind: Record<WireFaultKind, Check> = {
  delay: slowing({ kind: 'delay', delayMs: 2 }),
  jitter: slowing({ kind: 'jitter', mostMs: 4 }),
  'slow-device': slowing({ kind: 'slow-device', perValueMs: 1 }),
  drop: failing({ kind: 'drop', timeoutMs: 5 }, 'adapter.timeout', false),
  truncate: brokenOff,
  corrupt: failing({ kind: 'corrupt' }, 'adapter.corrupt', true),
  freeze: frozen,
  'wrong-unit': failing({ kind: 'wrong-unit' }, 'adapter.corrupt', false),
  'wrong-scale': scaledWrongly,
  exception: failing({ kind: 'exception' }, 'adapter.refused', false),
  disconnect: cutOff(true),
};

/** The plug-in behind the faults wrapper, as benches and rehearsals use it: one check for each kind of fault. */
export const injectedFaultChecks: Record<string, Check> = {
  ...Object.fromEntries(
    Object.entries(checkOfKind).map(([kind, check]) => [`an injected ${kind} does what it says`, check]),
  ),
  'an injected fault hits the chosen address only': oneHit,
  'an injected disconnect for good keeps new connections out': cutOff(false),
};
