import assert from 'node:assert/strict';
import { setTimeout as delay } from 'node:timers/promises';
import type { ConformanceFixture, ConformancePeer } from './conformance-fixture.js';
import { addressesOf, valuesOf } from './conformance-setting.js';
import { bytesInUse, growthOf, type ProcessUsage, processUsage } from './process-usage.js';

const warmUpCycles = 10;
/** Both ends need a moment to let go of a socket, ms. */
const settleBoundMs = 2000;
/** What a cycle may leave behind, bytes: the least session with its plan is more than this. */
const bytesPerCycleMax = 1000;
/** What the runtime itself may take meanwhile (compiled code, inline caches), bytes. */
const bytesOfRuntime = 1_500_000;

/**
 * Opens, uses and closes many times, and opens and aborts as often: nothing may be left of either, on the side of
 * handles, listeners, files and memory.
 *
 * @param cycles number of each
 */
export async function checkLeaks<C, A>(fixture: ConformanceFixture<C, A>, cycles: number): Promise<void> {
  const peer = await fixture.start();
  const { signal } = new AbortController();
  const cycle = async (): Promise<void> => {
    await useOnce(fixture, peer, signal);
    await abortOnce(fixture, peer);
  };
  try {
    for (let i = 0; i < warmUpCycles; i += 1) await cycle();
    await delay(50);
    const before = processUsage(signal);
    const bytesBefore = bytesInUse();
    for (let i = 0; i < cycles; i += 1) await cycle();
    await settled(before, signal);
    const grownBytes = bytesInUse() - bytesBefore;
    const most = bytesOfRuntime + cycles * bytesPerCycleMax;
    assert.ok(grownBytes < most, `${cycles} cycles left ${grownBytes} bytes behind, at most ${most} allowed`);
  } finally {
    await peer.stop();
  }
}

async function useOnce<C, A>(
  { adapter }: ConformanceFixture<C, A>,
  { configuration, cells }: ConformancePeer<C, A>,
  signal: AbortSignal,
): Promise<void> {
  const session = await adapter.open(configuration, signal);
  const written = await session.write(addressesOf(cells), valuesOf(cells, 0));
  assert.equal(written.lost, null);
  const read = await session.read(session.planRead(addressesOf(cells)));
  assert.equal(read.lost, null);
  await session.close();
}

async function abortOnce<C, A>(
  { adapter }: ConformanceFixture<C, A>,
  { configuration }: ConformancePeer<C, A>,
): Promise<void> {
  const abort = new AbortController();
  const opening = adapter.open(configuration, abort.signal);
  abort.abort();
  await assert.rejects(opening, { code: 'adapter.cancelled' });
}

/** Waits until no more is held than before; fails with what still is. */
async function settled(before: ProcessUsage, signal: AbortSignal): Promise<void> {
  const untilMs = performance.now() + settleBoundMs;
  for (;;) {
    const growth = growthOf(before, processUsage(signal));
    if (growth.length === 0) return;
    if (performance.now() > untilMs) assert.fail(`something is left open: ${growth.join('; ')}`);
    await delay(20);
  }
}
