import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { connect } from 'node:net';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import jsmodbus from 'jsmodbus';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { BenchLogEntry } from '../kit/bench-log.js';
import { forkBench, type ForkedBench } from '../kit/forked-bench.fixture.js';
import { mbpollRead, mbpollWrite, type MbpollRequest } from '../kit/mbpoll-client.fixture.js';

const folder = mkdtempSync(join(tmpdir(), 'matcher-bench-'));
const logFile = join(folder, 'bench.log');
const quiet = ['--drift', 'off', '--noise', 'off', '--speed', '5'];
let bench: ForkedBench;
let heart: NodeJS.Timeout | undefined;
const at = (type: MbpollRequest['type'], address: number): MbpollRequest => ({
  wire: ['-m', 'tcp', '-p', String(bench.port)],
  device: '127.0.0.1',
  unit: 1,
  type,
  address,
});
const read = (type: MbpollRequest['type'], address: number, count: number) =>
  mbpollRead(at(type, address), count);
// Bounds for a busy machine, not measures of speed.
const patient = { timeout: 10_000 };
const socket = () => connect(bench.port, '127.0.0.1');

/** Beats by the jsmodbus client for as long as the tests run. */
async function startHeart(): Promise<void> {
  const wire = socket();
  const client = new jsmodbus.client.TCP(wire, 1, 2000);
  await once(wire, 'connect');
  let beat = 0;
  heart = setInterval(() => void client.writeSingleRegister(2, (beat += 1) & 0xffff).catch(() => {}), 30);
}

beforeAll(async () => {
  bench = await forkBench('matcher', ['--port', '0', '--log', logFile, ...quiet]);
  await startHeart();
}, 30_000);

afterAll(async () => {
  clearInterval(heart);
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

describe('the matcher bench as a process', { timeout: 30_000 }, () => {
  it('waits dark for a heartbeat and runs when it lives', async () => {
    await expect.poll(() => read('discrete-input', 0, 4), patient).toEqual([1, 0, 1, 0]);
  });

  it('is commanded and read by mbpoll', async () => {
    await mbpollWrite(at('holding-register', 0), 5500);
    await mbpollWrite(at('holding-register', 1), 2500);
    expect(await read('holding-register', 0, 2)).toEqual([5500, 2500]);
    await expect.poll(() => read('input-register', 0, 2), patient).toEqual([5500, 2500]);
    // Folded back to its limit of reflected power, W.
    await expect.poll(async () => (await read('input-float', 4, 1))[0], patient).toBeCloseTo(200, 0);
    expect((await read('input-float', 2, 1))[0]).toBeGreaterThan(200);
  });

  it('shows the same to jsmodbus, and takes its coil', async () => {
    const wire = socket();
    const client = new jsmodbus.client.TCP(wire, 1, 2000);
    await once(wire, 'connect');
    const inputs = (await client.readInputRegisters(0, 9)).response.body.valuesAsBuffer;
    expect([inputs.readUInt16BE(0), inputs.readUInt16BE(2)]).toEqual([5500, 2500]);
    expect(inputs.readFloatBE(8)).toBeCloseTo(200, 0);
    expect(inputs.readUInt16BE(12) / 10_000).toBeGreaterThan(0.4);
    expect((await client.readDiscreteInputs(0, 4)).response.body.valuesAsArray.slice(0, 4)).toEqual([
      1, 0, 1, 0,
    ]);
    await client.writeSingleCoil(0, true);
    expect((await client.readCoils(0, 1)).response.body.valuesAsArray[0]).toBe(0);
    await expect(client.writeSingleRegister(0, 10_001)).rejects.toMatchObject({
      response: { body: { code: 3 } },
    });
    await expect(client.readInputRegisters(9, 1)).rejects.toMatchObject({ response: { body: { code: 2 } } });
    wire.destroy();
  });

  it('restarts when an instructor says so: its peers are gone, then it waits for heartbeats', async () => {
    const wire = socket();
    const instructor = new jsmodbus.client.TCP(wire, 247, 2000);
    await once(wire, 'connect');
    const gone = once(wire, 'close');
    void instructor.writeSingleRegister(100, 6).catch(() => {});
    await gone;
    const commands = () => read('holding-register', 0, 2).catch(() => []);
    await expect.poll(commands, patient).toEqual([6000, 3000]);
    expect(await read('discrete-input', 3, 1)).toEqual([1]);
    clearInterval(heart);
    await startHeart();
    await expect.poll(() => read('discrete-input', 3, 1), patient).toEqual([0]);
  });

  it('has all of it in its log', async () => {
    await wait(150);
    const entries = readFileSync(logFile, 'utf8')
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as BenchLogEntry & { benchS: number });
    const shown = { event: 'write', unit: 1, register: 1, value: 2500, name: 'series', engineering: 25 };
    expect(entries).toContainEqual(expect.objectContaining(shown));
    expect(entries).toContainEqual(
      expect.objectContaining({ event: 'refused', register: 0, values: [10_001] }),
    );
    expect(entries).toContainEqual(expect.objectContaining({ event: 'fault', fault: 'reboot', isOn: true }));
    const truths = entries.filter((entry) => entry.event === 'truth');
    // Closed form for 2 − j60 Ω: Q = sqrt(24), shunt 1149.9 pF, series 176.5 pF of their ranges.
    expect(truths.at(-1)?.best['shunt']).toBeCloseTo(42.5, 1);
    expect(truths.at(-1)?.best['series']).toBeCloseTo(38.25, 1);
    expect(truths.some(({ loss }) => loss !== null && loss > 500)).toBe(true);
  });
});
