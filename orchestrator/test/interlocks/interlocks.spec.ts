import { resolve } from 'node:path';
import type { EnvelopeContent, ReplayReport, Rig, RigStatus } from '@cresthold/shared';
import { until } from '../harness/until.js';
import { ModbusDevice } from '../rig-host/modbus-device.js';
import { testEnvelope, testGraph, testRig } from '../rig-host/test-rig.js';
import { createScriptedServer } from '../rig-hosts/scripted-server.js';
import type { Client, TestServer } from '../server/create-test-server.js';

const stackRegister = 2;
const lock = { delayS: 0.2, action: 'trip', protects: 'equipment', message: 'The stack is too hot.' };
const content = {
  ...testEnvelope().content,
  // The device lives in the process of the test, which a busy machine holds up: that is no matter of this test.
  staleness: [{ channel: 'oxygen', afterS: 15 }],
  interlocks: [
    {
      ...{ ...lock, id: 'hot-stack', title: 'Hot stack', condition: 'stackTemperature > 300' },
      ...{ bypassAtMostS: 60, proofTestEveryDays: 30, proofTestGraceDays: 0 },
    },
    {
      ...{ ...lock, id: 'warm-stack', title: 'Warm stack', condition: 'stackTemperature > 250' },
      ...{ delayS: 0, action: 'warn', isLatching: true },
    },
  ],
};

function patientRig(port: number): Rig {
  const rig = testRig(port);
  const connections = rig.connections.map((connection) => ({
    ...connection,
    configuration: { ...connection.configuration, timeoutMs: 10_000 },
  }));
  return { ...rig, connections };
}

/** A whole server with a real rig host on a real Modbus device; the tests follow one after the other. */
describe('the interlocks of a rig', () => {
  let device: ModbusDevice;
  let server: TestServer;
  let [engineer, officer, technician]: Client[] = [];
  const rig = '/api/v1/rigs/rig-1';
  const as = (client: Client | undefined): Client => client ?? server.anyone;
  const status = async (): Promise<RigStatus> => (await as(engineer).get(`${rig}/status`).expect(200)).body;
  const interlock = async (id: string) => (await status()).interlocks.find((one) => one.id === id);
  const untilTaken = (what: string, send: () => PromiseLike<{ status: number }>) =>
    until(what, async () => (await send()).status === 200);
  const resetTrip = () =>
    untilTaken('the trip is reset', () => as(officer).post(`${rig}/reset`).send({ reason: 'Test.' }));
  const arm = () => untilTaken('the rig is armed', () => as(engineer).post(`${rig}/arm`));
  const actions = async (subject: string): Promise<string[]> => {
    const { body } = await as(officer).get(`/api/v1/audit?subject=${subject}`).expect(200);
    return body.items.map(({ action }: { action: string }) => action);
  };

  beforeAll(async () => {
    device = await ModbusDevice.start();
    server = await createScriptedServer(undefined, {
      program: resolve(__dirname, '../../dist/rig-host/main.js'),
    });
    engineer = await server.as('engineer', 'test-engineer');
    officer = await server.as('officer', 'safety-officer');
    technician = await server.as('technician', 'technician');
    await engineer.post('/api/v1/rigs').send(patientRig(device.port)).expect(201);
    await until('the rig is idle', async () => (await status()).phase === 'idle');
    const draft = await engineer.post(`${rig}/envelopes`).send({ content }).expect(201);
    await engineer.post(`/api/v1/envelopes/${draft.body.id}/submit`).expect(200);
    await officer.post(`/api/v1/envelopes/${draft.body.id}/approve`).send({ reason: 'Test.' }).expect(200);
  }, 60_000);
  afterAll(async () => {
    await server.close();
    await device.cut();
  });

  it('forbid arming and runs while a proof test is overdue, and name it', async () => {
    const { body: dues } = await as(engineer).get(`${rig}/proof-tests/due`).expect(200);
    expect(dues).toMatchObject([{ interlock: 'hot-stack', state: 'overdue', lastTest: null }]);
    const refused = await as(engineer).post(`${rig}/arm`).expect(409);
    expect(refused.body).toMatchObject({
      code: 'proof-test.overdue',
      errors: [{ field: 'interlocks.hot-stack' }],
    });
  });

  it('are proven on a rig that is armed for that only: measured by the host, seen by the device', async () => {
    const start = { interlock: 'hot-stack', method: 'forced' };
    await as(engineer).post(`${rig}/proof-tests`).send(start).expect(409);
    await untilTaken('armed for the test', () => as(technician).post(`${rig}/proof-tests/arm`));
    const run = await as(engineer)
      .post('/api/v1/runs')
      .send({ experimentId: await makeExperiment() });
    expect([run.status, run.body.code]).toEqual([409, 'proof-test.overdue']);
    await as(technician).post(`${rig}/moves`).send({ channel: 'airTrim', value: 4, hold: null }).expect(200);
    await until('the trim has moved', () => Promise.resolve(device.airTrim > 3.9));
    const { body: begun } = await as(technician).post(`${rig}/proof-tests`).send(start).expect(201);
    expect(begun).toMatchObject({ status: 'open', responseMs: null, limitMs: 240, envelopeVersion: 1 });
    const path = `${rig}/proof-tests/${begun.id}`;
    const measured = await until('the response is measured', async () => {
      const { body } = await as(technician).get(path).expect(200);
      return body.responseMs === null ? null : body;
    });
    // Never sooner than the delay of the interlock: 200 ms, but for the rounding of sums of periods.
    expect(measured.responseMs).toBeGreaterThanOrEqual(199);
    expect(measured.writes).toBe(2);
    await until('the device was brought to rest', () => Promise.resolve(device.airTrim === 0));
    expect((await status()).trip?.cause).toBe('interlock:hot-stack');
    const sign = (outcome: string, note: string) =>
      as(technician).post(`${path}/sign`).send({ outcome, note });
    expect((await sign('fail', '').expect(400)).body.errors[0].field).toBe('note');
    const { body: signed } = await sign('pass', 'Busy machine of the tests.').expect(200);
    expect(signed).toMatchObject({ status: 'signed', outcome: 'pass', signedBy: 'technician' });
    expect((await sign('fail', 'Changed my mind.').expect(409)).body.code).toBe('proof-test.not-open');
    expect(await actions(begun.id)).toEqual(['proof-test.signed', 'proof-test.started']);
    const { body: dues } = await as(engineer).get(`${rig}/proof-tests/due`).expect(200);
    expect(dues).toMatchObject([{ state: 'in-date', lastTest: { id: begun.id } }]);
  }, 60_000);

  it('take no response of another kind for a proof test, and no pass without one', async () => {
    await resetTrip();
    await arm();
    const order = { interlock: 'warm-stack', method: 'made-real' };
    const { body: real } = await as(technician).post(`${rig}/proof-tests`).send(order).expect(201);
    const path = `${rig}/proof-tests/${real.id}/sign`;
    const early = await as(technician).post(path).send({ outcome: 'pass', note: 'x' }).expect(409);
    expect(early.body.code).toBe('proof-test.no-response');
    const { body: other } = await as(technician)
      .post(`${rig}/proof-tests`)
      .send({ ...order, method: 'forced' })
      .expect(201);
    expect((await as(technician).get(`${rig}/proof-tests/${real.id}`)).body.status).toBe('abandoned');
    await until('it acted', async () => {
      const { body } = await as(technician).get(`${rig}/proof-tests/${other.id}`);
      return body.responseMs !== null;
    });
    await until('the force ran out', async () => (await interlock('warm-stack'))?.isForced === false);
    await as(technician).post(`${rig}/interlocks/warm-stack/acknowledge`).expect(200);
    expect((await interlock('warm-stack'))?.state).toBe('clear');
  }, 60_000);

  it('are bypassed by a safety officer, and who, why and until when stands in the status and the audit', async () => {
    const bypass = { forS: 50, reason: 'The sensor is changed.' };
    const path = `${rig}/interlocks/hot-stack/bypass`;
    await as(technician).post(path).send(bypass).expect(403);
    const tooLong = await as(officer)
      .post(path)
      .send({ ...bypass, forS: 61 })
      .expect(400);
    expect(tooLong.body.errors[0].field).toBe('forS');
    const never = await as(officer).post(`${rig}/interlocks/warm-stack/bypass`).send(bypass).expect(409);
    expect(never.body.code).toBe('interlock.no-bypass');
    const { body } = await as(officer).post(path).send(bypass).expect(200);
    const shown = (body as RigStatus).interlocks[0];
    expect(shown).toMatchObject({ isBypassed: true, bypass: { by: 'officer', reason: bypass.reason } });
    const leftMs = Date.parse(shown?.bypass?.untilAt ?? '') - Date.now();
    expect(leftMs).toBeGreaterThan(0);
    expect(leftMs).toBeLessThanOrEqual(50_000);
    device.setFloat(stackRegister, 320);
    await until('it is hot', async () => (await interlock('hot-stack'))?.state === 'pending');
    expect((await status()).phase).toBe('armed');
    await as(technician).delete(path).expect(200);
    await until('it trips', async () => (await status()).trip?.cause === 'interlock:hot-stack');
    expect(await actions('hot-stack')).toEqual(['interlock.bypass-ended', 'interlock.bypassed']);
  }, 60_000);

  it('that latched wait for somebody to acknowledge them', async () => {
    const path = `${rig}/interlocks/warm-stack/acknowledge`;
    expect((await as(technician).post(path).expect(409)).body.code).toBe('interlock.not-latched');
    device.setFloat(stackRegister, 100);
    await until('it waits', async () => (await interlock('warm-stack'))?.state === 'latched');
    await as(technician).post(path).expect(200);
    expect((await interlock('warm-stack'))?.state).toBe('clear');
    expect(await actions('warm-stack')).toContain('interlock.acknowledged');
  }, 60_000);

  it('of a draft are replayed on a recorded run', async () => {
    await resetTrip();
    await arm();
    const { status: answer, body: run } = await as(engineer)
      .post('/api/v1/runs')
      .send({ experimentId: await makeExperiment() });
    // With why it was refused, and what tripped the rig if that was it.
    expect([answer, run.code, (await status()).trip]).toEqual([202, undefined, null]);
    const ended = await until('the run has ended', async () => {
      const { body } = await as(engineer).get(`/api/v1/runs/${run.id}`);
      return body.endedAt === null ? null : body;
    });
    expect(`${ended.status}: ${ended.reason}`).toMatch(/^finished/);
    const replay = async (
      draft: object,
      more: object = {},
    ): Promise<{ report: ReplayReport; note: string }> =>
      (
        await as(officer)
          .post(`${rig}/envelopes/replay`)
          .send({ content: draft, ...more })
          .expect(200)
      ).body.runs[0];
    const same = await replay(content);
    expect(same).toMatchObject({ note: null, report: { scans: ended.scans, firstHalt: null, hints: [] } });
    expect(same.report.interlocks[0]).toMatchObject({ acts: 0, leastMargin: { value: 200 } });
    const eager = { ...content.interlocks[0], condition: 'stackTemperature > 99', delayS: 0 };
    const strict = await replay({ ...content, interlocks: [eager] }, { runIds: [run.id] });
    expect(strict.report).toMatchObject({
      firstHalt: { cause: 'interlock:hot-stack', action: 'trip', tS: 0 },
      hints: [{ kind: 'nuisance' }],
    });
    const narrow = (content as EnvelopeContent).limits.map((limit) => ({ ...limit, max: 3 }));
    const { report } = await replay({ ...content, limits: narrow });
    const trim = report.actuators.find(({ channel }) => channel === 'airTrim');
    expect(trim?.range.clips).toBeGreaterThan(0);
    expect(trim?.range.leastMargin?.value).toBeCloseTo(-1, 6);
    const unknown = { content, runIds: ['nowhere'] };
    expect((await as(officer).post(`${rig}/envelopes/replay`).send(unknown).expect(404)).body.code).toBe(
      'run.not-found',
    );
  }, 60_000);

  async function makeExperiment(): Promise<string> {
    const content = { title: 'Hold', objectiveId: null, graph: testGraph(0.3) };
    const { body } = await as(engineer)
      .post('/api/v1/experiments')
      .send({ rigId: 'rig-1', content })
      .expect(201);
    return body.id;
  }
});
