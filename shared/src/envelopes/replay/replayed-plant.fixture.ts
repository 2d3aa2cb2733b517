import type { RunColumn } from '../../runs/run-columns.js';
import type { RunEventBody } from '../../runs/run-event.schema.js';
import { FakePlant, plantOrder, plantRig } from '../../scan/fake-plant.fixture.js';
import type { EnvelopeContent } from '../envelope.schema.js';
import { EnvelopeReplay } from './envelope-replay.js';
import type { ReplayReport } from './replay-report.schema.js';

/** Scans in which every actuator comes to rest. */
const restScans = 150;

/** A run as its file keeps it. */
export interface TestRecord {
  columns: readonly RunColumn[];
  rows: { tS: number; row: Float64Array }[];
  events: { tS: number; body: RunEventBody }[];
}

/** Arms the plant, runs it for so many scans, stops it where it still runs, and keeps the record to its end. */
export function recordRun(plant: FakePlant, scans: number, before: (scan: number) => void): TestRecord {
  plant.arm();
  const columns = plant.engine.startRun(plantOrder);
  const record: TestRecord = { columns, rows: [], events: [] };
  for (let scan = 0; scan < scans + restScans; scan += 1) {
    if (scan < scans) before(scan);
    if (scan === scans && plant.phase === 'running') plant.engine.stop('test engineer', 'Enough.');
    const output = plant.scan();
    if (output.runTS === null) break;
    for (const { runTS, body } of output.events) record.events.push({ tS: runTS, body });
    if (output.row) record.rows.push({ tS: output.runTS, row: output.row });
    if (output.runEnded) break;
  }
  return record;
}

/** Replays an envelope on a record as the server does: events up to a scan, then the scan. */
export function replayRecord(content: EnvelopeContent, record: TestRecord): ReplayReport {
  const replay = new EnvelopeReplay(content, { rig: plantRig, columns: record.columns });
  let next = 0;
  for (const { tS, row } of record.rows) {
    for (let event = record.events[next]; event && event.tS <= tS; event = record.events[++next]) {
      replay.event(event.body, event.tS);
    }
    replay.scan(tS, row);
  }
  const ended = record.events.find(({ body }) => body.type === 'run.ended')?.body;
  const tripped = record.events.find(({ body }) => body.type === 'rig.tripped');
  return replay.report({
    status: ended?.type === 'run.ended' ? ended.status : null,
    trip: tripped?.body.type === 'rig.tripped' ? { cause: tripped.body.cause, tS: tripped.tS } : null,
  });
}
