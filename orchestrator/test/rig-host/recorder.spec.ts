import { writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { setTimeout as delay } from 'node:timers/promises';
import { pathToFileURL } from 'node:url';
import Database from 'better-sqlite3';
import { Recorder } from '../../src/rig-host/recorder.js';
import { temporaryFolder, testManifest } from './run-file-fixture.js';

const workerFile = pathToFileURL(resolve(__dirname, '../../dist/rig-host/recorder-worker.js'));
const manifest = testManifest();
const width = manifest.columns.length;
const end = { status: 'finished', verdict: 'pass', reason: 'Done.', results: {} } as const;

describe('recorder', () => {
  const folder = temporaryFolder();
  const failures: string[] = [];
  let recorder: Recorder;
  beforeEach(() => {
    failures.length = 0;
    recorder = new Recorder((message) => failures.push(message), workerFile);
  });
  afterEach(() => recorder.close());
  afterAll(folder.remove);

  const numbers = (file: string): number[] => {
    const plain = new Database(file, { readonly: true });
    const ks = plain.prepare('SELECT k FROM scan ORDER BY k').pluck().all() as number[];
    plain.close();
    return ks;
  };
  const upTo = (n: number) => Array.from({ length: n }, (_, i) => i + 1);

  it('writes every row of a fast loop in order, through reused buffers', async () => {
    const file = join(folder.path, 'fast.sqlite');
    await recorder.prepare(file);
    recorder.begin(manifest, 0.001);
    const row = new Float64Array(width);
    for (let k = 1; k <= 1000; k += 1) {
      row.fill(k);
      recorder.append(k, k / 1000, k, k < 500 ? 'a' : 'b', row);
      if (k % 50 === 0) await delay(2);
    }
    await recorder.end(end);
    expect(numbers(file)).toEqual(upTo(1000));
    const plain = new Database(file, { readonly: true });
    const wrong = plain.prepare('SELECT count(*) FROM scan WHERE oxygen <> k OR objective <> k').pluck();
    expect(wrong.get()).toBe(0);
    expect(plain.prepare('SELECT step, count(*) AS n FROM scan GROUP BY step').all()).toEqual([
      { step: 'a', n: 499 },
      { step: 'b', n: 501 },
    ]);
    plain.close();
    expect(failures).toEqual([]);
  });

  it('has a row on disk soon after it was appended, with no further row to push it', async () => {
    const file = join(folder.path, 'slow.sqlite');
    await recorder.prepare(file);
    recorder.begin(manifest, 0.01);
    recorder.append(1, 0, 0, '', new Float64Array(width));
    await delay(1000);
    expect(numbers(file)).toEqual([1]);
    await recorder.end(end);
  });

  it('tells of a file that cannot be made, in words, before anything has begun', async () => {
    const noFolder = join(folder.path, 'no-folder');
    writeFileSync(noFolder, '');
    await expect(recorder.prepare(join(noFolder, 'run.sqlite'))).rejects.toMatchObject({
      code: 'recorder.failed',
      message: expect.stringContaining('cannot be created'),
    });
  });

  it('removes the file of a run that never began', async () => {
    const file = join(folder.path, 'abandoned.sqlite');
    await recorder.prepare(file);
    recorder.abandon();
    await recorder.prepare(file);
    recorder.abandon();
  });

  it('keeps what it could not write, says so once, and writes it when it can again', async () => {
    const file = join(folder.path, 'locked.sqlite');
    await recorder.prepare(file);
    recorder.begin(manifest, 0.05);
    const row = new Float64Array(width);
    recorder.append(1, 0, 0, '', row);
    await delay(300);
    const other = new Database(file);
    other.exec('BEGIN IMMEDIATE');
    recorder.append(2, 0.05, 50, '', row);
    recorder.append(3, 0.1, 100, '', row);
    await delay(2600);
    expect(failures).toEqual([expect.stringContaining('locked')]);
    other.exec('ROLLBACK');
    other.close();
    recorder.append(4, 0.15, 150, '', row);
    await recorder.end(end);
    expect(numbers(file)).toEqual(upTo(4));
    expect(failures).toHaveLength(1);
  });
});
