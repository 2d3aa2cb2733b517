import { execFile } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { connect, type Socket } from 'node:net';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { promisify } from 'node:util';
import jsmodbus from 'jsmodbus';
import modbus from 'modbus-serial';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { BenchLogEntry } from '../kit/bench-log.js';
import { benchProgram, forkBench, type ForkedBench } from '../kit/forked-bench.fixture.js';

const folder = mkdtempSync(join(tmpdir(), 'burner-bench-'));
const logFile = join(folder, 'bench.log');
const client = new modbus.default();
let bench: ForkedBench;
let heart: NodeJS.Timeout | undefined;

beforeAll(async () => {
  bench = await forkBench('burner', ['--port', '0', '--seed', '3', '--drift', 'off', '--log', logFile]);
  await client.connectTCP('127.0.0.1', { port: bench.port });
  client.setTimeout(2000);
}, 30_000);

afterAll(async () => {
  stopHeart();
  if (client.isOpen) client.close(() => {});
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

let beat = 0;
function startHeart(): void {
  heart = setInterval(() => void writeAs(1, 1, (beat = (beat + 1) & 0xffff)).catch(() => {}), 50);
}
function stopHeart(): void {
  clearInterval(heart);
}
/** The library keeps the unit in the client: set it in the same turn as the request. */
function writeAs(unit: number, register: number, value: number) {
  client.setID(unit);
  return client.writeRegister(register, value);
}
function readAs(unit: number, register: number, count: number) {
  client.setID(unit);
  return client.readHoldingRegisters(register, count);
}
async function until(isTrue: () => Promise<boolean>): Promise<void> {
  for (let tries = 0; tries < 200; tries += 1) {
    if (await isTrue()) return;
    await wait(50);
  }
  throw new Error('What was waited for did not come within ten seconds.');
}
const flame = async () => (await readAs(1, 8, 1)).data[0];
const isWrite = (entry: BenchLogEntry) => entry.event === 'write' && 'register' in entry;
const logged = () =>
  readFileSync(logFile, 'utf8')
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as BenchLogEntry & { atMs: number; benchS: number });

// Bounds for a busy machine, not measures of speed.
const patient = { timeout: 30_000 };

describe('the burner bench as a process', patient, () => {
  it('waits dark for a heartbeat and lights when it lives', async () => {
    expect(await flame()).toBe(0);
    startHeart();
    await until(async () => (await flame()) === 1);
  });

  it('shows the same registers to an independent client', async () => {
    await writeAs(1, 0, 6000);
    await until(async () => (await readAs(1, 2, 1)).data[0] === 6000);
    await wait(1500);
    const socket: Socket = connect(bench.port, '127.0.0.1');
    const other = new jsmodbus.client.TCP(socket, 1, 2000);
    await once(socket, 'connect');
    const { response } = await other.readHoldingRegisters(0, 13);
    const words = response.body.valuesAsBuffer;
    expect(words.readUInt16BE(0)).toBe(6000);
    expect(words.readUInt16BE(4)).toBe(6000);
    // λ = 1.55 at trim 60: O2 = 21 · (1 − 1/1.55) = 7.45 %, flue gas 165 + 60 · 0.45 = 192 °C, CO 12 ppm.
    expect(words.readUInt16BE(6) / 100).toBeCloseTo(7.45, 0);
    expect(words.readFloatBE(8)).toBeGreaterThanOrEqual(0);
    expect(words.readFloatBE(8)).toBeLessThan(40);
    expect(words.readInt16BE(12) / 10).toBeCloseTo(192, -0.5);
    expect(words.readInt16BE(14) / 10).toBeCloseTo(20, 0);
    expect([words.readUInt16BE(16), words.readUInt16BE(18), words.readUInt16BE(20)]).toEqual([1, 0, 0]);
    expect(words.readFloatBE(22)).toBeCloseTo(12.5, 0);
    socket.destroy();
  });

  it('tells the instructor the bench time, and nobody how good it could be', async () => {
    expect((await readAs(247, 6, 2)).buffer.readFloatBE(0)).toBeGreaterThan(1);
    for (const register of [0, 2, 4]) {
      await expect(readAs(247, register, 2)).rejects.toMatchObject({ modbusCode: 2 });
    }
  });

  it.each([
    ['an address outside the map', () => readAs(1, 13, 1), 2],
    ['a block that reaches outside', () => readAs(1, 12, 2), 2],
    ['a write to a reading', () => writeAs(1, 3, 100), 2],
    ['an air trim above 100 %', () => writeAs(1, 0, 10_001), 3],
    ['another table', () => client.readInputRegisters(0, 1), 1],
    ['a unit that is not there', () => readAs(9, 0, 1), 11],
  ])('refuses %s by its exception', async (_what, request, modbusCode) => {
    client.setID(1);
    await expect(request()).rejects.toMatchObject({ modbusCode });
  });

  it('takes a joined write as a whole or not at all', async () => {
    client.setID(1);
    await expect(client.writeRegisters(0, [3000, 5, 1])).rejects.toMatchObject({ modbusCode: 2 });
    expect((await readAs(1, 0, 1)).data[0]).toBe(6000);
  });

  it('plays the faults that an instructor sets', async () => {
    await writeAs(247, 100, 1);
    expect((await readAs(1, 4, 2)).buffer.readFloatBE(0)).toBeNaN();
    await writeAs(247, 100, 2);
    await expect(readAs(1, 3, 1)).rejects.toMatchObject({ modbusCode: 4 });
    expect((await readAs(1, 0, 2)).data).toHaveLength(2);
    await writeAs(247, 100, 0);
    expect((await readAs(1, 4, 2)).buffer.readFloatBE(0)).toBeGreaterThanOrEqual(0);
  });

  it('goes to its safe position by itself when the heartbeat stops', async () => {
    stopHeart();
    await until(async () => (await readAs(1, 9, 1)).data[0] === 1);
    await until(async () => (await readAs(1, 2, 1)).data[0] === 7000);
    expect(await flame()).toBe(0);
    expect((await readAs(1, 10, 1)).data[0]).toBe(1);
  });

  it('has all of it in its log', () => {
    const entries = logged();
    expect(entries).toContainEqual(
      expect.objectContaining({ event: 'write', unit: 1, register: 0, value: 6000, engineering: 60 }),
    );
    const lastBeat = entries.findLast((entry) => isWrite(entry) && entry.register === 1);
    const trip = entries.find((entry) => entry.event === 'watchdog' && entry.isTripped);
    // Two bench seconds, and the hundredth that the bench's steps are long.
    expect((trip?.benchS ?? 0) - (lastBeat?.benchS ?? 0)).toBeCloseTo(2, 1);
    const truths = entries.filter((entry) => entry.event === 'truth');
    expect(truths.length).toBeGreaterThan(10);
    // Critical ratio 1.10 without drift: the maximum of the pure map, and what air trim 60 loses against it.
    const lit = truths.findLast(({ loss }) => loss !== null);
    expect(lit?.best['airTrim']).toBeCloseTo(15.39, 1);
    expect(lit?.loss).toBeGreaterThan(2);
    expect(entries).toContainEqual(
      expect.objectContaining({ event: 'fault', fault: 'exception', isOn: true }),
    );
    expect(entries.some((entry) => isWrite(entry) && entry.value === 10_001)).toBe(false);
  });

  it('ends when whoever started it asks', async () => {
    expect(await bench.end()).toBe(0);
  });
});

it('names the option at fault', patient, async () => {
  const outcome = promisify(execFile)(process.execPath, [benchProgram('burner'), '--speed', '0']);
  await expect(outcome).rejects.toMatchObject({ code: 2, stderr: expect.stringContaining('--speed') });
});
