import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { pipeline } from 'node:stream/promises';
import { DomainError, type RunEvent } from '@cresthold/shared';
import { RunFileReader } from './run-file-reader.js';
import { foldLog, inTransaction, openRunFileSource } from './run-file-source.js';
import type { RunEnd } from './run-file.types.js';

/**
 * Marks the end of a run whose host died: an end record with status `interrupted` and a last event at
 * the time of the last sample. A file that has an end already is left as it is.
 *
 * @returns the end record of the file
 * @throws run.no-samples where the file is missing or was never begun
 */
export async function closeInterrupted(file: string, reason: string): Promise<RunEnd> {
  const reader = await RunFileReader.open(file);
  const last = await reader.lastScan();
  const scans = await reader.scanCount();
  const { end } = await reader.manifest();
  const sequence = ((await reader.events()).at(-1)?.sequence ?? 0) + 1;
  await reader.close();
  if (end !== null) return end;
  const status = 'interrupted';
  const verdict = 'inconclusive';
  await appendEnd(
    file,
    { status, verdict, reason, results: {}, scans },
    {
      sequence,
      tS: last?.tS ?? 0,
      at: new Date(last?.atMs ?? Date.now()).toISOString(),
      body: { type: 'run.ended', status, verdict, reason },
    },
  );
  return { status, verdict, reason, results: {}, scans };
}

async function appendEnd(file: string, end: RunEnd, event: RunEvent): Promise<void> {
  const source = await openRunFileSource(file, 'write');
  try {
    await inTransaction(source, async () => {
      await source.query('INSERT INTO manifest (name, value) VALUES (?, ?)', ['end', JSON.stringify(end)]);
      await source.query('INSERT INTO event (sequence, t_s, at, type, body) VALUES (?, ?, ?, ?, ?)', [
        event.sequence,
        event.tS,
        event.at,
        event.body.type,
        JSON.stringify(event.body),
      ]);
    });
    await foldLog(source);
  } finally {
    await source.destroy();
  }
}

/**
 * Makes the file stand alone, and hashes it.
 *
 * @returns SHA-256 of the file's bytes, hexadecimal
 * @throws run.no-samples where there is no such file
 * @throws run.not-running where somebody has it open
 */
export async function sealFile(file: string): Promise<string> {
  const reader = await RunFileReader.open(file);
  await reader.close();
  const source = await openRunFileSource(file, 'read');
  try {
    if (!(await foldLog(source))) {
      throw new DomainError('run.not-running', 'The run file is still being written or read: try again.');
    }
  } finally {
    await source.destroy();
  }
  const hash = createHash('sha256');
  await pipeline(createReadStream(file), hash);
  return hash.digest('hex');
}
