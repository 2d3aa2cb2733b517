import type { PreflightFault } from '@cresthold/shared';
import { DataSource } from 'typeorm';
import { createTestServer, type Client, type TestServer } from '../server/create-test-server.js';
import { envelopeInput, experimentInput, objectiveInput, rigInput } from '../server/documents.js';

describe('experiments', () => {
  let server: TestServer;
  let engineer: Client;
  const experiments = '/api/v1/experiments';
  const create = (content: object = experimentInput()) =>
    engineer.post(experiments).send({ rigId: 'kiln-1', content });
  const addVersion = (id: string, basedOn: number, title: string) =>
    engineer
      .post(`${experiments}/${id}/versions`)
      .send({ basedOn, note: `on ${basedOn}`, content: experimentInput({ title }) });

  beforeEach(async () => {
    server = await createTestServer();
    engineer = await server.as('engineer', 'test-engineer');
    await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
  });
  afterEach(() => server.close());

  it('begin with version 1 and grow by versions that rest on the latest', async () => {
    const made = await create().expect(201);
    const { id } = made.body;
    expect(made.headers.location).toBe(`${experiments}/${id}`);
    expect(made.body).toMatchObject({ rigId: 'kiln-1', title: 'Hold for a while', latestVersion: 1 });
    const second = await addVersion(id, 1, 'Hold longer').expect(201);
    expect(second.headers.location).toBe(`${experiments}/${id}/versions/2`);
    expect(second.body).toMatchObject({ version: 2, basedOn: 1, note: 'on 1', createdBy: 'engineer' });
    expect((await engineer.get(`${experiments}/${id}`)).body).toMatchObject({
      title: 'Hold longer',
      latestVersion: 2,
    });
    const versions = await engineer.get(`${experiments}/${id}/versions`).expect(200);
    expect(versions.body.items.map((v: { version: number }) => v.version)).toEqual([2, 1]);
    const first = await engineer.get(`${experiments}/${id}/versions/1`).expect(200);
    expect(first.body).toMatchObject({ version: 1, basedOn: null, content: { title: 'Hold for a while' } });
  });

  it('refuse a version that rests on an older one, and keep what is there', async () => {
    const { id } = (await create()).body;
    await addVersion(id, 1, 'Hers').expect(201);
    const late = await addVersion(id, 1, 'His').expect(409);
    expect([late.body.code, late.body.errors[0].field]).toEqual(['request.precondition', 'basedOn']);
    await addVersion(id, 3, 'From the future').expect(409);
    expect((await engineer.get(`${experiments}/${id}/versions/2`)).body.content.title).toBe('Hers');
    expect((await engineer.get(`${experiments}/${id}/versions/3`).expect(404)).body.code).toBe(
      'experiment.not-found',
    );
  });

  it('of an earlier release open in the form of today, and can be built upon', async () => {
    const { id } = (await create()).body;
    const { graph, ...rest } = experimentInput();
    const seek = {
      ...{ kind: 'seek', id: 'seek', title: '', position: { x: 0, y: 0 } },
      parameters: {
        ...{ actuator: 'airTrim', law: 'gradient', ditherAmplitude: 1, ditherPeriodS: 5, washoutRatio: 0.3 },
        ...{ lowPassRatio: 0.3, gain: 2, phaseDeg: 0, min: null, max: null, invalidForS: 30 },
        end: { afterS: 300, whenConverged: null, when: null },
      },
    };
    const stored = JSON.stringify({ ...rest, graph: { ...graph, steps: [...graph.steps, seek] } });
    const database = server.app.get(DataSource);
    await database.query(
      `INSERT INTO experiment_version (experimentId, version, basedOn, note, createdAt, createdBy, content)
       VALUES (?, 2, 1, '', ?, 'engineer', ?)`,
      [id, new Date().toISOString(), stored],
    );
    await database.query('UPDATE experiment SET latestVersion = 2 WHERE id = ?', [id]);
    const opened = await engineer.get(`${experiments}/${id}/versions/2`).expect(200);
    const [step] = opened.body.content.graph.steps.slice(-1);
    expect(step.parameters).toMatchObject({
      law: { id: 'gradient', parameters: { washoutRatio: 0.3, lowPassRatio: 0.3, taper: null } },
      actuators: [{ channel: 'airTrim', amplitude: 1, periodS: 5, gain: 2, dither: 'sine' }],
    });
    const next = { basedOn: 2, note: '', content: opened.body.content };
    await engineer.post(`${experiments}/${id}/versions`).send(next).expect(201);
  });

  it('let one of many versions on the same base through', async () => {
    const { id } = (await create()).body;
    const answers = await Promise.all(['a', 'b', 'c', 'd'].map((title) => addVersion(id, 1, title)));
    expect(answers.map((answer) => answer.status).sort()).toEqual([201, 409, 409, 409]);
    expect((await engineer.get(`${experiments}/${id}`)).body.latestVersion).toBe(2);
  });

  it('have versions that the database will not let anybody change', async () => {
    await create().expect(201);
    const database = server.app.get(DataSource);
    await expect(database.query(`UPDATE experiment_version SET note = 'other'`)).rejects.toThrow(
      'never changes',
    );
    await expect(database.query(`DELETE FROM experiment_version`)).rejects.toThrow('never changes');
  });

  it.each([
    ['content.title', experimentInput({ title: '' })],
    ['content.objectiveId', experimentInput({ objectiveId: 'none of ours' })],
    [
      'content.graph.steps[0].kind',
      { ...experimentInput(), graph: { steps: [{ kind: 'dance' }], edges: [] } },
    ],
    [
      'content.graph.steps[0].parameters.durationS',
      {
        ...experimentInput(),
        graph: {
          steps: [{ kind: 'hold', id: 'hold', position: { x: 0, y: 0 }, parameters: { durationS: -1 } }],
          edges: [],
        },
      },
    ],
  ])('name the field %s where it is at fault, and keep nothing', async (field, content) => {
    const answer = await create(content).expect(400);
    expect(answer.body.errors.map((error: { field: string }) => error.field)).toContain(field);
    expect((await engineer.get(experiments)).body.items).toEqual([]);
  });

  it('use an objective of their own rig alone', async () => {
    await engineer
      .post('/api/v1/rigs')
      .send(rigInput({ id: 'kiln-2' }))
      .expect(201);
    const other = await engineer
      .post('/api/v1/objectives')
      .send({ rigId: 'kiln-2', content: objectiveInput })
      .expect(201);
    const answer = await create(experimentInput({ objectiveId: other.body.id })).expect(400);
    expect(answer.body.errors[0].field).toBe('content.objectiveId');
  });

  describe('in preflight', () => {
    const preflight = async (content: object): Promise<PreflightFault[]> =>
      (await engineer.post(`${experiments}/preflight`).send({ rigId: 'kiln-1', content }).expect(200)).body
        .faults;
    const errorsOf = (faults: PreflightFault[]) => faults.filter((fault) => fault.severity === 'error');

    const approveEnvelope = async () => {
      const officer = await server.as('officer', 'safety-officer');
      const draft = await engineer.post('/api/v1/rigs/kiln-1/envelopes').send({ content: envelopeInput() });
      await engineer.post(`/api/v1/envelopes/${draft.body.id}/submit`).expect(200);
      await officer
        .post(`/api/v1/envelopes/${draft.body.id}/approve`)
        .send({ reason: 'checked' })
        .expect(200);
    };

    it('have no error where they can be run', async () => {
      await approveEnvelope();
      expect(errorsOf(await preflight(experimentInput()))).toEqual([]);
    });

    it('say that no envelope is in force', async () => {
      const faults = errorsOf(await preflight(experimentInput()));
      expect(faults.map((fault) => fault.message).join()).toContain('envelope');
    });

    it('name the step with a port that leads nowhere', async () => {
      await approveEnvelope();
      const content = experimentInput();
      content.graph.edges = content.graph.edges.filter((edge) => edge.from !== 'hold');
      const faults = errorsOf(await preflight(content));
      expect(faults).toContainEqual(expect.objectContaining({ step: 'hold', field: 'ports.done' }));
    });

    it('keep nothing', async () => {
      await preflight(experimentInput());
      expect((await engineer.get(experiments)).body.items).toEqual([]);
    });
  });
});
