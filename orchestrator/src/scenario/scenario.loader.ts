import { Injectable } from '@nestjs/common';
import { DomainError, type FieldFault, type Role, type Scenario } from '@cresthold/shared';
import { readableSecret } from '../auth/readable-secret.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { EnvelopeDecisionsService } from '../envelopes/envelope-decisions.service.js';
import { EnvelopeDraftsService } from '../envelopes/envelope-drafts.service.js';
import { ExperimentsService } from '../experiments/experiments.service.js';
import { PreflightService } from '../experiments/preflight.service.js';
import { ObjectivesService } from '../objectives/objectives.service.js';
import { RigsService } from '../rigs/rigs.service.js';
import { UserStore } from '../users/user-store.js';
import { UsersService } from '../users/users.service.js';

type ScenarioRig = Scenario['rigs'][number];
type ScenarioEnvelope = ScenarioRig['envelope'];

/** What a loaded scenario became; passwords are shown here and nowhere else. */
export interface LoadedScenario {
  users: { account: string; title: string; roles: Role[]; password: string }[];
  rigs: LoadedRig[];
  start: { rigId: string; experimentId: string; by: string } | null;
}

export interface LoadedRig {
  id: string;
  envelopeId: string;
  /** Ids by the keys of the file. */
  objectives: Record<string, string>;
  experiments: Record<string, string>;
}

const passwordGroups = 3;

/** Fills a fresh data folder from a scenario, through the same services that people use. */
@Injectable()
export class ScenarioLoader {
  constructor(
    private readonly queue: TransactionQueue,
    private readonly userStore: UserStore,
    private readonly users: UsersService,
    private readonly rigs: RigsService,
    private readonly drafts: EnvelopeDraftsService,
    private readonly decisions: EnvelopeDecisionsService,
    private readonly objectives: ObjectivesService,
    private readonly experiments: ExperimentsService,
    private readonly preflight: PreflightService,
  ) {}

  /**
   * Loads all of it or nothing.
   *
   * @throws auth.setup-done where the data folder has accounts already
   * @throws request.invalid naming the faults of the file
   */
  async load(scenario: Scenario): Promise<LoadedScenario> {
    refuseFaults(roleFaults(scenario));
    return this.queue.transaction(async () => {
      if (await this.userStore.hasAny()) {
        throw new DomainError('auth.setup-done', 'The data folder has accounts already: name a fresh one.');
      }
      const users = await this.loadUsers(scenario.users);
      const rigs: LoadedRig[] = [];
      for (const [index, rig] of scenario.rigs.entries()) rigs.push(await this.loadRig(rig, index));
      return { users, rigs, start: startOf(scenario, rigs) };
    });
  }

  private async loadUsers(people: Scenario['users']): Promise<LoadedScenario['users']> {
    const loaded: LoadedScenario['users'] = [];
    for (const person of people) {
      const user = { ...person, password: readableSecret(passwordGroups) };
      await this.users.create(user, 'server');
      loaded.push(user);
    }
    return loaded;
  }

  private async loadRig({ rig, envelope, objectives, experiments }: ScenarioRig, index: number) {
    const loaded: LoadedRig = { id: rig.id, envelopeId: '', objectives: {}, experiments: {} };
    await this.rigs.create(rig, 'server');
    loaded.envelopeId = await this.loadEnvelope(rig.id, envelope);
    for (const { key, content, author } of objectives) {
      loaded.objectives[key] = (await this.objectives.create({ rigId: rig.id, content }, author)).id;
    }
    for (const [n, { key, objectiveKey, content, author, note }] of experiments.entries()) {
      const objectiveId = objectiveKey === null ? null : (loaded.objectives[objectiveKey] ?? null);
      const order = { rigId: rig.id, content: { ...content, objectiveId } };
      refuseFaults(await this.preflightErrors(order, `rigs[${index}].experiments[${n}].content`));
      loaded.experiments[key] = (await this.experiments.create(order, author, note)).id;
    }
    return loaded;
  }

  private async loadEnvelope(rigId: string, envelope: ScenarioEnvelope): Promise<string> {
    const { content, author, approvedBy, reason } = envelope;
    const { id, revision } = await this.drafts.create(rigId, content, author);
    await this.drafts.submit(id, author);
    await this.decisions.approve({ id, revision, reason, by: approvedBy });
    return id;
  }

  private async preflightErrors(
    { rigId, content }: { rigId: string; content: ScenarioRig['experiments'][number]['content'] },
    path: string,
  ): Promise<FieldFault[]> {
    const faults = await this.preflight.check(rigId, content);
    return faults
      .filter((fault) => fault.severity === 'error')
      .map(({ step, field, message }) => ({ field: [path, step, field].filter(Boolean).join('.'), message }));
  }
}

/** Services do not ask for roles, routes do; so the loader asks for those that matter. */
function roleFaults(scenario: Scenario): FieldFault[] {
  const hasRole = (account: string, ...roles: Role[]) =>
    scenario.users.some(
      (user) => user.account === account && user.roles.some((role) => roles.includes(role)),
    );
  return scenario.rigs.flatMap(({ envelope }, index) => {
    const faults: FieldFault[] = [];
    const at = `rigs[${index}].envelope`;
    if (!hasRole(envelope.author, 'test-engineer', 'safety-officer')) {
      faults.push({ field: `${at}.author`, message: 'Name a test engineer or a safety officer.' });
    }
    if (!hasRole(envelope.approvedBy, 'safety-officer')) {
      faults.push({ field: `${at}.approvedBy`, message: 'Name a safety officer.' });
    }
    return faults;
  });
}

function startOf({ start }: Scenario, rigs: readonly LoadedRig[]): LoadedScenario['start'] {
  if (start === null) return null;
  const experimentId = rigs.find((rig) => rig.id === start.rigId)?.experiments[start.experimentKey];
  return experimentId === undefined ? null : { rigId: start.rigId, experimentId, by: start.by };
}
