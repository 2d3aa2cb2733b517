import { Injectable } from '@nestjs/common';
import { DomainError, type ExperimentContent } from '@cresthold/shared';
import type { EntityManager } from 'typeorm';
import { AuditService } from '../audit/audit.service.js';
import { rigCondition, type RigScope } from '../auth/rig-scope.js';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { newId } from '../ids/new-id.js';
import { ObjectiveStore } from '../objectives/objective-store.js';
import { afterKey, toPage, type Page, type PageQuery } from '../paging/page.js';
import { RigStore } from '../rigs/rig-store.js';
import type {
  CreateExperiment,
  CreateVersion,
  Experiment,
  ExperimentQuery,
  ExperimentVersion,
} from './dto/experiment.dto.js';
import { ExperimentVersionEntity } from './entities/experiment-version.entity.js';
import { ExperimentEntity } from './entities/experiment.entity.js';
import { ExperimentStore } from './experiment-store.js';
import { toExperiment, toExperimentVersion } from './experiment.mapper.js';

@Injectable()
export class ExperimentsService {
  constructor(
    private readonly store: ExperimentStore,
    private readonly rigs: RigStore,
    private readonly objectives: ObjectiveStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** @param visible rigs whose documents may be shown */
  async list(query: ExperimentQuery, visible: RigScope): Promise<Page<Experiment>> {
    const rigId = rigCondition(query.rigId, visible);
    const rows = await this.store.list(rigId, afterKey(query) ?? '', query.limit + 1);
    return toPage(rows, query.limit, (row) => row.id, toExperiment);
  }

  /** @throws experiment.not-found */
  async get(id: string): Promise<Experiment> {
    return toExperiment(await this.store.get(id));
  }

  /**
   * Versions, newest first.
   *
   * @throws experiment.not-found
   */
  async listVersions(id: string, query: PageQuery): Promise<Page<ExperimentVersion>> {
    await this.store.get(id);
    const before = Number(afterKey(query) ?? Number.MAX_SAFE_INTEGER);
    const rows = await this.store.listVersions(id, before, query.limit + 1);
    return toPage(rows, query.limit, (row) => String(row.version), toExperimentVersion);
  }

  /** @throws experiment.not-found */
  async getVersion(id: string, version: number): Promise<ExperimentVersion> {
    return toExperimentVersion(await this.store.getVersion(id, version));
  }

  /**
   * Makes an experiment with its version 1. An unfinished graph may be kept: preflight judges it, and a run
   * is refused until it finds no error.
   *
   * @throws rig.not-found
   * @throws request.invalid where the rig has no such objective
   */
  async create({ rigId, content }: CreateExperiment, by: string, note = ''): Promise<Experiment> {
    await this.rigs.get(rigId);
    await this.requireObjective(rigId, content);
    return this.queue.transaction(async (manager) => {
      const createdAt = new Date().toISOString();
      const row: ExperimentEntity = {
        id: newId(),
        rigId,
        title: content.title,
        latestVersion: 1,
        createdAt,
        createdBy: by,
      };
      await insertRow(manager, ExperimentEntity, row);
      const version = { experimentId: row.id, version: 1, basedOn: null, note, createdAt, createdBy: by };
      await insertRow(manager, ExperimentVersionEntity, { ...version, content });
      await this.audit.record({ account: by, action: 'experiment.created', rigId, subject: row.id });
      return toExperiment(row);
    });
  }

  /**
   * Adds an immutable version.
   *
   * @throws experiment.not-found
   * @throws request.precondition where somebody else has added one since `basedOn`
   * @throws request.invalid where the rig has no such objective
   */
  createVersion(
    id: string,
    { basedOn, note, content }: CreateVersion,
    by: string,
  ): Promise<ExperimentVersion> {
    return this.queue.transaction(async (manager) => {
      const experiment = await this.store.get(id);
      if (experiment.latestVersion !== basedOn) throw staleVersion(experiment.latestVersion, basedOn);
      await this.requireObjective(experiment.rigId, content);
      const row: ExperimentVersionEntity = {
        experimentId: id,
        version: basedOn + 1,
        basedOn,
        note,
        createdAt: new Date().toISOString(),
        createdBy: by,
        content,
      };
      await this.insertLatest(manager, row);
      const { rigId } = experiment;
      await this.audit.record({ account: by, action: 'experiment.version-created', rigId, subject: id });
      return toExperimentVersion(row);
    });
  }

  private async insertLatest(manager: EntityManager, row: ExperimentVersionEntity): Promise<void> {
    await insertRow(manager, ExperimentVersionEntity, row);
    const { experimentId: id, version: latestVersion, content } = row;
    await updateRow(manager, ExperimentEntity, { id }, { latestVersion, title: content.title });
  }

  private async requireObjective(rigId: string, { objectiveId }: ExperimentContent): Promise<void> {
    if (objectiveId === null) return;
    const objective = await this.objectives.find(objectiveId);
    if (objective?.rigId !== rigId) {
      const message = 'The rig has no such objective: choose one of its own.';
      refuseFaults([{ field: 'content.objectiveId', message }]);
    }
  }
}

function staleVersion(latest: number, basedOn: number): DomainError {
  const message = `Version ${latest} is the latest, yours rests on ${basedOn}: load it and repeat your change.`;
  return new DomainError('request.precondition', message, [{ field: 'basedOn', message }]);
}
