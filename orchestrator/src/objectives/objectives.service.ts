import { Injectable } from '@nestjs/common';
import { compileObjective, type FieldFault, type ObjectiveContent, type Rig } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { rigCondition, type RigScope } from '../auth/rig-scope.js';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { requireRevision } from '../documents/etag.js';
import { prefixFaults, refuseFaults } from '../documents/prefix-faults.js';
import { newId } from '../ids/new-id.js';
import { afterKey, toPage, type Page } from '../paging/page.js';
import { RigStore } from '../rigs/rig-store.js';
import type { CreateObjective, Objective, ObjectiveQuery } from './dto/objective.dto.js';
import { ObjectiveEntity } from './entities/objective.entity.js';
import { ObjectiveStore } from './objective-store.js';

@Injectable()
export class ObjectivesService {
  constructor(
    private readonly store: ObjectiveStore,
    private readonly rigs: RigStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** @param visible rigs whose documents may be shown */
  async list(query: ObjectiveQuery, visible: RigScope): Promise<Page<Objective>> {
    const rigId = rigCondition(query.rigId, visible);
    const rows = await this.store.list(rigId, afterKey(query) ?? '', query.limit + 1);
    return toPage(rows, query.limit, (row) => row.id, toObjective);
  }

  /** @throws objective.not-found */
  async get(id: string): Promise<Objective> {
    return toObjective(await this.store.get(id));
  }

  /**
   * @throws rig.not-found
   * @throws request.invalid naming each expression that cannot be understood
   */
  async create({ rigId, content }: CreateObjective, by: string): Promise<Objective> {
    const rig = await this.rigs.get(rigId);
    refuseFaults(objectiveFaults(content, rig.content));
    return this.queue.transaction(async (manager) => {
      const row: ObjectiveEntity = {
        id: newId(),
        rigId,
        revision: 1,
        content,
        createdAt: new Date().toISOString(),
        createdBy: by,
      };
      await insertRow(manager, ObjectiveEntity, row);
      await this.audit.record({ account: by, action: 'objective.created', rigId, subject: row.id });
      return toObjective(row);
    });
  }

  /**
   * @throws objective.not-found
   * @throws request.precondition where `revision` is not the latest
   * @throws request.invalid naming each expression that cannot be understood
   */
  change(id: string, revision: number, content: ObjectiveContent, by: string): Promise<Objective> {
    return this.queue.transaction(async (manager) => {
      const row = await this.store.get(id);
      requireRevision(row.revision, revision);
      refuseFaults(objectiveFaults(content, (await this.rigs.get(row.rigId)).content));
      const changed = { content, revision: revision + 1 };
      await updateRow(manager, ObjectiveEntity, { id }, changed);
      await this.audit.record({ account: by, action: 'objective.changed', rigId: row.rigId, subject: id });
      return toObjective({ ...row, ...changed });
    });
  }
}

function objectiveFaults(content: ObjectiveContent, rig: Rig): FieldFault[] {
  const outcome = compileObjective(content, rig);
  return outcome.isOk ? [] : prefixFaults(outcome.faults, 'content');
}

function toObjective({ id, rigId, revision, content }: ObjectiveEntity): Objective {
  return { id, rigId, revision, content };
}
