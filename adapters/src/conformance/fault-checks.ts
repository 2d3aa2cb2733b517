import assert from 'node:assert/strict';
import type { ReadPlan } from '../contract.js';
import type { Provocation } from './conformance-fixture.js';
import {
  addressesOf,
  brought,
  type Check,
  codeOfRejection,
  codesOf,
  readAll,
  type Setting,
  valuesOf,
  within,
  withOneMore,
  writeAll,
} from './conformance-setting.js';
import { keepForCheck } from './keep-for-check.js';
import { traceChecks } from './trace-checks.js';

/** All faults of one read of a plan that was read well before, and of one write, with their time bound. */
async function faultsOfBoth<C, A>(setting: Setting<C, A>, plan: ReadPlan): Promise<(string | null)[]> {
  const { session, cells, fixture } = setting;
  const read = await within(fixture.timeoutMs, 'read', session.read(plan));
  assert.ok(
    [...read.values].every((value) => Number.isNaN(value)),
    'a value where there is a fault must be NaN, never an older one',
  );
  const writing = session.write(addressesOf(cells), valuesOf(cells, 1));
  const written = await within(fixture.timeoutMs, 'write', writing);
  return [...codesOf(read.faults), ...codesOf(written.faults)];
}

/** A plan that has values of an earlier read. */
async function planReadWell<C, A>({ session, cells }: Setting<C, A>): Promise<ReadPlan> {
  const plan = session.planRead(addressesOf(cells));
  const outcome = await session.read(plan);
  assert.deepEqual([...outcome.values], valuesOf(cells, 0));
  return plan;
}

const refuseChecks: Record<string, Check> = {
  'one refused address among good ones spoils no other read': async (setting) => {
    const { session, peer } = setting;
    await writeAll(setting, 0);
    const plan = session.planRead(withOneMore(setting, brought(peer.refused, 'refused')));
    for (let scan = 0; scan < 3; scan += 1) {
      const { values, faults, lost } = await session.read(plan);
      assert.equal(lost, null);
      const [first, ...others] = setting.cells.map((cell) => cell.values[0]);
      assert.deepEqual([...values], [first, NaN, ...others]);
      assert.deepEqual(codesOf(faults), [null, 'adapter.refused', ...others.map(() => null)]);
    }
  },

  'one refused address among good ones spoils no other write': async (setting) => {
    const { session, peer, cells } = setting;
    const [first = NaN, ...others] = valuesOf(cells, 1);
    const addresses = withOneMore(setting, brought(peer.refused, 'refused'));
    const outcome = await session.write(addresses, [first, first, ...others]);
    assert.equal(outcome.lost, null);
    assert.deepEqual(codesOf(outcome.faults), [null, 'adapter.refused', ...others.map(() => null)]);
    await readAll(setting, 1);
  },
};

const readOnlyChecks: Record<string, Check> = {
  'writing what can only be read is adapter.misconfigured and spoils no other': async (setting) => {
    const { session, peer, cells } = setting;
    const readOnly = brought(peer.readOnly, 'readOnly');
    assert.equal(session.describe(readOnly).isWritable, false);
    const [first = NaN, ...others] = valuesOf(cells, 1);
    const outcome = await session.write(withOneMore(setting, readOnly), [first, 0, ...others]);
    assert.deepEqual(codesOf(outcome.faults), [null, 'adapter.misconfigured', ...others.map(() => null)]);
    await readAll(setting, 1);
  },
};

const silenceChecks: Record<string, Check> = {
  'silence is adapter.timeout in time, and later answers are the right ones': async (setting) => {
    await writeAll(setting, 0);
    const plan = await planReadWell(setting);
    brought(setting.peer.silence?.bind(setting.peer), 'silence')();
    const codes = new Set(await faultsOfBoth(setting, plan));
    assert.deepEqual([...codes], ['adapter.timeout']);
    brought(setting.peer.recover?.bind(setting.peer), 'recover')();
    await writeAll(setting, 1);
    await readAll(setting, 1);
  },

  'close ends a call under way with adapter.cancelled': async (setting) => {
    const { session, cells, peer, fixture } = setting;
    brought(peer.silence?.bind(peer), 'silence')();
    const reading = session.read(session.planRead(addressesOf(cells)));
    const waiting = session.write(addressesOf(cells), valuesOf(cells, 0));
    await new Promise((resolve) => setImmediate(resolve));
    await within(fixture.timeoutMs, 'close', session.close());
    const outcomes = await Promise.all([reading, waiting]);
    for (const { lost, faults } of outcomes) {
      assert.equal(lost?.code, 'adapter.cancelled');
      assert.deepEqual([...new Set(codesOf(faults))], ['adapter.cancelled']);
    }
  },
};

const garbleChecks: Record<string, Check> = {
  'an answer that is none is adapter.corrupt, and later answers are the right ones': async (setting) => {
    await writeAll(setting, 0);
    const plan = await planReadWell(setting);
    brought(setting.peer.garble?.bind(setting.peer), 'garble')();
    const codes = new Set(await faultsOfBoth(setting, plan));
    assert.deepEqual([...codes], ['adapter.corrupt']);
    brought(setting.peer.recover?.bind(setting.peer), 'recover')();
    await writeAll(setting, 1);
    await readAll(setting, 1);
  },
};

const cutChecks: Record<string, Check> = {
  'a cut connection is lost, and a new session works': async (setting) => {
    const { session, cells, peer, fixture } = setting;
    await writeAll(setting, 0);
    brought(peer.cut?.bind(peer), 'cut')();
    const plan = session.planRead(addressesOf(cells));
    const outcome = await within(fixture.timeoutMs, 'read', session.read(plan));
    assert.equal(outcome.lost?.code, 'adapter.disconnected');
    assert.ok(codesOf(outcome.faults).every((code) => code === 'adapter.disconnected'));
    await session.close();
    const again = await fixture.adapter.open(peer.configuration, new AbortController().signal);
    try {
      await readAll({ ...setting, session: again }, 0);
    } finally {
      await again.close();
    }
  },

  'kept connected, a cut connection is lost once and comes back by itself': async (setting) => {
    const { session, cells, peer, fixture } = setting;
    await writeAll(setting, 0);
    await session.close();
    const kept = keepForCheck(fixture.adapter, peer.configuration);
    try {
      const first = await within(fixture.timeoutMs, 'opening', kept.nextSession());
      await first.read(first.planRead(addressesOf(cells)));
      const second = kept.nextSession();
      brought(peer.cut?.bind(peer), 'cut')();
      const outcome = await within(fixture.timeoutMs, 'read', first.read(first.planRead(addressesOf(cells))));
      assert.equal(outcome.lost?.code, 'adapter.disconnected');
      await readAll({ ...setting, session: await within(fixture.timeoutMs, 'opening again', second) }, 0);
      assert.deepEqual(kept.losses, ['adapter.disconnected']);
    } finally {
      await kept.close();
    }
  },
};

const unreachableChecks: Record<string, Check> = {
  'opening where nobody is is adapter.disconnected': async ({ fixture, peer }) => {
    const nowhere = brought(peer.unreachable, 'unreachable');
    const opening = fixture.adapter.open(nowhere, new AbortController().signal);
    assert.equal(await codeOfRejection(opening), 'adapter.disconnected');
  },
};

export const faultChecks: Record<Provocation, Record<string, Check>> = {
  refuse: refuseChecks,
  'read-only': readOnlyChecks,
  silence: silenceChecks,
  garble: garbleChecks,
  cut: cutChecks,
  unreachable: unreachableChecks,
  trace: traceChecks,
};
