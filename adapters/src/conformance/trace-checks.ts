import assert from 'node:assert/strict';
import type { AdapterSession } from '../contract.js';
import type { ConformanceTrace } from './conformance-fixture.js';
import {
  addressesOf,
  brought,
  type Check,
  codesOf,
  type Setting,
  valuesOf,
  within,
  writeAll,
} from './conformance-setting.js';

function tracesOf<C, A>({ peer }: Setting<C, A>): readonly ConformanceTrace<A>[] {
  const traces = brought(peer.traces, 'traces');
  assert.ok(traces.length > 0, 'the fixture needs a trace');
  for (const { points } of traces) assert.ok(points.length > 1, 'a trace has two points at least');
  return traces;
}

async function readTraces<A>(session: AdapterSession<A>, traces: readonly ConformanceTrace<A>[]) {
  const plan = session.planRead(traces.map(({ address }) => address));
  return { plan, outcome: await session.read(plan) };
}

export const traceChecks: Record<string, Check> = {
  'a trace is read whole, and its single value is NaN': async (setting) => {
    const traces = tracesOf(setting);
    const { outcome } = await readTraces(setting.session, traces);
    assert.equal(outcome.lost, null);
    traces.forEach(({ points, address }, index) => {
      assert.deepEqual([...(outcome.traces?.[index] ?? [])], [...points]);
      assert.ok(Number.isNaN(outcome.values[index]));
      assert.equal(outcome.faults[index], null);
      assert.equal(setting.session.describe(address).points, points.length);
    });
  },

  'traces and single values go in one plan, each at its place': async (setting) => {
    const { session, cells } = setting;
    const [trace] = tracesOf(setting);
    assert.ok(trace);
    await writeAll(setting, 0);
    const [first, ...others] = addressesOf(cells);
    assert.ok(first !== undefined);
    const outcome = await session.read(session.planRead([first, trace.address, ...others]));
    const [value, ...rest] = valuesOf(cells, 0);
    assert.deepEqual([...outcome.values], [value, NaN, ...rest]);
    assert.deepEqual(
      outcome.traces?.map((points) => points && [...points]),
      [null, [...trace.points], ...rest.map(() => null)],
    );
  },

  'each plan owns its traces': async (setting) => {
    const traces = tracesOf(setting);
    const first = await readTraces(setting.session, traces);
    const second = await readTraces(setting.session, traces);
    assert.notEqual(first.outcome.traces?.[0], second.outcome.traces?.[0]);
    first.outcome.traces?.[0]?.fill(0);
    assert.deepEqual([...(second.outcome.traces?.[0] ?? [])], [...(traces[0]?.points ?? [])]);
  },

  'a trace that cannot be read leaves nothing of an earlier one': async (setting) => {
    const { session, fixture } = setting;
    const { plan } = await readTraces(session, tracesOf(setting));
    await session.close();
    const outcome = await within(fixture.timeoutMs, 'read', session.read(plan));
    assert.deepEqual([...new Set(codesOf(outcome.faults))], ['adapter.cancelled']);
    for (const points of outcome.traces ?? []) assert.ok(points === null || points.every(Number.isNaN));
  },
};
