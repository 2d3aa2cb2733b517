import { resolve } from 'node:path';
import type { ChannelProbe, Rig } from '@cresthold/shared';
import { ModbusDevice } from '../rig-host/modbus-device.js';
import { testEnvelope, testRig } from '../rig-host/test-rig.js';
import type { Client, TestServer } from '../server/create-test-server.js';
import { until } from '../harness/until.js';
import { createScriptedServer } from './scripted-server.js';

/** A whole server with a real rig host on a real Modbus device. */
describe('the live test of a channel', () => {
  let device: ModbusDevice;
  let server: TestServer;
  let engineer: Client;
  let rig: Rig;
  const path = (channel: string) => `/api/v1/rigs/rig-1/channels/${channel}/probe`;
  const probe = async (channel: string): Promise<ChannelProbe> =>
    (await engineer.post(path(channel)).expect(200)).body;

  beforeAll(async () => {
    device = await ModbusDevice.start();
    server = await createScriptedServer(undefined, {
      program: resolve(__dirname, '../../dist/rig-host/main.js'),
    });
    engineer = await server.as('engineer', 'test-engineer');
    rig = testRig(device.port);
    const axis = { title: 'Place', unit: 'mm', from: 0, step: 1 };
    const address = { table: 'holding-register', address: 10, type: 'u16', points: 20 };
    const display = { min: 0, max: 100, decimals: 0 };
    const beam = { kind: 'trace', id: 'beam', title: 'Beam', display, connection: 'main', address, axis };
    device.words.set(
      Array.from({ length: 20 }, (_, i) => 3 * i),
      10,
    );
    await engineer
      .post('/api/v1/rigs')
      .send({ ...rig, channels: [...rig.channels, beam] })
      .expect(201);
    await until('the rig scans', async () => {
      const { status, body } = await engineer.post(path('oxygen'));
      return status === 200 && body.quality === 'good';
    });
  }, 60_000);
  afterAll(async () => {
    await server.close();
    await device.cut();
  });

  it('shows the words of the wire, the value, and that it came just now', async () => {
    // 4.0 in single precision is 0x40800000 (IEEE 754).
    expect(await probe('oxygen')).toMatchObject({
      channel: 'oxygen',
      source: 'wire',
      note: null,
      raw: 'holding-register 0 to 1: 0x4080 0x0000',
      value: 4,
      calibrated: null,
      calibration: null,
      trace: null,
      ageS: 0,
      quality: 'good',
      fault: null,
    });
  });

  it('shows how many points a trace has and the first of them', async () => {
    const { trace, value, quality } = await probe('beam');
    expect({ value, quality, count: trace?.count }).toEqual({ value: null, quality: 'good', count: 20 });
    expect(trace?.points).toEqual(Array.from({ length: 16 }, (_, i) => 3 * i));
  });

  it('shows what the device refuses, in its words', async () => {
    device.failing.add(4);
    expect(await probe('airTrim')).toMatchObject({
      source: 'wire',
      value: null,
      ageS: null,
      quality: 'bad',
      fault: { code: 'adapter.refused' },
    });
    device.failing.delete(4);
  });

  it('shows a derived channel by its last scan', async () => {
    const found = await until('the scan is good', async () => {
      const now = await probe('excess');
      return now.quality === 'good' ? now : null;
    });
    expect(found).toMatchObject({ source: 'scan', raw: null, value: 2 });
    expect(found.note).toContain('derived');
  });

  it('shows what the calibration in force makes of it', async () => {
    const content = {
      conversion: { kind: 'linear', gain: 10, offset: 1 },
      ...{ calibratedOn: '2026-11-02', dueOn: null, expandedUncertainty: null, certificate: 'A', note: '' },
    };
    const { body } = await engineer
      .post('/api/v1/rigs/rig-1/calibrations')
      .send({ channel: 'oxygen', content })
      .expect(201);
    const found = await until('the host has it', async () => {
      const now = await probe('oxygen');
      return now.calibration && now.value !== null ? now : null;
    });
    expect(found).toMatchObject({ value: 4, calibrated: 41, calibration: { id: body.id, version: 1 } });
  });

  it('never asks the device beside the scan of a rig that is armed', async () => {
    const officer = await server.as('officer', 'safety-officer');
    const draft = await engineer
      .post('/api/v1/rigs/rig-1/envelopes')
      .send({ content: testEnvelope().content })
      .expect(201);
    await engineer.post(`/api/v1/envelopes/${draft.body.id}/submit`).expect(200);
    await officer.post(`/api/v1/envelopes/${draft.body.id}/approve`).send({ reason: 'Test.' }).expect(200);
    await until('the rig is armed', async () => {
      const answer = await engineer.post('/api/v1/rigs/rig-1/arm');
      return answer.status === 200;
    });
    const found = await probe('oxygen');
    expect(found).toMatchObject({ source: 'scan', raw: null, value: 4, calibrated: 41 });
    expect(found.note).toContain('not at rest');
    expect(found.ageS).toBeLessThan(10);
    await engineer.post('/api/v1/rigs/rig-1/disarm').expect(200);
  });

  it('names a channel that is not there, and is for those who work at rigs', async () => {
    const { body } = await engineer.post(path('ghost')).expect(400);
    expect(body.code).toBe('channel.not-found');
    const reader = await server.as('reader', 'reader');
    await reader.post(path('oxygen')).expect(403);
  });

  it('tells that the connection is down, with its last value and how old that is', async () => {
    await device.cut();
    const found = await until('the loss is seen', async () => {
      const now = await probe('oxygen');
      return now.source === 'scan' && now.fault ? now : null;
    });
    expect(found).toMatchObject({ value: 4, fault: { code: 'adapter.disconnected' } });
    expect(found.ageS).toBeGreaterThan(0);
    expect(found.quality).not.toBe('good');
  });
});
