import { runColumns } from '@cresthold/shared';
import { RunRecords } from '../../src/recordings/run-records.service.js';
import { RunFileWriter } from '../../src/recordings/run-file/index.js';
import { testBatch, testManifest } from '../rig-host/run-file-fixture.js';
import { traceRig } from '../rig-host/trace-rig.js';
import {
  approveEnvelope,
  createScriptedServer,
  makeExperiment,
  makeRig,
} from '../rig-hosts/scripted-server.js';
import type { Client, TestServer } from '../server/create-test-server.js';

let server: TestServer;
let engineer: Client;
let path: string;

const rig = traceRig('traces');
const manifest = { ...testManifest(), rig, columns: runColumns(rig, '', []) };
/** 25 scans of three points: scan number, 0.1, −2. */
const points = Float32Array.from(Array.from({ length: 25 }, (_, i) => [i + 1, 0.1, -2]).flat());
const heads = Float64Array.from(Array.from({ length: 25 }, (_, i) => [i + 1, 0, 3]).flat());

beforeAll(async () => {
  server = await createScriptedServer();
  await makeRig(server);
  await approveEnvelope(server);
  engineer = await server.as('engineer', 'test-engineer');
  const experimentId = await makeExperiment(server, 'stays');
  const { body: run } = await engineer.post('/api/v1/runs').send({ experimentId }).expect(202);
  path = `/api/v1/runs/${run.id}`;
  const writer = await RunFileWriter.create(server.app.get(RunRecords).file(run.id));
  await writer.begin(manifest);
  const batch = testBatch(1, 30, manifest.columns.length, () => 1);
  await writer.append(batch, [], { heads, points, count: 25 });
  await writer.close();
});

afterAll(() => server.close());

const get = (query: string, status = 200) => engineer.get(`${path}/${query}`).expect(status);
/** As the documentation says: little-endian Float32 in base64. */
const numbersOf = (base64: string) => {
  const bytes = Buffer.from(base64, 'base64');
  return Array.from({ length: bytes.length / 4 }, (_, i) => bytes.readFloatLE(4 * i));
};

describe('traces of a run', () => {
  it('are listed with their axes', async () => {
    const { body } = await get('trace-channels');
    expect(body).toEqual([
      {
        id: 'beam',
        title: 'Beam',
        unit: 'mV',
        display: { min: 0, max: 100, decimals: 2 },
        axis: { title: 'Place', unit: 'mm', from: -5, step: 0.5 },
      },
    ]);
  });

  it('come page by page, each once and in order, with the points of the file', async () => {
    const scans: number[] = [];
    let cursor = '';
    do {
      const { body } = await get(`traces?channel=beam&limit=10&cursor=${cursor}`);
      for (const item of body.items) {
        scans.push(item.scan);
        expect(item.tS).toBeCloseTo(item.scan / 100, 9);
        expect(numbersOf(item.points)).toEqual([item.scan, Math.fround(0.1), -2]);
      }
      cursor = body.nextCursor;
    } while (cursor !== null);
    expect(scans).toEqual(Array.from({ length: 25 }, (_, i) => i + 1));
  });

  it('are thinned and cut to a span', async () => {
    const { body } = await get('traces?channel=beam&fromS=0.05&toS=0.2&every=5&limit=2');
    expect(body.items.map(({ scan }: { scan: number }) => scan)).toEqual([6, 11]);
    const { body: rest } = await get(
      `traces?channel=beam&fromS=0.05&toS=0.2&every=5&limit=2&cursor=${body.nextCursor}`,
    );
    expect(rest).toMatchObject({ items: [{ scan: 16 }], nextCursor: null });
  });

  it('are given for one scan', async () => {
    const { body } = await get('traces/7');
    expect(body).toMatchObject({ scan: 7, tS: 0.07, traces: [{ channel: 'beam' }] });
    expect(numbersOf(body.traces[0].points)).toEqual([7, Math.fround(0.1), -2]);
    expect((await get('traces/28')).body.traces).toEqual([]);
  });

  it.each([
    ['traces', 400, 'channel'],
    ['traces?channel=ghost', 400, 'channel'],
    ['traces?channel=valve', 400, 'channel'],
    ['traces?channel=beam&every=0', 400, 'every'],
    ['traces?channel=beam&fromS=2&toS=1', 400, 'fromS'],
    ['traces?channel=beam&cursor=nonsense', 400, 'cursor'],
    ['traces/none', 400, 'scan'],
  ])('refuse %s and name the field', async (query, status, field) => {
    const { body } = await get(query, status);
    expect(body.errors[0].field).toBe(field);
  });

  it('are not there for a scan or a run that is not', async () => {
    expect((await get('traces/99', 404)).body.code).toBe('run.no-samples');
    const { body } = await engineer.get('/api/v1/runs/none/traces?channel=beam').expect(404);
    expect(body.code).toBe('run.not-found');
  });
});
