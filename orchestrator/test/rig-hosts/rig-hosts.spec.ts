import { fork, type ChildProcess } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { RigStore } from '../../src/rigs/rig-store.js';
import { HostPidFile } from '../../src/rig-hosts/supervision/host-pid-file.js';
import { hostFiles } from '../../src/rig-hosts/host-files.js';
import { until } from '../harness/until.js';
import type { TestServer } from '../server/create-test-server.js';
import {
  approveEnvelope,
  createScriptedServer,
  makeExperiment,
  makeRig,
  rigId,
  statusOf,
  untilPhase,
} from './scripted-server.js';

const rigPath = `/api/v1/rigs/${rigId}`;
let server: TestServer;
let other: ChildProcess | null = null;

const tripOnDisk = async () => (await server.app.get(RigStore).state(rigId)).trip;
const officer = () => server.as('officer', 'safety-officer');
const pidOf = (folder: string) =>
  (JSON.parse(readFileSync(hostFiles(folder, rigId).pidFile, 'utf8')) as { pid: number }).pid;

/** A scripted host that is up has nothing to say against arming. */
const untilUp = () =>
  until('the host is up', async () => (await statusOf(server)).armingObstacles.length === 0);

async function restart(settings = {}) {
  const { dataFolder } = server.config;
  await server.app.close();
  server = await createScriptedServer(dataFolder, settings);
}

beforeEach(async () => {
  server = await createScriptedServer();
  await makeRig(server);
});

afterEach(async () => {
  other?.kill('SIGKILL');
  other = null;
  await server.close();
});

describe('an emergency stop', () => {
  it('is on disk when it is answered, and survives host and server', async () => {
    const reader = await server.as('reader', 'reader');
    const { body } = await reader.post(`${rigPath}/emergency-stop`).send({ reason: 'Smoke.' }).expect(200);
    expect(body).toMatchObject({ phase: 'tripped', trip: { cause: 'emergency-stop', by: 'reader' } });
    expect(await tripOnDisk()).toMatchObject({ cause: 'emergency-stop', message: 'Smoke.' });
    await restart();
    expect(await untilPhase(server, 'tripped')).toMatchObject({ trip: { message: 'Smoke.' } });
    await untilUp();
    process.kill(pidOf(server.config.dataFolder), 'SIGKILL');
    const status = await until('the host is back', async () => {
      const now = await statusOf(server);
      return now.trip?.later.length > 0 && now.armingObstacles.length === 0 ? now : null;
    });
    expect(status.trip).toMatchObject({ cause: 'emergency-stop', later: [{ cause: 'host-lost' }] });
  });

  it('is latched where there is no host to hear it', async () => {
    await restart({ program: join(__dirname, 'fixtures/before-ready.mjs') });
    await until('the host has failed', async () =>
      /failed/.test((await statusOf(server)).armingObstacles[0]),
    );
    const reader = await server.as('reader', 'reader');
    const { body } = await reader.post(`${rigPath}/emergency-stop`).expect(200);
    expect(body).toMatchObject({ phase: 'tripped', trip: { cause: 'emergency-stop', by: 'reader' } });
    await restart();
    expect(await untilPhase(server, 'tripped')).toMatchObject({ trip: { cause: 'emergency-stop' } });
  });

  it('reaches every rig at once', async () => {
    const reader = await server.as('reader', 'reader');
    const { body } = await reader.post('/api/v1/rigs/emergency-stop').expect(200);
    expect(body).toMatchObject([{ rigId, phase: 'tripped' }]);
  });

  it('is cleared by a reset with a reason, on disk as well', async () => {
    const reader = await server.as('reader', 'reader');
    await reader.post(`${rigPath}/emergency-stop`).expect(200);
    await (await officer()).post(`${rigPath}/reset`).send({}).expect(400);
    const { body } = await (await officer()).post(`${rigPath}/reset`).send({ reason: 'Clear.' }).expect(200);
    expect(body).toMatchObject({ phase: 'idle', trip: null });
    expect(await tripOnDisk()).toBeNull();
    await restart();
    await untilPhase(server, 'idle');
  });
});

describe('the loss of a rig host', () => {
  it('interrupts the run, trips the rig and brings the host back tripped', async () => {
    await approveEnvelope(server);
    const experimentId = await makeExperiment(server, 'dies');
    const engineer = await server.as('engineer', 'test-engineer');
    const { body: run } = await engineer.post('/api/v1/runs').send({ experimentId }).expect(202);
    const ended = await until('the run is marked', async () => {
      const { body } = await engineer.get(`/api/v1/runs/${run.id}`);
      return body.endedAt === null ? null : body;
    });
    expect(ended).toMatchObject({ status: 'interrupted', verdict: 'inconclusive' });
    expect(ended.reason).toMatch(/rig host was lost/);
    expect(await untilPhase(server, 'tripped')).toMatchObject({ trip: { cause: 'host-lost' } });
    await untilUp();
  });
});

describe('a rig whose earlier host still lives', () => {
  it('gets no second one, and says so, until the first is gone', async () => {
    const { dataFolder } = server.config;
    await server.app.close();
    other = fork(join(__dirname, 'fixtures/never-ready.mjs'));
    new HostPidFile(hostFiles(dataFolder, rigId).pidFile).write(other.pid ?? 0);
    server = await createScriptedServer(dataFolder);
    const status = await until('it says so', async () => {
      const now = await statusOf(server);
      return /failed/.test(now.armingObstacles[0]) ? now : null;
    });
    expect(status.armingObstacles[0]).toContain(`process ${other.pid}`);
    const health = await server.anyone.get('/api/v1/health').expect(503);
    expect(health.body.errors).toMatchObject([{ field: `rig-host:${rigId}` }]);
    const engineer = await server.as('engineer', 'test-engineer');
    const { body } = await engineer.post(`${rigPath}/arm`).expect(503);
    expect(body.code).toBe('host.unavailable');
    expect(body.detail).toContain(`process ${other.pid}`);
    other.kill('SIGKILL');
    await untilPhase(server, 'idle');
  });
});

describe('a rig host that has failed', () => {
  it("is begun again at a person's command", async () => {
    const program = join(server.config.dataFolder, 'host.mjs');
    const fixture = (name: string) => `import '${join(__dirname, 'fixtures', name)}';`;
    writeFileSync(program, fixture('before-ready.mjs'));
    await restart({ program });
    await until('it has failed', async () => /failed/.test((await statusOf(server)).armingObstacles[0]));
    writeFileSync(program, fixture('scripted-host.mjs'));
    const engineer = await server.as('engineer', 'test-engineer');
    const { body } = await engineer.post(`${rigPath}/arm`).expect(503);
    expect(body.detail).toContain('begun again');
    await untilUp();
  });
});

describe('a lockout', () => {
  it('outlives the server', async () => {
    const hold = { reason: 'Hands in the kiln.' };
    await (await officer()).post(`${rigPath}/lockouts`).send(hold).expect(201);
    expect(await statusOf(server)).toMatchObject({ isLockedOut: true });
    await restart();
    expect(await untilPhase(server, 'idle')).toMatchObject({ isLockedOut: true });
  });
});
