import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { runColumns } from '@cresthold/shared';
import { rowLead, runFileSchemaVersion, type RunManifest } from '../../src/recordings/run-file/index.js';
import type { ScanBatch } from '../../src/recordings/run-file/scan-batch.js';
import { testEnvelope, testGraph, testRig } from './test-rig.js';

/** A folder that the test removes. */
export function temporaryFolder(): { path: string; remove: () => void } {
  const path = mkdtempSync(join(tmpdir(), 'cresthold-rig-host-'));
  return { path, remove: () => rmSync(path, { recursive: true, force: true }) };
}

export function testManifest(): RunManifest {
  const rig = testRig(1);
  return {
    schema_version: runFileSchemaVersion,
    run: { id: 'run-1', startedBy: 'engineer', startedAt: '2026-03-01T08:00:00.000Z' },
    experiment: { id: 'experiment-1', title: 'Hold', version: 3, graph: testGraph(1) },
    objective: null,
    rig,
    envelope: testEnvelope(),
    calibrations: [],
    columns: runColumns(rig, '', []),
    software: { cresthold: '0.0.0' },
    extra: { warnings: ['none'] },
  };
}

/** Rows k = first … first + count − 1 at 10 ms, values from `valueOf(k, column)`. */
export function testBatch(
  first: number,
  count: number,
  columnCount: number,
  valueOf: (k: number, column: number) => number,
): ScanBatch {
  const width = rowLead + columnCount;
  const data = new Float64Array(count * width);
  for (let row = 0; row < count; row += 1) {
    const k = first + row;
    data.set([k, k / 100, 1_772_352_000_000 + 10 * k, k % 2 === 0 ? 0 : -1], row * width);
    for (let column = 0; column < columnCount; column += 1) {
      data[row * width + rowLead + column] = valueOf(k, column);
    }
  }
  return { data, rows: count, labels: ['hold'] };
}
