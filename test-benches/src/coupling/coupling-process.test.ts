import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readBenchLog, until } from '../kit/bench-process.fixture.js';
import { forkBench, type ForkedBench } from '../kit/forked-bench.fixture.js';
import { mbpollRead, mbpollWrite, type MbpollRequest } from '../kit/mbpoll-client.fixture.js';

const folder = mkdtempSync(join(tmpdir(), 'coupling-bench-'));
const logFile = join(folder, 'bench.log');
const path = join(folder, 'line');
let bench: ForkedBench;

beforeAll(async () => {
  bench = await forkBench('coupling', ['--pty', path, '--seed', '3', '--drift', 'off', '--log', logFile]);
}, 30_000);

afterAll(async () => {
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

const at = (type: MbpollRequest['type'], address: number, unit = 5): MbpollRequest => ({
  wire: ['-m', 'rtu', '-b', '19200', '-P', 'even', '-o', '1'],
  device: bench.path,
  unit,
  type,
  address,
});
/** One master at a time is on the line: heartbeats come between what is asked. */
let beat = 0;
const live = () => mbpollWrite(at('holding-register', 2), (beat = (beat + 1) & 0xffff));
const flags = () => mbpollRead(at('discrete-input', 0), 2);

describe('the coupling bench as a process, by mbpoll over a pseudo-terminal', { timeout: 60_000 }, () => {
  it('waits with its shutter closed for a heartbeat, and opens it when it lives', async () => {
    expect(await flags()).toEqual([0, 1]);
    await until(async () => {
      await live();
      return (await flags()).join() === '1,0';
    });
  });

  it('shows power in both units, the weak light of a ring', async () => {
    await live();
    const [dbm = NaN, mw = NaN] = await mbpollRead(at('input-float', 0), 2);
    expect(dbm).toBeLessThan(-8);
    expect(10 * Math.log10(mw)).toBeCloseTo(dbm, 3);
    await live();
    const [temperature = NaN] = await mbpollRead(at('input-register', 4), 1);
    expect(temperature / 100).toBeCloseTo(24, 0);
  });

  it('takes drives in hundredths of a volt', async () => {
    await live();
    await mbpollWrite(at('holding-register', 0), 6000);
    await live();
    expect(await mbpollRead(at('holding-register', 0), 2)).toEqual([6000, 5000]);
  });

  it.each([
    ['a drive above 100 V', () => mbpollWrite(at('holding-register', 1), 10_001)],
    ['an address outside the map', () => mbpollRead(at('input-register', 6), 1)],
    ['to tell the instructor how good it could be', () => mbpollRead(at('holding-register', 0, 247), 1)],
  ])('refuses %s', async (_what, request) => {
    await live();
    await expect(request()).rejects.toThrow();
  });

  it('is bumped by an instructor', async () => {
    // The eighth fault: after the seven that every bench has.
    await mbpollWrite(at('holding-register', 100, 247), 8);
    await mbpollWrite(at('holding-register', 100, 247), 0);
    await until(() => Promise.resolve(readBenchLog(logFile).some((entry) => entry.event === 'fault')));
  });

  it('closes its shutter and goes to rest by itself when the heartbeat stops', async () => {
    await until(async () => (await flags()).join() === '0,1');
    expect(await mbpollRead(at('holding-register', 0), 2)).toEqual([5000, 5000]);
    // The power meter takes a moment to see it.
    await until(async () => ((await mbpollRead(at('input-float', 0), 1))[0] ?? NaN) < -45);
  });

  it('has all of it in its log', () => {
    const entries = readBenchLog(logFile);
    expect(entries).toContainEqual(
      expect.objectContaining({ event: 'write', name: 'driveX', unit: 5, value: 6000, engineering: 60 }),
    );
    expect(entries).toContainEqual(expect.objectContaining({ event: 'refused', values: [10_001] }));
    expect(entries).toContainEqual(expect.objectContaining({ event: 'fault', fault: 'bump', isOn: true }));
    expect(entries.some((entry) => entry.event === 'watchdog' && entry.isTripped)).toBe(true);
    const places = entries.flatMap((entry) => (entry.event === 'truth' ? [entry.best['x'] ?? NaN] : []));
    expect(Math.abs((places.at(-1) ?? NaN) - (places[0] ?? NaN))).toBeGreaterThan(0.1);
  });

  it('ends when whoever started it asks', async () => {
    expect(await bench.end()).toBe(0);
  });
});
