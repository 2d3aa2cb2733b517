import { Injectable } from '@nestjs/common';
import { AdapterRegistry } from '@cresthold/adapters';
import { changesMeaning, DomainError, type Rig } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import type { RigScope } from '../auth/rig-scope.js';
import { UnfitCalibrations } from '../calibrations/unfit-calibrations.js';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { requireRevision } from '../documents/etag.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { EnvelopeWithdrawal } from '../envelopes/envelope-withdrawal.js';
import { afterKey, toPage, type Page, type PageQuery } from '../paging/page.js';
import type { RigDocument } from './dto/rig.dto.js';
import { RigEntity } from './entities/rig.entity.js';
import { rigFaults } from './rig-faults.js';
import { RigHostsPort } from './rig-hosts.port.js';
import type { RigDraft, ScanBudget } from './dto/scan-budget.dto.js';
import { scanBudgetOf } from './scan-budget.js';
import { requireResting } from './rig-phase.js';
import { RigStore } from './rig-store.js';

@Injectable()
export class RigsService {
  constructor(
    private readonly store: RigStore,
    private readonly hosts: RigHostsPort,
    private readonly envelopes: EnvelopeWithdrawal,
    private readonly calibrations: UnfitCalibrations,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
    private readonly adapters: AdapterRegistry,
  ) {}

  async list(query: PageQuery, visible: RigScope): Promise<Page<RigDocument>> {
    const rows = await this.store.list(afterKey(query) ?? '', query.limit + 1, visible);
    return toPage(
      rows,
      query.limit,
      (row) => row.id,
      (row) => this.toDocument(row),
    );
  }

  /** @throws rig.not-found */
  async get(rigId: string): Promise<RigDocument> {
    return this.toDocument(await this.store.get(rigId));
  }

  /**
   * Makes a rig and starts its host.
   *
   * @throws request.invalid naming each fault of the wiring
   * @throws rig.exists
   */
  async create(rig: Rig, by: string): Promise<RigDocument> {
    refuseFaults(rigFaults(rig, this.adapters));
    const now = new Date().toISOString();
    const row = { id: rig.id, revision: 1, content: rig, createdAt: now, changedAt: now };
    await this.queue.transaction(async (manager) => {
      if (await manager.existsBy(RigEntity, { id: rig.id })) {
        throw new DomainError('rig.exists', undefined, [{ field: 'id', message: 'This id is taken.' }]);
      }
      await insertRow(manager, RigEntity, row);
      await this.audit.record({ account: by, action: 'rig.created', rigId: rig.id });
    });
    await this.hosts.reconfigure(rig.id);
    return this.toDocument(row);
  }

  /**
   * Changes the wiring. Where that gives channels another meaning the envelope in force is withdrawn: it was
   * approved for other channels, and a new one must be before the rig can be armed again.
   *
   * @throws rig.not-found
   * @throws rig.busy unless idle, offline or tripped
   * @throws request.precondition where `revision` is not the latest
   * @throws request.invalid naming each fault of the wiring
   */
  async change(rigId: string, revision: number, rig: Rig, by: string): Promise<RigDocument> {
    if (rig.id !== rigId) {
      refuseFaults([{ field: 'id', message: `The id of a rig never changes: keep "${rigId}".` }]);
    }
    await this.store.get(rigId);
    refuseFaults(rigFaults(rig, this.adapters));
    const row = await this.queue.transaction(async (manager) => {
      const before = await this.store.get(rigId);
      requireRevision(before.revision, revision);
      requireResting(this.hosts, rigId, 'change its wiring');
      const changed = { revision: revision + 1, content: rig, changedAt: new Date().toISOString() };
      await updateRow(manager, RigEntity, { id: rigId }, changed);
      await this.audit.record({
        account: by,
        action: 'rig.changed',
        rigId,
        reason: `revision ${revision + 1}`,
      });
      if (changesMeaning(before.content, rig)) await this.envelopes.withdraw(rigId, by);
      await this.calibrations.withdraw(before.content, rig, by);
      return { ...before, ...changed };
    });
    await this.hosts.reconfigure(rigId);
    return this.toDocument(row);
  }

  /** What the scan of a draft would cost, and every fault that making it a rig would be refused with. */
  budget(draft: RigDraft): ScanBudget {
    return scanBudgetOf(draft, this.adapters);
  }

  private toDocument({ id, revision, content }: RigEntity): RigDocument {
    return { id, revision, content, status: this.hosts.status(id) };
  }
}
