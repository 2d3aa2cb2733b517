import { afterAll, beforeAll, expect, it } from 'vitest';
import { until } from '../../kit/bench-process.fixture.js';
import { forkBench, type ForkedBench } from '../../kit/forked-bench.fixture.js';
import { openShippedRig, type OpenedRig } from '../../kit/shipped-rig-wire.fixture.js';
import { mixerRig } from './mixer-rig.js';

let bench: ForkedBench;
let rig: OpenedRig;

beforeAll(async () => {
  bench = await forkBench('mixer', ['--noise', 'off']);
  rig = await openShippedRig(mixerRig({ host: '127.0.0.1', port: bench.port }), { timeoutMs: 8000 });
}, 30_000);

afterAll(async () => {
  await rig.session.close();
  await bench.end();
});

it('is read and written by the adapter and the addresses of its rig', { timeout: 20_000 }, async () => {
  const first = await rig.read();
  expect(first.get('distributor')).toBe(15);
  expect(first.get('position')).toBe(15);
  expect(first.get('cultureTemp')).toBeCloseTo(30, 9);
  expect(first.get('watchdogFlag')).toBe(1);
  // What is not waste is yield: 10 g/L of substrate make 0.5 g each.
  expect((first.get('biomass') ?? NaN) + 0.5 * (first.get('substrate') ?? NaN)).toBeCloseTo(5, 1);
  let beat = 0;
  await until(async () => {
    await rig.write('heartbeat', (beat += 1));
    return (await rig.read()).get('pumpRunning') === 1;
  });
  await rig.write('distributor', 53.25);
  expect((await rig.read()).get('distributor')).toBeCloseTo(53.25, 9);
});
