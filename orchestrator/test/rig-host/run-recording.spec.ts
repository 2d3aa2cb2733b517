import type { FromHost, RunOrder, ScanEngine, ScanInput, ScanOutput } from '@cresthold/shared';
import type { Recorder } from '../../src/rig-host/recorder.js';
import { RunRecording } from '../../src/rig-host/run-recording.js';
import { testEnvelope, testGraph, testRig } from './test-rig.js';

const order: RunOrder = {
  runId: 'run-1',
  file: 'run-1.sqlite',
  by: 'engineer',
  experiment: { id: 'e', title: 'E', version: 1, graph: testGraph(1) },
  objective: null,
  manifest: {},
};

/** Takes everything at once and keeps nothing. */
const recorder = {
  prepare: () => Promise.resolve(),
  begin: () => undefined,
  append: () => undefined,
  appendEvent: () => undefined,
  watch: () => undefined,
  end: () => Promise.resolve(),
} as unknown as Recorder;

async function begun() {
  const sent: FromHost[] = [];
  const recording = new RunRecording(recorder, testRig(1), [], {
    send: (message) => sent.push(message),
    onRunBegun: () => undefined,
    onRunOver: () => undefined,
    log: () => undefined,
  });
  await recording.start(order, { startRun: () => [] } as unknown as ScanEngine, testEnvelope());
  return { recording, sent };
}

describe('the record of a run that the engine can no longer end', () => {
  const trip = {
    cause: 'host-fault',
    message: 'A fault.',
    at: '2026-03-01T08:00:00.000Z',
    by: null,
    later: [],
  };

  it.each([
    ['interrupted', null, 'The host ended.'],
    ['tripped', trip, 'A fault. The host ended.'],
  ] as const)('ends %s, and says why', async (status, cause, reason) => {
    const { recording, sent } = await begun();
    recording.interrupt('The host ended.', cause);
    await recording.closed();
    expect(sent).toMatchObject([{ type: 'run-ended', runId: 'run-1', status, reason }]);
    expect(recording.isOpen).toBe(false);
  });

  it('is told as stopping from the trip on', async () => {
    const { recording, sent } = await begun();
    const body = { type: 'rig.tripped', cause: 'x', message: 'X.' } as const;
    const events = [{ runTS: 0, atMs: 0, body }];
    recording.onScan({ tS: 0 } as ScanInput, { events, row: null, runEnded: null } as unknown as ScanOutput);
    expect(sent).toContainEqual({ type: 'run-status', runId: 'run-1', status: 'stopping' });
  });
});

describe('what happened beside the engine', () => {
  const body = { type: 'connection.fault-cleared', connection: 'plc', by: 'engineer' } as const;
  const scan = (recording: RunRecording, runTS: number | null) =>
    recording.onScan(
      { tS: 0, atMs: 0 } as ScanInput,
      { events: [], row: null, runTS, runEnded: null } as unknown as ScanOutput,
    );

  it('is an event of the next scan that belongs to the run', async () => {
    const { recording, sent } = await begun();
    recording.note(body);
    scan(recording, null);
    expect(sent).toEqual([]);
    scan(recording, 0.5);
    scan(recording, 1);
    expect(sent).toMatchObject([{ type: 'run-event', event: { sequence: 1, tS: 0.5, body } }]);
  });

  it('is kept in no run where none is open', async () => {
    const { recording, sent } = await begun();
    recording.interrupt('Over.', null);
    await recording.closed();
    recording.note(body);
    await recording.start(order, { startRun: () => [] } as unknown as ScanEngine, testEnvelope());
    scan(recording, 0);
    expect(sent.filter(({ type }) => type === 'run-event')).toEqual([]);
  });
});
