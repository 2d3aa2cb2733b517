import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { until } from '../../kit/bench-process.fixture.js';
import { forkBench, type ForkedBench } from '../../kit/forked-bench.fixture.js';
import { openShippedRig, type OpenedRig } from '../../kit/shipped-rig-wire.fixture.js';
import { stringRig } from './string-rig.js';

const folder = mkdtempSync(join(tmpdir(), 'string-rig-'));
let bench: ForkedBench;
let rig: OpenedRig;

beforeAll(async () => {
  const line = ['--pty', join(folder, 'line'), '--profile', 'steady', '--noise', 'off'];
  bench = await forkBench('string', line);
  rig = await openShippedRig(stringRig({ path: bench.path }), { replyTimeoutMs: 4000, timeoutMs: 8000 });
}, 30_000);

afterAll(async () => {
  await rig.session.close();
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

it('is read and written by the adapter and the addresses of its rig', { timeout: 20_000 }, async () => {
  const first = await rig.read();
  expect(first.get('voltageSetpoint')).toBe(190);
  expect(first.get('irradiance')).toBe(800);
  expect([first.get('running'), first.get('watchdogFlag'), first.get('current')]).toEqual([0, 1, 0]);
  let beat = 0;
  await until(async () => {
    await rig.write('heartbeat', (beat += 1));
    return (await rig.read()).get('running') === 1;
  });
  await rig.write('voltageSetpoint', 151.25);
  expect((await rig.read()).get('voltageSetpoint')).toBe(151.25);
  await until(async () => ((await rig.read()).get('current') ?? 0) > 1);
  const { voltage = NaN, current = NaN, power = NaN } = Object.fromEntries(await rig.read());
  expect(power / (voltage * current)).toBeCloseTo(1, 3);
});
