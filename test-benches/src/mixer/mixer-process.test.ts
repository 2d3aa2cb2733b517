import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import modbus from 'modbus-serial';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { beatHeart, readBenchLog, until } from '../kit/bench-process.fixture.js';
import { forkBench, type ForkedBench } from '../kit/forked-bench.fixture.js';
import { mbpollRead, mbpollWrite, type MbpollRequest } from '../kit/mbpoll-client.fixture.js';
import { settledProduct } from './mixer-physics.js';
import { restPositionPct } from './mixer-model.js';

const folder = mkdtempSync(join(tmpdir(), 'mixer-bench-'));
const logFile = join(folder, 'bench.log');
const client = new modbus.default();
let bench: ForkedBench;
let silence: () => Promise<void> = async () => {};

beforeAll(async () => {
  bench = await forkBench('mixer', ['--seed', '3', '--drift', 'off', '--log', logFile]);
  await client.connectTCP('127.0.0.1', { port: bench.port });
  client.setTimeout(2000);
  client.setID(1);
}, 30_000);

afterAll(async () => {
  await silence();
  if (client.isOpen) client.close(() => {});
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

const at = (type: MbpollRequest['type'], address: number, unit = 1): MbpollRequest => ({
  wire: ['-m', 'tcp', '-p', String(bench.port)],
  device: '127.0.0.1',
  unit,
  type,
  address,
});

describe('the mixer bench as a process, seen by mbpoll', { timeout: 40_000 }, () => {
  it('waits with its feed off for a heartbeat, and begins when it lives', async () => {
    expect(await mbpollRead(at('discrete-input', 0), 2)).toEqual([0, 1]);
    silence = beatHeart((beat) => client.writeRegister(1, beat));
    await until(async () => (await mbpollRead(at('discrete-input', 0), 2)).join() === '1,0');
  });

  it('shows in its registers what the balances come to', async () => {
    const { biomass, substrate } = settledProduct(restPositionPct, [1, 1, 1, 1]);
    // What grew without feed before the first heartbeat leaves within a minute of bench time.
    await until(async () => Math.abs(((await mbpollRead(at('input-float', 2), 1))[0] ?? 0) - biomass) < 0.1);
    const [shownBiomass, shownSubstrate, flow] = await mbpollRead(at('input-float', 2), 3);
    expect(Math.abs((shownBiomass ?? NaN) - biomass)).toBeLessThan(0.25);
    expect(Math.abs((shownSubstrate ?? NaN) - substrate)).toBeLessThan(0.5);
    expect(flow).toBe(1);
    const [position, temperature] = await mbpollRead(at('input-register', 0), 2);
    expect(position).toBe(restPositionPct * 100);
    expect((temperature ?? NaN) / 100).toBeCloseTo(30, 0);
  });

  it('takes a position and goes there', async () => {
    await mbpollWrite(at('holding-register', 0), 5300);
    expect(await mbpollRead(at('holding-register', 0), 1)).toEqual([5300]);
    await until(async () => (await mbpollRead(at('input-register', 0), 1))[0] === 5300);
  });

  it.each([
    ['a position above 100 %', () => mbpollWrite(at('holding-register', 0), 10_001)],
    ['an address outside the map', () => mbpollRead(at('input-register', 9), 1)],
    ['a unit that is not there', () => mbpollRead(at('input-register', 0, 9), 1)],
    ['to tell the instructor how good it could be', () => mbpollRead(at('holding-register', 0, 247), 1)],
  ])('refuses %s', async (_what, request) => {
    await expect(request()).rejects.toThrow();
  });

  it('stops its feed and goes to rest by itself when the heartbeat stops', async () => {
    await silence();
    silence = async () => {};
    await until(async () => (await mbpollRead(at('discrete-input', 0), 2)).join() === '0,1');
    await until(async () => (await mbpollRead(at('input-register', 0), 1))[0] === restPositionPct * 100);
    expect(await mbpollRead(at('input-register', 8), 1)).toEqual([1]);
  });

  it('has all of it in its log', () => {
    const entries = readBenchLog(logFile);
    expect(entries).toContainEqual(
      expect.objectContaining({ event: 'write', name: 'distributor', unit: 1, value: 5300, engineering: 53 }),
    );
    expect(entries).toContainEqual(expect.objectContaining({ event: 'refused', values: [10_001] }));
    const lastBeat = entries.findLast((entry) => entry.event === 'write' && entry.name === 'heartbeat');
    const trip = entries.findLast((entry) => entry.event === 'watchdog' && entry.isTripped);
    // Two bench seconds, and the twentieth that its steps are long.
    expect((trip?.benchS ?? 0) - (lastBeat?.benchS ?? 0)).toBeCloseTo(2, 0);
    const truth = entries.findLast((entry) => entry.event === 'truth' && entry.objective !== null);
    expect(truth).toMatchObject({ best: { distributor: expect.closeTo(53.1, 1) } });
  });

  it('ends when whoever started it asks', async () => {
    expect(await bench.end()).toBe(0);
  });
});
