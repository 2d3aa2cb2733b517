import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { until } from '../../kit/bench-process.fixture.js';
import { forkBench, type ForkedBench } from '../../kit/forked-bench.fixture.js';
import { openShippedRig, type OpenedRig } from '../../kit/shipped-rig-wire.fixture.js';
import { couplingRig } from './coupling-rig.js';

const folder = mkdtempSync(join(tmpdir(), 'coupling-rig-'));
let bench: ForkedBench;
let rig: OpenedRig;

beforeAll(async () => {
  bench = await forkBench('coupling', ['--pty', join(folder, 'line'), '--noise', 'off']);
  rig = await openShippedRig(couplingRig({ path: bench.path }), { unitTimeoutMs: 4000, timeoutMs: 8000 });
}, 30_000);

afterAll(async () => {
  await rig.session.close();
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

it('is read and written by the adapter and the addresses of its rig', { timeout: 20_000 }, async () => {
  const first = await rig.read();
  expect([first.get('driveX'), first.get('driveY')]).toEqual([50, 50]);
  expect([first.get('shutterOpen'), first.get('watchdogFlag')]).toEqual([0, 1]);
  let beat = 0;
  await until(async () => {
    await rig.write('heartbeat', (beat += 1));
    return (await rig.read()).get('shutterOpen') === 1;
  });
  await rig.write('driveX', 61.37);
  const after = await rig.read();
  expect(after.get('driveX')).toBeCloseTo(61.37, 9);
  expect(10 * Math.log10(after.get('powerMw') ?? NaN)).toBeCloseTo(after.get('powerDbm') ?? NaN, 4);
});
