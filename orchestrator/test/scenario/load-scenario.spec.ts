import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { INestApplicationContext } from '@nestjs/common';
import { Test } from '@nestjs/testing';
import { scenarioSchema, type Scenario, type ScenarioInput } from '@cresthold/shared';
import { AppModule } from '../../src/app.module.js';
import { AuthService } from '../../src/auth/auth.service.js';
import { parseConfig } from '../../src/config/config.schema.js';
import { EnvelopeStore } from '../../src/envelopes/envelope-store.js';
import { ExperimentStore } from '../../src/experiments/experiment-store.js';
import { RigStore } from '../../src/rigs/rig-store.js';
import { ScenarioLoader } from '../../src/scenario/scenario.loader.js';
import { UserStore } from '../../src/users/user-store.js';
import { envelopeInput, experimentInput, objectiveInput, rigInput } from '../server/documents.js';

function scenario(change: (scenario: Scenario) => void = () => undefined): Scenario {
  const input: ScenarioInput = {
    users: [
      { account: 'engineer', title: 'Engineer', roles: ['test-engineer'] },
      { account: 'officer', title: 'Officer', roles: ['safety-officer'] },
    ],
    rigs: [
      {
        rig: rigInput(),
        envelope: { content: envelopeInput(), author: 'engineer', approvedBy: 'officer', reason: 'checked' },
        objectives: [{ key: 'least-loss', content: objectiveInput, author: 'engineer' }],
        experiments: [
          {
            key: 'hold',
            objectiveKey: 'least-loss',
            content: experimentInput(),
            author: 'engineer',
            note: 'the first',
          },
        ],
      },
    ],
    start: { rigId: 'kiln-1', experimentKey: 'hold', by: 'engineer' },
  };
  const parsed = scenarioSchema.parse(input);
  change(parsed);
  return parsed;
}

describe('loading a scenario', () => {
  let folder: string;
  let app: INestApplicationContext;
  const load = (what: Scenario) => app.get(ScenarioLoader).load(what);

  beforeEach(async () => {
    folder = mkdtempSync(join(tmpdir(), 'cresthold-scenario-'));
    const config = parseConfig({ CRESTHOLD_DATA: folder }, folder);
    const imports = [AppModule.registerWithoutRigHosts(config)];
    app = await (await Test.createTestingModule({ imports }).compile()).init();
  });
  afterEach(async () => {
    await app.close();
    rmSync(folder, { recursive: true, force: true });
  });

  it('makes people who can sign in, a rig with its envelope in force, and its documents', async () => {
    const loaded = await load(scenario());
    const { account, password } = loaded.users[0]!;
    const place = { userAgent: 'test', address: '127.0.0.1' };
    const { session } = await app.get(AuthService).signIn({ account, password }, place, undefined);
    expect(session.roles).toEqual(['test-engineer']);
    expect(new Set(loaded.users.map((user) => user.password)).size).toBe(2);

    const inForce = await app.get(EnvelopeStore, { strict: false }).get(loaded.rigs[0]?.envelopeId ?? '');
    expect(inForce).toMatchObject({ status: 'in-force', author: 'engineer', decidedBy: 'officer' });
    const experimentId = loaded.start?.experimentId ?? '';
    const version = await app.get(ExperimentStore, { strict: false }).getVersion(experimentId, 1);
    expect(version.content.objectiveId).toBe(loaded.rigs[0]?.objectives['least-loss']);
    expect(version.note).toBe('the first');
  });

  it('fills a fresh folder only', async () => {
    await load(scenario());
    await expect(load(scenario())).rejects.toMatchObject({ code: 'auth.setup-done' });
  });

  it.each<[string, (s: Scenario) => void]>([
    ['rigs[0].envelope.approvedBy', (s) => s.users[1]!.roles.splice(0, 1, 'reader')],
    ['content.limits[0].channel', (s) => (s.rigs[0]!.envelope.content.limits[0]!.channel = 'ghost')],
    [
      'rigs[0].experiments[0].content.hold.ports.done',
      (s) => s.rigs[0]!.experiments[0]!.content.graph.edges.pop(),
    ],
  ])('loads all or nothing: a fault at %s leaves the folder fresh', async (field, spoil) => {
    const outcome = load(scenario(spoil));
    await expect(outcome).rejects.toMatchObject({
      code: 'request.invalid',
      details: expect.arrayContaining([expect.objectContaining({ field })]),
    });
    expect(await app.get(UserStore, { strict: false }).hasAny()).toBe(false);
    expect(await app.get(RigStore, { strict: false }).all()).toEqual([]);
  });
});
