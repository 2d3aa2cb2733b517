import { createHash } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import {
  closeInterrupted,
  RunFileReader,
  RunFileWriter,
  sealFile,
} from '../../src/recordings/run-file/index.js';
import { temporaryFolder, testBatch, testManifest } from './run-file-fixture.js';

const manifest = testManifest();
const columnCount = manifest.columns.length;
const event = {
  sequence: 1,
  tS: 0,
  at: '2026-03-01T08:00:00.000Z',
  body: { type: 'run.started', by: 'engineer' },
} as const;
const end = { status: 'finished', verdict: 'pass', reason: 'Done.', results: { a: 1.5 } } as const;

describe('run file', () => {
  const folder = temporaryFolder();
  afterAll(folder.remove);
  let count = 0;
  const newFile = () => join(folder.path, `run-${(count += 1)}.sqlite`);

  async function written(rows: number, valueOf: (k: number, column: number) => number) {
    const file = newFile();
    const writer = await RunFileWriter.create(file);
    await writer.begin(manifest);
    for (let k = 1; k <= rows; k += 97) {
      const size = Math.min(97, rows - k + 1);
      await writer.append(testBatch(k, size, columnCount, valueOf), k === 1 ? [event] : []);
    }
    return { file, writer };
  }

  it('is opened by plain SQL and holds every row, with NULL where a value was not good', async () => {
    const { file, writer } = await written(250, (k, c) => (c === 1 && k % 10 === 0 ? NaN : k + c / 100));
    await writer.end(end);
    const plain = new Database(file, { readonly: true });
    const rows = plain.prepare('SELECT * FROM scan ORDER BY k').all() as Record<string, unknown>[];
    expect(rows.map((row) => row.k)).toEqual(Array.from({ length: 250 }, (_, i) => i + 1));
    expect(Object.keys(rows[0] ?? {})).toEqual([
      'k',
      't_s',
      'at_ms',
      'step',
      ...manifest.columns.map((c) => c.name),
    ]);
    expect(rows[19]).toMatchObject({ t_s: 0.2, at_ms: 1_772_352_000_200, step: 'hold', oxygen: 20 });
    expect(rows[19]?.stackTemperature).toBeNull();
    expect(rows[20]).toMatchObject({ step: null, 'airTrim.applied': 21 + 7 / 100 });
    const types = plain.prepare('SELECT DISTINCT typeof(k), typeof(at_ms), typeof(t_s) FROM scan').raw();
    expect(types.all()).toEqual([['integer', 'integer', 'real']]);
    expect(plain.prepare("SELECT type, json_extract(body, '$.by') AS by FROM event").all()).toEqual([
      { type: 'run.started', by: 'engineer' },
    ]);
    const value = plain.prepare("SELECT value FROM manifest WHERE name = 'end'").pluck().get() as string;
    expect(JSON.parse(value)).toEqual({ ...end, scans: 250 });
    expect(plain.pragma('integrity_check', { simple: true })).toBe('ok');
    plain.close();
  });

  it('is read while it is being written', async () => {
    const { file, writer } = await written(100, (k) => k);
    const reader = await RunFileReader.open(file);
    expect(await reader.lastScan()).toEqual({ k: 100, tS: 1, atMs: 1_772_352_001_000 });
    await writer.append(
      testBatch(101, 5, columnCount, (k) => k),
      [],
    );
    expect((await reader.lastScan())?.k).toBe(105);
    expect((await reader.manifest()).end).toBeNull();
    expect(await reader.columns()).toEqual(manifest.columns);
    await reader.close();
    await writer.end(end);
  });

  it('gives exact rows where they are few enough, inside the span asked for', async () => {
    const { file, writer } = await written(300, (k) => Math.sin(k));
    await writer.end(end);
    const reader = await RunFileReader.open(file);
    const samples = await reader.samples({ columns: ['airTrim'], fromS: 0.5, toS: 0.99, points: 100 });
    expect(samples.isExact).toBe(true);
    expect(samples.tS).toEqual(Array.from({ length: 50 }, (_, i) => (50 + i) / 100));
    expect(samples.mean[0]).toEqual(Array.from({ length: 50 }, (_, i) => Math.sin(50 + i)));
    expect(samples.max).toEqual(samples.mean);
    const outside = await reader.samples({ columns: [], fromS: 50, points: 10 });
    expect(outside).toMatchObject({ isExact: true, tS: [] });
    await reader.close();
  });

  it('gives buckets that lose neither minimum nor maximum and whose means are exact', async () => {
    const rows = 1000;
    const value = (k: number) => (k === 437 ? 1e6 : k === 438 ? -1e6 : (k * 7919) % 1000);
    const { file, writer } = await written(rows, (k, c) => (c === 1 && k < 300 ? NaN : value(k)));
    await writer.end(end);
    const reader = await RunFileReader.open(file);
    const points = 64;
    const samples = await reader.samples({ columns: ['oxygen', 'stackTemperature'], points });
    expect(samples.isExact).toBe(false);
    expect(samples.tS).toHaveLength(points);
    const buckets = Array.from({ length: points }, () => [] as number[]);
    for (let j = 0; j < rows; j += 1) buckets[Math.floor((j * points) / rows)]?.push(j + 1);
    buckets.forEach((ks, i) => {
      const values = ks.map(value);
      expect(samples.min[0]?.[i]).toBe(Math.min(...values));
      expect(samples.max[0]?.[i]).toBe(Math.max(...values));
      const mean = values.reduce((sum, v) => sum + v, 0) / values.length;
      expect(samples.mean[0]?.[i]).toBeCloseTo(mean, 6);
      expect(samples.tS[i]).toBeCloseTo(ks.reduce((sum, k) => sum + k, 0) / ks.length / 100, 9);
      if (ks.every((k) => k < 300)) expect(samples.mean[1]?.[i]).toBeNull();
    });
    expect(Math.max(...(samples.max[0] as number[]))).toBe(1e6);
    expect(Math.min(...(samples.min[0] as number[]))).toBe(-1e6);
    await reader.close();
  });

  it('names a column that the run does not have', async () => {
    const { file, writer } = await written(3, (k) => k);
    await writer.end(end);
    const reader = await RunFileReader.open(file);
    await expect(reader.samples({ columns: ['oxigen'], points: 5 })).rejects.toMatchObject({
      code: 'request.invalid',
      details: [{ field: 'columns', message: expect.stringContaining('"oxigen"') }],
    });
    await reader.close();
  });

  it('gives events after a sequence number', async () => {
    const { file, writer } = await written(1, (k) => k);
    await writer.append(
      testBatch(2, 1, columnCount, (k) => k),
      [{ sequence: 2, tS: 0.5, at: event.at, body: { type: 'run.paused', reason: 'Look.' } }],
    );
    const reader = await RunFileReader.open(file);
    expect((await reader.events(1)).map((e) => e.body.type)).toEqual(['run.paused']);
    expect(await reader.events(0)).toHaveLength(2);
    await reader.close();
    await writer.end(end);
  });

  it('refuses a second writer for the same file and a file that is none', async () => {
    const { file, writer } = await written(1, (k) => k);
    await expect(RunFileWriter.create(file)).rejects.toThrow(/already exists/);
    await writer.end(end);
    await expect(RunFileReader.open(join(folder.path, 'none.sqlite'))).rejects.toMatchObject({
      code: 'run.no-samples',
    });
    expect(existsSync(join(folder.path, 'none.sqlite'))).toBe(false);
  });

  it('has its end marked after a crash, once, at the time of the last sample', async () => {
    const { file, writer } = await written(120, (k) => k);
    await writer.close();
    const marked = await closeInterrupted(file, 'The rig host was killed.');
    expect(marked).toMatchObject({ status: 'interrupted', verdict: 'inconclusive', scans: 120 });
    expect(await closeInterrupted(file, 'Again.')).toEqual(marked);
    const reader = await RunFileReader.open(file);
    expect((await reader.manifest()).end).toEqual(marked);
    const events = await reader.events();
    expect(events.at(-1)).toMatchObject({ sequence: 2, tS: 1.2, body: { type: 'run.ended' } });
    await reader.close();
  });

  it('is not sealed while somebody has it open, and says so', async () => {
    const { file, writer } = await written(10, (k) => k);
    await expect(sealFile(file)).rejects.toMatchObject({ code: 'run.not-running' });
    await writer.end(end);
    expect(await sealFile(file)).toMatch(/^[0-9a-f]{64}$/);
  });

  it('is sealed as one file whose hash is that of its bytes and does not change by reading', async () => {
    const { file, writer } = await written(200, (k) => k);
    await writer.end(end);
    const hash = await sealFile(file);
    const reader = await RunFileReader.open(file);
    await reader.samples({ columns: [], points: 10 });
    await reader.close();
    expect(existsSync(`${file}-wal`)).toBe(false);
    expect(hash).toBe(createHash('sha256').update(readFileSync(file)).digest('hex'));
    expect(await sealFile(file)).toBe(hash);
  });
});
