import assert from 'node:assert/strict';
import { checkAdapter } from '../plug-ins/check-adapter.js';
import type { ConformanceFixture } from './conformance-fixture.js';
import {
  addressesOf,
  type Check,
  codeOfRejection,
  codesOf,
  valuesOf,
  within,
  writeAll,
} from './conformance-setting.js';

export const lifecycleChecks: Record<string, Check> = {
  'close may be called twice and at the same time': async ({ session, fixture }) => {
    await within(fixture.timeoutMs, 'close', Promise.all([session.close(), session.close()]));
    await session.close();
  },

  'a read after close is lost, not thrown': async ({ session, cells }) => {
    const plan = session.planRead(addressesOf(cells));
    await session.close();
    const outcome = await session.read(plan);
    assert.equal(outcome.lost?.code, 'adapter.cancelled');
    assert.ok(outcome.faults.every((fault) => fault !== null));
  },

  'a write after close is lost, not thrown': async ({ session, cells }) => {
    await session.close();
    const outcome = await session.write([cells[0]?.address ?? assert.fail()], [0]);
    assert.equal(outcome.lost?.code, 'adapter.cancelled');
    assert.deepEqual(codesOf(outcome.faults), ['adapter.cancelled']);
  },

  'once it is open, the signal that it was opened with says nothing more': async (setting) => {
    const { fixture, peer, session } = setting;
    await session.close();
    const abort = new AbortController();
    const again = await fixture.adapter.open(peer.configuration, abort.signal);
    try {
      abort.abort();
      await writeAll({ ...setting, session: again }, 1);
    } finally {
      await again.close();
    }
  },

  'close in the middle of reads and writes ends them as outcomes, none hangs or throws': async (setting) => {
    const { session, cells, fixture } = setting;
    const plan = session.planRead(addressesOf(cells));
    const calls = [
      session.read(plan),
      session.write(addressesOf(cells), valuesOf(cells, 0)),
      session.read(session.planRead(addressesOf(cells))),
    ];
    await within(fixture.timeoutMs, 'close', session.close());
    for (const { faults, lost } of await within(fixture.timeoutMs, 'calls', Promise.all(calls))) {
      for (const code of codesOf(faults)) assert.ok(code === null || code === 'adapter.cancelled');
      assert.ok(lost === null || lost.code === 'adapter.cancelled');
    }
  },

  'the same peer can be opened again after close': async (setting) => {
    const { fixture, peer, session } = setting;
    await session.close();
    const again = await fixture.adapter.open(peer.configuration, new AbortController().signal);
    try {
      await writeAll({ ...setting, session: again }, 1);
    } finally {
      await again.close();
    }
  },
};

/** Checks that need no session of their own. */
export const openingChecks: Record<string, <C, A>(fixture: ConformanceFixture<C, A>) => Promise<void>> = {
  'the manifest is of this contract and its schemas can be shown as forms': async ({ adapter }) => {
    // What the server judges a plug-in by, so that one that passes here is listed there as ready.
    await Promise.resolve(checkAdapter(adapter));
  },

  'a malformed configuration is adapter.misconfigured': async (fixture) => {
    const configuration = fixture.malformedConfiguration as never;
    const opening = fixture.adapter.open(configuration, new AbortController().signal);
    assert.equal(await codeOfRejection(opening), 'adapter.misconfigured');
  },

  'opening with an aborted signal is adapter.cancelled': async (fixture) => {
    const peer = await fixture.start();
    try {
      const opening = fixture.adapter.open(peer.configuration, AbortSignal.abort());
      assert.equal(await codeOfRejection(opening), 'adapter.cancelled');
    } finally {
      await peer.stop();
    }
  },

  'aborting while it opens is adapter.cancelled': async (fixture) => {
    const peer = await fixture.start();
    try {
      const abort = new AbortController();
      const opening = fixture.adapter.open(peer.configuration, abort.signal);
      abort.abort();
      assert.equal(await codeOfRejection(opening), 'adapter.cancelled');
    } finally {
      await peer.stop();
    }
  },
};
