import { until } from '../harness/until.js';
import {
  approveEnvelope,
  createScriptedServer,
  makeExperiment,
  makeRig,
  untilPhase,
} from '../rig-hosts/scripted-server.js';
import type { Client, TestServer } from '../server/create-test-server.js';

let server: TestServer;
let engineer: Client;

beforeEach(async () => {
  server = await createScriptedServer();
  await makeRig(server);
  await approveEnvelope(server);
  engineer = await server.as('engineer', 'test-engineer');
});

afterEach(() => server.close());

const start = (experimentId: string, key?: string) => {
  const request = engineer.post('/api/v1/runs').send({ experimentId });
  return key === undefined ? request : request.set('Idempotency-Key', key);
};
const list = async () => (await engineer.get('/api/v1/runs').expect(200)).body.items;

async function untilEnded(runId: string) {
  return until('the run has ended', async () => {
    const { body } = await engineer.get(`/api/v1/runs/${runId}`);
    return body.endedAt === null ? null : body;
  });
}

describe('starting a run', () => {
  it('that the host refuses leaves no run', async () => {
    const { body } = await start(await makeExperiment(server, 'refused')).expect(409);
    expect(body.code).toBe('rig.not-armed');
    expect(await list()).toEqual([]);
  });

  it('that the host does not answer keeps the run until it is known what became of it', async () => {
    const { body } = await start(await makeExperiment(server, 'unanswered')).expect(504);
    expect(body.code).toBe('host.timeout');
    expect(await list()).toMatchObject([{ status: 'starting', endedAt: null }]);
    const ended = await untilEnded((await list())[0].id);
    expect(ended).toMatchObject({
      status: 'interrupted',
      reason: 'The rig host no longer knows of the run.',
    });
  }, 40_000);

  it('is refused while another one is open', async () => {
    const experimentId = await makeExperiment(server, 'stays');
    const { body: first } = await start(experimentId).expect(202);
    const answers = await Promise.all([start(experimentId), start(experimentId)]);
    expect(answers.map(({ status, body }) => [status, body.code])).toEqual([
      [409, 'rig.busy'],
      [409, 'rig.busy'],
    ]);
    expect((await list()).map((run: { id: string }) => run.id)).toEqual([first.id]);
  });

  it('with the same key starts one run, and another experiment with it none', async () => {
    const experimentId = await makeExperiment(server, 'stays');
    const twins = await Promise.all([start(experimentId, 'key-1'), start(experimentId, 'key-1')]);
    expect(twins.map(({ status }) => status)).toEqual([202, 202]);
    const first = twins[0].body;
    expect(twins[1].body.id).toBe(first.id);
    const { body: again } = await start(experimentId, 'key-1').expect(202);
    expect(again.id).toBe(first.id);
    const { body } = await start(await makeExperiment(server, 'other'), 'key-1').expect(400);
    expect(body.errors[0].field).toBe('Idempotency-Key');
    await start(experimentId, 'no spaces').expect(400);
    expect(await list()).toHaveLength(1);
  });

  it('needs an experiment that exists', async () => {
    const { body } = await start('none').expect(404);
    expect(body.code).toBe('experiment.not-found');
  });
});

describe('a run', () => {
  it('ends with what the host found', async () => {
    const { body } = await start(await makeExperiment(server, 'ends')).expect(202);
    expect(await untilEnded(body.id)).toMatchObject({
      status: 'finished',
      verdict: 'pass',
      reason: 'As the test asked.',
      results: { gain: 2 },
    });
  });

  it('is stopped with a reason, once', async () => {
    const { body } = await start(await makeExperiment(server, 'stays')).expect(202);
    const path = `/api/v1/runs/${body.id}/stop`;
    await engineer.post(path).send({}).expect(400);
    await engineer.post(path).send({ reason: 'Enough.' }).expect(202);
    expect(await untilEnded(body.id)).toMatchObject({ status: 'stopped' });
    const late = await engineer.post(path).send({ reason: 'Enough.' }).expect(409);
    expect(late.body.code).toBe('run.ended');
  });

  it('that was going on when the server ended in order is ended with it', async () => {
    const { body } = await start(await makeExperiment(server, 'stays')).expect(202);
    const { dataFolder } = server.config;
    await server.app.close();
    server = await createScriptedServer(dataFolder);
    engineer = await server.as('engineer', 'test-engineer');
    expect(await untilEnded(body.id)).toMatchObject({ status: 'interrupted' });
    await untilPhase(server, 'idle');
  });

  it('without a file has no samples, and says so', async () => {
    const { body } = await start(await makeExperiment(server, 'ends')).expect(202);
    for (const what of ['columns', 'samples', 'events']) {
      const answer = await engineer.get(`/api/v1/runs/${body.id}/${what}`).expect(404);
      expect(answer.body.code).toBe('run.no-samples');
    }
    await engineer.get('/api/v1/runs/none/columns').expect(404);
  });

  it('is listed by rig and status, newest first and in pages', async () => {
    const ids: string[] = [];
    const experimentId = await makeExperiment(server, 'ends');
    for (let n = 0; n < 3; n++) {
      const { body } = await start(experimentId).expect(202);
      await untilEnded(body.id);
      ids.unshift(body.id);
    }
    const first = (await engineer.get('/api/v1/runs?rigId=kiln-1&status=finished&limit=2').expect(200)).body;
    const rest = (await engineer.get(`/api/v1/runs?limit=2&cursor=${first.nextCursor}`).expect(200)).body;
    expect([...first.items, ...rest.items].map((run) => run.id)).toEqual(ids);
    expect(rest.nextCursor).toBeNull();
    expect((await engineer.get('/api/v1/runs?status=running').expect(200)).body.items).toEqual([]);
  });
});
