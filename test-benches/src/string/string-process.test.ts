import { once } from 'node:events';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ReadlineParser, SerialPort } from 'serialport';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { beatHeart, readBenchLog, until } from '../kit/bench-process.fixture.js';
import { forkBench, type ForkedBench } from '../kit/forked-bench.fixture.js';

const folder = mkdtempSync(join(tmpdir(), 'string-bench-'));
const logFile = join(folder, 'bench.log');
const path = join(folder, 'line');
let bench: ForkedBench;
let port: SerialPort;
let lines: ReadlineParser;
let silence: () => Promise<void> = async () => {};

beforeAll(async () => {
  bench = await forkBench('string', [
    '--pty',
    path,
    '--profile',
    'steady',
    '--noise',
    'off',
    '--log',
    logFile,
  ]);
  port = new SerialPort({ path: bench.path, baudRate: 115_200, autoOpen: false });
  lines = port.pipe(new ReadlineParser({ delimiter: '\n' }));
  await new Promise<void>((opened, failed) => port.open((error) => (error ? failed(error) : opened())));
}, 30_000);

afterAll(async () => {
  await silence();
  await new Promise<void>((closed) => port.close(() => closed()));
  await bench.end();
  rmSync(folder, { recursive: true, force: true });
});

const tell = (command: string) => new Promise<void>((sent) => port.write(`${command}\n`, () => sent()));
/** Asks after whatever was asked before: the line carries one answer at a time. */
let before: Promise<unknown> = Promise.resolve();
function ask(query: string): Promise<string> {
  const answer = before.then(async () => {
    const line = once(lines, 'data');
    await tell(query);
    const [text] = (await line) as [string];
    return text;
  });
  before = answer;
  return answer;
}
const numbers = async (query: string) => (await ask(query)).split(';').map(Number);

describe('the string bench as a process, through a serial port', { timeout: 40_000 }, () => {
  it('says who it is', async () => {
    expect(await ask('*IDN?')).toMatch(/^Brackwater Test Station,STRING-6,/);
  });

  it('stands idle until a heartbeat lives', async () => {
    expect(await ask('OUTP:STAT?;SYST:WATC?')).toBe('0;1');
    silence = beatHeart((beat) => tell(`SYST:HEAR ${beat}`));
    await until(async () => (await ask('OUTPut:STATe?')) === '1');
  });

  it('holds the voltage that it is told and measures all of one moment in one line', async () => {
    await tell('SOUR:VOLT 150.25');
    expect(await ask('SOUR:VOLT?')).toBe('150.25');
    await until(async () => Math.abs(((await numbers('MEAS:VOLT?'))[0] ?? 0) - 150) < 2);
    const [voltage = NaN, current = NaN, power = NaN] = await numbers('MEAS:VOLT?;MEAS:CURR?;MEAS:POW?');
    expect(power / (voltage * current)).toBeCloseTo(1, 4);
    // Six modules of 200 W at 800 W/m² and 45 °C: a fifth less light, a tenth less for the heat.
    expect(power).toBeGreaterThan(700);
    expect(power).toBeLessThan(960);
  });

  it('queues errors for what it refuses, as SCPI numbers them', async () => {
    await tell('*CLS');
    await tell('SOUR:VOLT 201');
    expect(await ask('SYST:ERR?')).toMatch(/^-222,/);
    await tell('SOUR:FREQ 5');
    expect(await ask('SYST:ERR?')).toMatch(/^-113,/);
    expect(await ask('SYST:ERR?')).toMatch(/^0,/);
    expect(await ask('SOUR:VOLT?')).toBe('150.25');
  });

  it('is put in the shade by an instructor', async () => {
    const lit = (await numbers('MEAS:POW?'))[0] ?? NaN;
    // The eighth fault: after the seven that every bench has.
    await tell('SYST:FAUL 8');
    await until(async () => ((await numbers('MEAS:POW?'))[0] ?? NaN) < 0.7 * lit);
    await tell('SYST:FAUL 0');
    await until(async () => ((await numbers('MEAS:POW?'))[0] ?? NaN) > 0.9 * lit);
  });

  it('lets go of the string by itself when the heartbeat stops', async () => {
    await silence();
    silence = async () => {};
    await until(async () => (await ask('SYST:WATC?')) === '1');
    expect(await ask('SOUR:VOLT?;SYST:WATC:COUN?')).toBe('190.00;1');
    await until(async () => ((await numbers('MEAS:CURR?'))[0] ?? NaN) === 0);
  });

  it('has all of it in its log', () => {
    const entries = readBenchLog(logFile);
    expect(entries).toContainEqual(
      expect.objectContaining({ event: 'write', name: 'voltageSetpoint', engineering: 150.25 }),
    );
    expect(entries).toContainEqual(expect.objectContaining({ event: 'refused', command: 'SOUR:VOLT 201' }));
    const lastBeat = entries.findLast((entry) => entry.event === 'write' && entry.name === 'heartbeat');
    const trip = entries.findLast((entry) => entry.event === 'watchdog' && entry.isTripped);
    expect((trip?.benchS ?? 0) - (lastBeat?.benchS ?? 0)).toBeCloseTo(2, 1);
    const truth = entries.find((entry) => entry.event === 'truth' && entry.objective !== null);
    expect(truth).toMatchObject({ loss: expect.any(Number) as number });
  });

  it('ends when whoever started it asks', async () => {
    expect(await bench.end()).toBe(0);
  });
});
