import type { CalibrationContent } from '@cresthold/shared';
import { dueStateOf } from '../../src/calibrations/due-state.js';
import { CalibrationStore } from '../../src/calibrations/calibration-store.js';
import { EnvelopeStore } from '../../src/envelopes/envelope-store.js';
import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { envelopeInput, rigInput } from '../server/documents.js';

const content: CalibrationContent = {
  conversion: { kind: 'linear', gain: 2, offset: -1 },
  calibratedOn: '2026-11-02',
  dueOn: '2126-11-02',
  expandedUncertainty: 0.1,
  certificate: 'BTS-0042, station laboratory',
  note: '',
};

describe('calibrations', () => {
  let server: TestServer;
  let engineer: Client;
  let officer: Client;
  const path = '/api/v1/rigs/kiln-1/calibrations';
  const fieldsOf = (body: { errors: { field: string }[] }) => body.errors.map((error) => error.field);
  const enter = (change: Partial<CalibrationContent> = {}, channel = 'o2') =>
    engineer.post(path).send({ channel, content: { ...content, ...change } });
  const envelopeInForce = () => server.app.get(EnvelopeStore).inForce('kiln-1');

  async function approveEnvelope(): Promise<void> {
    const { body } = await engineer
      .post('/api/v1/rigs/kiln-1/envelopes')
      .send({ content: envelopeInput() })
      .expect(201);
    await engineer.post(`/api/v1/envelopes/${body.id}/submit`).expect(200);
    const reason = 'As commissioned.';
    await officer.post(`/api/v1/envelopes/${body.id}/approve`).send({ reason }).expect(200);
  }

  beforeEach(async () => {
    server = await createTestServer();
    engineer = await server.as('engineer', 'test-engineer');
    officer = await server.as('officer', 'safety-officer');
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
  });
  afterEach(() => server.close());

  it('are put in force by version, reach the rig host, and supersede each other', async () => {
    const first = await enter().expect(201);
    expect(first.headers['location']).toBe(`/api/v1/calibrations/${first.body.id}`);
    expect(first.body).toMatchObject({ version: 1, status: 'in-force', author: 'engineer', content });
    const second = await enter({ note: 'Again.' }).expect(201);
    expect(second.body.version).toBe(2);
    const { body } = await engineer.get(`${path}?channel=o2`).expect(200);
    const shown = body.items.map((item: { version: number; status: string }) => [item.version, item.status]);
    expect(shown).toEqual([
      [2, 'in-force'],
      [1, 'superseded'],
    ]);
    const inForce = await server.app.get(CalibrationStore).inForce('kiln-1');
    expect(inForce).toEqual([{ id: second.body.id, channel: 'o2', version: 2, ...content, note: 'Again.' }]);
    // Once for the rig itself, then for each calibration.
    expect(server.hosts.reconfigured).toEqual(['kiln-1', 'kiln-1', 'kiln-1']);
  });

  it('withdraw the envelope in force where they convert otherwise, and only there', async () => {
    await enter().expect(201);
    await approveEnvelope();
    await enter({ calibratedOn: '2026-11-30', note: 'Found as left.' }).expect(201);
    expect(await envelopeInForce()).not.toBeNull();
    await enter({ conversion: { kind: 'linear', gain: 2.1, offset: -1 } }).expect(201);
    expect(await envelopeInForce()).toBeNull();
  });

  it('are withdrawn with a reason, once', async () => {
    const { body } = await enter().expect(201);
    await approveEnvelope();
    await engineer.post(`/api/v1/calibrations/${body.id}/withdraw`).send({ reason: ' ' }).expect(400);
    const reason = 'The sensor was dropped.';
    const withdrawn = await officer
      .post(`/api/v1/calibrations/${body.id}/withdraw`)
      .send({ reason })
      .expect(200);
    expect(withdrawn.body).toMatchObject({ status: 'withdrawn' });
    expect(withdrawn.body.endedAt).not.toBeNull();
    expect(await envelopeInForce()).toBeNull();
    const again = await officer.post(`/api/v1/calibrations/${body.id}/withdraw`).send({ reason });
    expect(again.body.code).toBe('calibration.not-in-force');
  });

  it.each([
    ['channel', { channel: 'nothing', content }],
    ['channel', { channel: 'airTrim', content }],
    [
      'content.conversion.coldJunction.channel',
      {
        channel: 'o2',
        content: {
          ...content,
          conversion: { kind: 'thermocouple', type: 'K', coldJunction: { channel: 'loss' } },
        },
      },
    ],
    ['content.calibratedOn', { channel: 'o2', content: { ...content, calibratedOn: 'yesterday' } }],
    [
      'content.conversion.gain',
      { channel: 'o2', content: { ...content, conversion: { kind: 'linear', gain: 0, offset: 0 } } },
    ],
  ])('name the field at fault: %s', async (field, request) => {
    const { body } = await engineer.post(path).send(request).expect(400);
    expect(fieldsOf(body)).toEqual([field]);
  });

  it('wait for a rig at rest', async () => {
    server.hosts.setPhase('kiln-1', 'running');
    expect((await enter().expect(409)).body.code).toBe('rig.busy');
  });

  it('end with the wiring that they were made for', async () => {
    await enter({}, 'o2').expect(201);
    await enter({}, 'co').expect(201);
    const rig = rigInput();
    const channels = rig.channels.map((channel) =>
      channel.id === 'co' ? { ...channel, address: { name: 'coSpare' } } : channel,
    );
    await engineer
      .put('/api/v1/rigs/kiln-1')
      .set('If-Match', '"1"')
      .send({ ...rig, channels })
      .expect(200);
    const inForce = await server.app.get(CalibrationStore).inForce('kiln-1');
    expect(inForce.map(({ channel }) => channel)).toEqual(['o2']);
  });

  it('keep their certificate: taken once, given back byte for byte, never shown inside the console', async () => {
    const { body } = await enter().expect(201);
    const file = `/api/v1/calibrations/${body.id}/certificate`;
    expect((await engineer.get(file).expect(404)).body.code).toBe('calibration.no-certificate');
    const pdf = Buffer.from('%PDF-1.7\nfor a test');
    const put = (data: Buffer, type = 'application/pdf') =>
      engineer.put(file).set('Content-Type', type).send(data);
    expect(fieldsOf((await put(Buffer.from('<script>')).expect(400)).body)).toEqual(['body']);
    expect((await put(pdf, 'text/html').expect(400)).body.code).toBe('request.media-type');
    const kept = await put(pdf).expect(200);
    expect(kept.body.bytes).toBe(pdf.length);
    expect((await put(pdf).expect(409)).body.code).toBe('calibration.has-certificate');
    const read = await officer.get(file).expect(200);
    expect(read.body).toEqual(pdf);
    expect(read.headers['content-disposition']).toContain('attachment');
    const { body: shown } = await engineer.get(`/api/v1/calibrations/${body.id}`).expect(200);
    expect(shown.certificateFile).toEqual(kept.body);
  });

  it('say how near their end they are', () => {
    const nowMs = Date.parse('2026-12-01T12:00:00Z');
    expect(dueStateOf(null, nowMs)).toBe('current');
    expect(dueStateOf('2027-06-01', nowMs)).toBe('current');
    expect(dueStateOf('2026-12-20', nowMs)).toBe('due-soon');
    expect(dueStateOf('2026-12-01', nowMs)).toBe('overdue');
    expect(dueStateOf('2026-11-30', nowMs)).toBe('overdue');
  });
});
