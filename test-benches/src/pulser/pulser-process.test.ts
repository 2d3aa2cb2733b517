import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { connect } from 'node:net';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import jsmodbus from 'jsmodbus';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { BenchLogEntry } from '../kit/bench-log.js';
import { forkBench, type ForkedBench } from '../kit/forked-bench.fixture.js';
import { mbpollRead, mbpollWrite, type MbpollRequest } from '../kit/mbpoll-client.fixture.js';

const folder = mkdtempSync(join(tmpdir(), 'pulser-bench-'));
const logFile = join(folder, 'bench.log');
let bench: ForkedBench;
let heart: NodeJS.Timeout | undefined;
let client: InstanceType<typeof jsmodbus.client.TCP>;

const at = (type: MbpollRequest['type'], address: number): MbpollRequest => ({
  wire: ['-m', 'tcp', '-p', String(bench.port)],
  device: '127.0.0.1',
  unit: 1,
  type,
  address,
});
// Bounds for a busy machine, not measures of speed.
const patient = { timeout: 15_000 };

beforeAll(async () => {
  const quiet = ['--drift', 'off', '--noise', 'off', '--speed', '5'];
  bench = await forkBench('pulser', [
    '--port',
    '0',
    '--log',
    logFile,
    '--fault',
    'nan.energy@1000',
    ...quiet,
  ]);
  const wire = connect(bench.port, '127.0.0.1');
  client = new jsmodbus.client.TCP(wire, 1, 2000);
  await once(wire, 'connect');
  let beat = 0;
  heart = setInterval(() => void client.writeSingleRegister(2, (beat += 1) & 0xffff).catch(() => {}), 40);
}, 30_000);

afterAll(async () => {
  clearInterval(heart);
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

/** The trace in five requests, as 125 registers fit in one, kW. */
async function readTrace(): Promise<number[]> {
  const points: number[] = [];
  for (let from = 0; from < 512; from += 125) {
    const count = Math.min(125, 512 - from);
    const { response } = await client.readInputRegisters(1000 + from, count);
    const bytes = response.body.valuesAsBuffer;
    for (let i = 0; i < count; i += 1) points.push(bytes.readInt16BE(2 * i) / 10);
  }
  return points;
}

describe('the pulser bench as a process', { timeout: 40_000 }, () => {
  it('is commanded and read by mbpoll', async () => {
    await expect.poll(() => mbpollRead(at('discrete-input', 0), 3), patient).toEqual([1, 0, 0]);
    await mbpollWrite(at('holding-register', 0), 6000);
    expect(await mbpollRead(at('holding-register', 0), 2)).toEqual([6000, 3000]);
    await expect.poll(() => mbpollRead(at('input-register', 0), 1), patient).toEqual([6000]);
    await expect
      .poll(async () => (await mbpollRead(at('input-float', 1), 1))[0], patient)
      .toBeGreaterThan(105);
    await expect(mbpollWrite(at('holding-register', 1), 499)).rejects.toThrow();
  });

  it('gives its whole trace to jsmodbus in five requests', async () => {
    const points = await readTrace();
    expect(points).toHaveLength(512);
    const energyMJ = points.reduce((sum, kw) => sum + kw * 1e-2, 0);
    const meterMJ = (await mbpollRead(at('input-float', 1), 1))[0] ?? NaN;
    expect(energyMJ / meterMJ).toBeCloseTo(1, 1);
    const half = Math.max(...points) / 2;
    // One pulse, 60 to 100 ns wide.
    const high = points.flatMap((kw, i) => (kw > half ? [i] : []));
    expect(high.length).toBeGreaterThanOrEqual(5);
    expect(high.length).toBeLessThanOrEqual(11);
    expect((high.at(-1) ?? 0) - (high[0] ?? 0)).toBe(high.length - 1);
  });

  it('has all of it in its log', () => {
    const entries = readFileSync(logFile, 'utf8')
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as BenchLogEntry & { benchS: number });
    const shown = { event: 'write', unit: 1, register: 0, value: 6000, name: 'drive', engineering: 60 };
    expect(entries).toContainEqual(expect.objectContaining(shown));
    expect(entries).toContainEqual(expect.objectContaining({ event: 'refused', register: 1, values: [499] }));
    const truth = entries.findLast((entry) => entry.event === 'truth');
    expect(truth?.loss).toBeGreaterThanOrEqual(0);
    expect(truth?.loss).toBeLessThan(2);
    expect(truth?.best['drive']).toBeCloseTo(68, 0);
  });
});
