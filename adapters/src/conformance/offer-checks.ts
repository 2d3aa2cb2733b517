import assert from 'node:assert/strict';
import { addressesOf, type Check, codeOfRejection, writeAll } from './conformance-setting.js';

/** Duties of what an adapter may offer beyond the least: they hold at once where it offers nothing. */
export const offerChecks: Record<string, Check> = {
  'a probe, where offered, shows value and wire of one address': async (setting) => {
    const { session, cells, peer } = setting;
    if (!session.probe) return;
    await writeAll(setting, 0);
    for (const { address, values } of cells) {
      const { raw, value, trace, fault } = await session.probe(address);
      assert.deepEqual([value, trace, fault], [values[0], null, null]);
      assert.notEqual(raw.trim(), '', 'a probe shows what came over the wire');
    }
    for (const { address, points } of peer.traces ?? []) {
      const { value, trace, fault } = await session.probe(address);
      assert.deepEqual([...(trace ?? [])], [...points]);
      assert.ok(Number.isNaN(value) && fault === null);
    }
  },

  'a probe, where offered, tells a refusal and an end as outcomes': async ({
    session,
    peer,
    cells,
    fixture,
  }) => {
    if (!session.probe) return;
    if (fixture.provokes.includes('refuse') && peer.refused !== undefined) {
      const refused = await session.probe(peer.refused);
      assert.equal(refused.fault?.code, 'adapter.refused');
      assert.ok(Number.isNaN(refused.value));
    }
    await session.close();
    const ended = await session.probe(cells[0]?.address ?? assert.fail());
    assert.equal(ended.fault?.code, 'adapter.cancelled');
    assert.ok(Number.isNaN(ended.value));
  },

  'an estimate, where offered, is what a plan costs': async ({ session, cells, peer, fixture }) => {
    const { adapter } = fixture;
    if (!adapter.estimate) return;
    await Promise.resolve();
    const traces = (peer.traces ?? []).map(({ address }) => address);
    for (const addresses of [[], addressesOf(cells).slice(0, 1), addressesOf(cells), traces]) {
      const { requests, wireS } = adapter.estimate(peer.configuration, addresses);
      if (addresses.length === 0) assert.equal(requests, 0);
      else assert.equal(requests, session.planRead(addresses).requests);
      assert.ok(wireS === null || (Number.isFinite(wireS) && wireS >= 0), `wireS is ${wireS}`);
    }
  },

  'an estimate, where offered, names a malformed address': async ({ peer, fixture, cells }) => {
    const { adapter, malformedAddress } = fixture;
    if (!adapter.estimate) return;
    const good = cells[0]?.address ?? assert.fail();
    const bad = malformedAddress as typeof good;
    const estimating = Promise.resolve().then(() => adapter.estimate?.(peer.configuration, [good, bad]));
    assert.equal(await codeOfRejection(estimating), 'adapter.misconfigured');
  },
};
