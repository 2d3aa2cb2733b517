import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { inMemoryAdapter, memoryStore } from '@cresthold/adapters';
import { createScanEngine, createSequencer, preflight, runColumns, type FromHost } from '@cresthold/shared';
import Database from 'better-sqlite3';
import { RunFileReader, RunFileWriter, runFileSchemaVersion } from '../../src/recordings/run-file/index.js';
import { Recorder } from '../../src/rig-host/recorder.js';
import { RunRecording } from '../../src/rig-host/run-recording.js';
import { TracePublisher } from '../../src/rig-host/trace-publisher.js';
import { Wire } from '../../src/rig-host/wire.js';
import { temporaryFolder, testBatch, testManifest } from './run-file-fixture.js';
import { testGraph } from './test-rig.js';
import { traceEnvelope, traceRig } from './trace-rig.js';

const workerFile = pathToFileURL(resolve(__dirname, '../../dist/rig-host/recorder-worker.js'));
const end = { status: 'finished', verdict: 'pass', reason: 'Done.', results: {} } as const;
const folder = temporaryFolder();
const recorders: Recorder[] = [];
afterAll(async () => {
  await Promise.all(recorders.map((recorder) => recorder.close()));
  folder.remove();
});

/** A recorder whose thread has loaded, however busy the machine is; closed after the tests. */
async function opened(onFailure: (message: string) => void): Promise<Recorder> {
  const recorder = new Recorder(onFailure, workerFile);
  recorders.push(recorder);
  await recorder.ready;
  return recorder;
}

const rig = traceRig('trace-recording');
const manifest = { ...testManifest(), rig, columns: runColumns(rig, '', []) };
const adapters = new Map([['in-memory', inMemoryAdapter]]);
const query = { channel: 'beam', every: 1, afterScan: 0, limit: 200 };

/** Numbers of single precision of every size, by a linear congruential generator (Park and Miller 1988). */
function noise(seed: number) {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return (state / 2_147_483_647 - 0.5) * 10 ** ((state % 60) - 30);
  };
}

interface TraceRow {
  k: number;
  channel: string;
  points: Buffer;
}
const rowsOf = (file: string): TraceRow[] => {
  const plain = new Database(file, { readonly: true });
  const rows = plain.prepare('SELECT * FROM trace ORDER BY k').all() as TraceRow[];
  plain.close();
  return rows;
};
/** Little-endian single precision, written by the standard library. */
const bytesOf = (points: ArrayLike<number>) => {
  const bytes = Buffer.alloc(4 * points.length);
  Array.from(points).forEach((point, i) => bytes.writeFloatLE(point, 4 * i));
  return bytes;
};

describe('the recorder', () => {
  it('keeps every trace bit for bit, of any length, through buffers that grow and are used again', async () => {
    const file = join(folder.path, 'bits.sqlite');
    const failures: string[] = [];
    const recorder = await opened((message) => failures.push(message));
    await recorder.prepare(file);
    recorder.begin(manifest, 0.001);
    const next = noise(7);
    const expected: [number, Buffer][] = [];
    const row = new Float64Array(manifest.columns.length);
    for (let k = 1; k <= 700; k += 1) {
      if (k % 7 !== 0) {
        const points = Float32Array.from({ length: 1 + ((k * 37) % 600) }, next);
        recorder.appendTrace(k, 0, points);
        expected.push([k, bytesOf(points)]);
      }
      recorder.append(k, k / 1000, k, '', row);
    }
    await recorder.end(end);
    expect(failures).toEqual([]);
    const rows = rowsOf(file);
    expect(rows.map(({ k, channel }) => [k, channel])).toEqual(expected.map(([k]) => [k, 'beam']));
    rows.forEach(({ points }, i) => expect(points.equals(expected[i]?.[1] as Buffer)).toBe(true));
  });
});

describe('a run of a rig with a trace', () => {
  it('has in its file what the device sent, in the scan in which it came', async () => {
    const file = join(folder.path, 'run.sqlite');
    const store = memoryStore('trace-recording');
    store.set('valve', 0);
    const sent: FromHost[] = [];
    const setting = {
      rig,
      envelope: traceEnvelope(),
      trip: null,
      isLockedOut: false,
      grids: new Map(),
    };
    const engine = createScanEngine(setting, { createSequencer, preflight });
    const fail = (error: unknown) => {
      throw error instanceof Error ? error : new Error(String(error));
    };
    const wire = new Wire(
      rig,
      adapters,
      engine.readings,
      () => undefined,
      () => undefined,
      fail,
    );
    const recorder = await opened(fail);
    const recording = new RunRecording(recorder, rig, [], {
      send: (message) => sent.push(message),
      onRunBegun: () => undefined,
      onRunOver: () => undefined,
      log: (_level, text) => fail(text),
    });
    const link = { sendDroppable: (message: FromHost) => sent.push(message) > 0 };
    const publisher = new TracePublisher(rig, engine.readings, link);
    await wire.open(2000);
    const input = { tS: 0, dtS: 0.02, atMs: 0, latenessS: 0, serverSilentS: 0 };
    const scan = async () => {
      input.tS += 0.02;
      await wire.read();
      const output = engine.scan({ ...input, lostConnections: wire.takeLost() });
      const written = wire.write(output.writes);
      recording.onScan({ ...input, lostConnections: [] }, output);
      publisher.onScan({ ...input, lostConnections: [] }, output);
      await written;
      return output;
    };

    const next = noise(11);
    const fresh = (length = 512) => Float64Array.from({ length }, next);
    store.setTrace('beam', fresh());
    await scan();
    engine.arm('engineer');
    const experiment = { id: 'e', title: 'E', version: 1, graph: testGraphOfValve() };
    const order = { runId: 'run-1', file, by: 'engineer', experiment, objective: null, manifest: {} };
    await recording.start(order, engine, setting.envelope);
    publisher.useRun('run-1');

    const expected = new Map<number, Buffer>();
    for (let k = 1; k <= 60; k += 1) {
      const points = k % 10 === 3 ? fresh(500) : fresh();
      if (k % 10 === 6) points[77] = NaN;
      store.setTrace('beam', points);
      if (k % 10 !== 3 && k % 10 !== 6) expected.set(k, bytesOf(points));
      const { row } = await scan();
      expect(Number.isNaN(row?.[1])).toBe(!expected.has(k));
    }
    recording.interrupt('Enough.', null);
    await recording.closed();
    await wire.close();

    const rows = rowsOf(file);
    expect(rows.map(({ k }) => k)).toEqual([...expected.keys()]);
    rows.forEach(({ k, points }) => expect(points.equals(expected.get(k) as Buffer)).toBe(true));

    const live = sent.flatMap((message) => (message.type === 'trace' ? [message.trace] : []));
    // 61 scans of 20 ms are 1.22 s: five a second.
    expect(live.length).toBeGreaterThanOrEqual(4);
    expect(live.length).toBeLessThanOrEqual(7);
    for (const { points, runId, tS, count, channel } of live.slice(1)) {
      const k = Math.round((tS ?? 0) / 0.02) + 1;
      expect({ runId, count, channel }).toEqual({ runId: 'run-1', count: 512, channel: 'beam' });
      expect(bytesOf(points).equals(expected.get(k) as Buffer)).toBe(true);
    }
  });
});

/** Holds; the valve stays where it is. */
function testGraphOfValve() {
  const { steps, edges } = testGraph(100);
  const [first] = edges;
  return {
    steps: steps.filter(({ kind }) => kind !== 'move'),
    edges: [{ ...(first as (typeof edges)[number]), to: 'hold' }, ...edges.slice(2)],
  };
}

describe('a run file with traces', () => {
  const file = join(folder.path, 'pages.sqlite');
  const width = manifest.columns.length;
  beforeAll(async () => {
    const writer = await RunFileWriter.create(file);
    await writer.begin(manifest);
    const heads = Float64Array.from(Array.from({ length: 30 }, (_, i) => [i + 1, 0, 2]).flat());
    const points = Float32Array.from(Array.from({ length: 30 }, (_, i) => [i + 1, -1]).flat());
    const traces = { heads, points, count: 30 };
    await writer.append(
      testBatch(1, 40, width, () => 1),
      [],
      traces,
    );
    await writer.end(end);
  });
  const traces = async (change: object) => {
    const reader = await RunFileReader.open(file);
    const found = await reader.traces({ ...query, ...change }).finally(() => reader.close());
    return found.map(({ scan }) => scan);
  };

  it.each([
    [{ limit: 3 }, [1, 2, 3]],
    [{ limit: 3, afterScan: 3 }, [4, 5, 6]],
    [{ every: 12 }, [1, 13, 25]],
    [{ every: 12, afterScan: 1, limit: 1 }, [13]],
    [{ fromS: 0.05, toS: 0.07 }, [5, 6, 7]],
    [{ fromS: 0.29 }, [29, 30]],
    [{ fromS: 0.35 }, []],
    [{ fromS: 9 }, []],
  ])('gives those that are asked for: %j', async (change, scans) => {
    expect(await traces(change)).toEqual(scans);
  });

  it('gives the traces of one scan with its time, none where none was good', async () => {
    const reader = await RunFileReader.open(file);
    const of = await reader.scanTraces(7);
    expect(of).toMatchObject({ scan: 7, tS: 0.07, atMs: 1_772_352_000_070 });
    expect(of.traces.map(({ channel, points }) => [channel, points])).toEqual([['beam', bytesOf([7, -1])]]);
    expect((await reader.scanTraces(35)).traces).toEqual([]);
    await expect(reader.scanTraces(99)).rejects.toMatchObject({ code: 'run.no-samples' });
    expect((await reader.traceChannels()).map(({ id, axis }) => [id, axis.unit])).toEqual([['beam', 'mm']]);
    await reader.close();
  });

  it('names a channel that is no trace of the run', async () => {
    const reader = await RunFileReader.open(file);
    await expect(reader.traces({ ...query, channel: 'valve' })).rejects.toMatchObject({
      code: 'request.invalid',
      details: [{ field: 'channel', message: expect.stringContaining('choose from beam') }],
    });
    await reader.close();
  });

  it('of version 1, from before there were traces, still opens', async () => {
    const old = join(folder.path, 'old.sqlite');
    const writer = await RunFileWriter.create(old);
    await writer.begin({ ...testManifest(), schema_version: 1 });
    await writer.append(
      testBatch(1, 5, testManifest().columns.length, () => 2),
      [],
    );
    await writer.end(end);
    // What a file of version 1 has not: the table, and what the manifest says since.
    const plain = new Database(old);
    plain.exec("DROP TABLE trace; DELETE FROM manifest WHERE name = 'calibrations'");
    plain.close();
    const reader = await RunFileReader.open(old);
    expect(await reader.manifest()).toMatchObject({ schema_version: 1 });
    expect(runFileSchemaVersion).toBe(2);
    expect((await reader.samples({ columns: ['oxygen'], points: 10 })).mean).toEqual([[2, 2, 2, 2, 2]]);
    expect(await reader.traceChannels()).toEqual([]);
    expect((await reader.scanTraces(3)).traces).toEqual([]);
    await expect(reader.traces(query)).rejects.toMatchObject({ code: 'request.invalid' });
    await reader.close();
  });
});

describe('the wire of a trace channel', () => {
  const open = async (beam: object) => {
    const wired = traceRig('trace-wire', { beam });
    const engine = createScanEngine(
      { rig: wired, envelope: null, trip: null, isLockedOut: false, grids: new Map() },
      { createSequencer, preflight },
    );
    const ignore = () => undefined;
    const wire = new Wire(wired, adapters, engine.readings, ignore, ignore, ignore);
    await wire.open(500);
    const status = wire.connectionStatus()[0];
    return { wire, status, readings: engine.readings };
  };

  it('is not opened on an address that gives one value only', async () => {
    const { wire, status } = await open({ address: { name: 'beam' } });
    expect(status).toMatchObject({ isConnected: false, error: expect.stringContaining('give it points') });
    await wire.close();
  });

  it('says why a trace does not come through', async () => {
    memoryStore('trace-wire').set('valve', 1);
    memoryStore('trace-wire').setTrace(
      'beam',
      Float64Array.from({ length: 512 }, () => Infinity),
    );
    const { wire, status } = await open({});
    expect(status).toMatchObject({ isConnected: true });
    await wire.read();
    expect(wire.channelFaults()).toMatchObject([{ channel: 'beam', code: 'adapter.corrupt' }]);
    await wire.close();
  });
});
