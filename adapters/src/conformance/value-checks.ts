import assert from 'node:assert/strict';
import type { DomainError } from '@cresthold/shared';
import {
  addressesOf,
  type Check,
  codeOfRejection,
  codesOf,
  type Setting,
  valuesOf,
  writeAll,
} from './conformance-setting.js';

const none = (count: number): null[] => new Array<null>(count).fill(null);

export const valueChecks: Record<string, Check> = {
  'what is written is what the device holds and what is read back': async (setting) => {
    const { session, peer, cells } = setting;
    const plan = session.planRead(addressesOf(cells));
    for (const which of [0, 1] as const) {
      await writeAll(setting, which);
      assert.deepEqual(
        cells.map((cell) => peer.peek(cell.address)),
        valuesOf(cells, which),
      );
      const outcome = await session.read(plan);
      assert.equal(outcome.lost, null);
      assert.deepEqual(codesOf(outcome.faults), none(cells.length));
      assert.deepEqual([...outcome.values], valuesOf(cells, which));
    }
  },

  'values come in the order of the addresses, repeats included': async (setting) => {
    const { session, cells } = setting;
    await writeAll(setting, 0);
    const asked = [...cells].reverse().concat(cells.slice(0, 2));
    const plan = session.planRead(addressesOf(asked));
    assert.equal(plan.count, asked.length);
    assert.ok(plan.requests >= 1 && plan.requests <= asked.length);
    assert.deepEqual([...(await session.read(plan)).values], valuesOf(asked, 0));
  },

  'each plan owns its outcome': async (setting) => {
    const { session, cells } = setting;
    await writeAll(setting, 0);
    const first = await session.read(session.planRead(addressesOf(cells)));
    await writeAll(setting, 1);
    const plan = session.planRead(addressesOf(cells));
    const second = await session.read(plan);
    assert.deepEqual([...first.values], valuesOf(cells, 0));
    assert.deepEqual([...second.values], valuesOf(cells, 1));
    assert.equal((await session.read(plan)).values, second.values);
  },

  'an empty plan and an empty write do nothing and succeed': async ({ session }) => {
    const outcome = await session.read(session.planRead([]));
    assert.deepEqual([outcome.lost, outcome.values.length], [null, 0]);
    const written = await session.write([], []);
    assert.deepEqual(written, { faults: [], lost: null });
  },

  'calls while another is under way wait in order': async (setting) => {
    const { session, cells } = setting;
    const plan = session.planRead(addressesOf(cells));
    const [, , outcome] = await Promise.all([
      session.write(addressesOf(cells), valuesOf(cells, 0)),
      session.write(addressesOf(cells), valuesOf(cells, 1)),
      session.read(plan),
    ]);
    assert.deepEqual([...outcome.values], valuesOf(cells, 1));
  },

  'a write takes the values of the moment it was called': async (setting) => {
    const { session, cells, peer } = setting;
    const buffer = Float64Array.from(valuesOf(cells, 0));
    const first = session.write(addressesOf(cells), valuesOf(cells, 1));
    const second = session.write(addressesOf(cells), buffer);
    buffer.set(valuesOf(cells, 1));
    await Promise.all([first, second]);
    assert.deepEqual(
      cells.map((cell) => peer.peek(cell.address)),
      valuesOf(cells, 0),
    );
  },

  'an array of addresses may be filled anew between two writes': async (setting) => {
    const { session, cells, peer } = setting;
    await writeAll(setting, 0);
    const [a, b] = cells;
    assert.ok(a && b);
    const list = [a.address];
    await session.write(list, [a.values[1]]);
    list[0] = b.address;
    await session.write(list, [b.values[1]]);
    assert.deepEqual([peer.peek(a.address), peer.peek(b.address)], [a.values[1], b.values[1]]);
  },

  'a value that the wire cannot carry spoils no other and is not sent': async (setting) => {
    await writeAll(setting, 0);
    for (const bad of [NaN, Infinity, beyond(setting)]) await checkBadValue(setting, bad);
  },

  'describe names a grid and a range that hold the values': async ({ session, cells }) => {
    await Promise.resolve();
    for (const { address, values } of cells) {
      const facts = session.describe(address);
      assert.equal(facts.isWritable, true);
      assert.ok(facts.quantum >= 0 && facts.min < facts.max);
      for (const value of values) {
        assert.ok(value >= facts.min && value <= facts.max);
        const steps = facts.quantum > 0 ? (value - facts.quantumOrigin) / facts.quantum : 0;
        assert.ok(Math.abs(steps - Math.round(steps)) < 1e-6, `${value} is off the grid`);
      }
    }
  },

  'a malformed address is adapter.misconfigured and named': async ({ session, cells, fixture }) => {
    const good = cells[0]?.address ?? assert.fail();
    const bad = fixture.malformedAddress as typeof good;
    const planning = Promise.resolve().then(() => session.planRead([good, bad]));
    assert.equal(await codeOfRejection(planning), 'adapter.misconfigured');
    const error = await planning.catch((reason: unknown) => reason);
    const details = (error as DomainError).details;
    assert.ok(details.length > 0, 'the error has no details that name the field');
    assert.ok(details.every(({ field }) => field.startsWith('addresses[1]')));
  },
};

function beyond<C, A>({ session, cells }: Setting<C, A>): number {
  const { max } = session.describe(cells[1]?.address ?? assert.fail());
  return max + Math.max(1, Math.abs(max));
}

async function checkBadValue<C, A>({ session, peer, cells }: Setting<C, A>, bad: number): Promise<void> {
  const three = cells.slice(0, 3);
  const [a, b, c] = three;
  assert.ok(a && b && c);
  const outcome = await session.write(addressesOf(three), [a.values[1], bad, c.values[1]]);
  assert.equal(outcome.lost, null);
  assert.deepEqual(codesOf(outcome.faults), [null, 'adapter.misconfigured', null]);
  assert.deepEqual(
    three.map((cell) => peer.peek(cell.address)),
    [a.values[1], b.values[0], c.values[1]],
  );
}
