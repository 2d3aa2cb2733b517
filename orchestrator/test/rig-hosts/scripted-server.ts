import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { NestExpressApplication } from '@nestjs/platform-express';
import { Test } from '@nestjs/testing';
import { AppModule } from '../../src/app.module.js';
import { setUpHttp } from '../../src/http/set-up-http.js';
import {
  defaultRigHostSettings,
  RIG_HOST_SETTINGS,
  type RigHostSettings,
} from '../../src/rig-hosts/rig-host-settings.js';
import { testConfig, TestServer } from '../server/create-test-server.js';
import { envelopeInput, experimentInput, rigInput } from '../server/documents.js';
import { FakeRigHosts } from '../server/fake-rig-hosts.js';
import { until } from '../harness/until.js';

export const rigId = 'kiln-1';

const settings: RigHostSettings = {
  ...defaultRigHostSettings,
  program: join(__dirname, 'fixtures/scripted-host.mjs'),
  timing: { ...defaultRigHostSettings.timing, requestMs: 1_000 },
  orphanWaitMs: 300,
};

/** A whole server that forks scripted rig hosts; on the data folder of an earlier one where it is given. */
export async function createScriptedServer(
  dataFolder = mkdtempSync(join(tmpdir(), 'cresthold-scripted-')),
  overrides: Partial<RigHostSettings> = {},
): Promise<TestServer> {
  const config = testConfig(dataFolder);
  const module = await Test.createTestingModule({ imports: [AppModule.register(config)] })
    .overrideProvider(RIG_HOST_SETTINGS)
    .useValue({ ...settings, ...overrides })
    .compile();
  const options = { forceCloseConnections: true, bodyParser: false, logger: false } as const;
  const app = module.createNestApplication<NestExpressApplication>(options);
  setUpHttp(app, config);
  await app.init();
  return new TestServer(app, config, new FakeRigHosts());
}

/** Makes the rig and waits for its host. */
export async function makeRig(server: TestServer): Promise<void> {
  const engineer = await server.as('engineer', 'test-engineer');
  await engineer.post('/api/v1/rigs').send(rigInput()).expect(201);
  await untilPhase(server, 'idle');
}

export async function approveEnvelope(server: TestServer): Promise<void> {
  const engineer = await server.as('engineer', 'test-engineer');
  const officer = await server.as('officer', 'safety-officer');
  const draft = { content: envelopeInput() };
  const { body } = await engineer.post(`/api/v1/rigs/${rigId}/envelopes`).send(draft).expect(201);
  await engineer.post(`/api/v1/envelopes/${body.id}/submit`).expect(200);
  await officer.post(`/api/v1/envelopes/${body.id}/approve`).send({ reason: 'Checked.' }).expect(200);
}

/** @param title tells the scripted host what to do with a run of it */
export async function makeExperiment(server: TestServer, title: string): Promise<string> {
  const engineer = await server.as('engineer', 'test-engineer');
  const request = { rigId, content: experimentInput({ title }) };
  const { body } = await engineer.post('/api/v1/experiments').send(request).expect(201);
  return body.id as string;
}

export async function statusOf(server: TestServer) {
  const reader = await server.as('reader', 'reader');
  return (await reader.get(`/api/v1/rigs/${rigId}/status`).expect(200)).body;
}

export async function untilPhase(server: TestServer, phase: string) {
  return until(`rig ${phase}`, async () => {
    const status = await statusOf(server);
    return status.phase === phase ? status : null;
  });
}
