import { Injectable } from '@nestjs/common';
import { DomainError, type EnvelopeContent, type EnvelopeStatus } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { requireRevision } from '../documents/etag.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { newId } from '../ids/new-id.js';
import { afterKey, toPage, type Page, type PageQuery } from '../paging/page.js';
import { RigStore } from '../rigs/rig-store.js';
import type { Envelope } from './dto/envelope.dto.js';
import { EnvelopeEntity } from './entities/envelope.entity.js';
import { envelopeFaults } from './envelope-faults.js';
import { EnvelopeStore } from './envelope-store.js';
import { toEnvelope } from './envelope.mapper.js';

const editable: readonly EnvelopeStatus[] = ['draft', 'returned'];

/** Envelopes up to their submission. */
@Injectable()
export class EnvelopeDraftsService {
  constructor(
    private readonly store: EnvelopeStore,
    private readonly rigs: RigStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /**
   * Versions of a rig, newest first.
   *
   * @throws rig.not-found
   */
  async list(rigId: string, query: PageQuery): Promise<Page<Envelope>> {
    await this.rigs.get(rigId);
    const before = Number(afterKey(query) ?? Number.MAX_SAFE_INTEGER);
    const rows = await this.store.list(rigId, before, query.limit + 1);
    return toPage(rows, query.limit, (row) => String(row.version), toEnvelope);
  }

  /** @throws envelope.not-found */
  async get(id: string): Promise<Envelope> {
    return toEnvelope(await this.store.get(id));
  }

  /**
   * @throws rig.not-found
   * @throws request.invalid naming each fault
   */
  async create(rigId: string, content: EnvelopeContent, by: string): Promise<Envelope> {
    const rig = await this.rigs.get(rigId);
    refuseFaults(envelopeFaults(content, rig.content));
    return this.queue.transaction(async (manager) => {
      const last = (await manager.maximum(EnvelopeEntity, 'version', { rigId })) ?? 0;
      const row: EnvelopeEntity = {
        id: newId(),
        rigId,
        version: last + 1,
        status: 'draft',
        revision: 1,
        author: by,
        submittedBy: null,
        decidedBy: null,
        reason: null,
        createdAt: new Date().toISOString(),
        decidedAt: null,
        content,
      };
      await insertRow(manager, EnvelopeEntity, row);
      await this.audit.record({ account: by, action: 'envelope.drafted', rigId, subject: row.id });
      return toEnvelope(row);
    });
  }

  /**
   * Changes a draft, or one that was returned, which is then a draft again.
   *
   * @throws auth.forbidden unless `by` is its author
   * @throws envelope.wrong-status
   * @throws request.precondition where `revision` is not the latest
   * @throws request.invalid naming each fault
   */
  change(id: string, revision: number, content: EnvelopeContent, by: string): Promise<Envelope> {
    return this.queue.transaction(async (manager) => {
      const row = await this.ownEditable(id, by);
      requireRevision(row.revision, revision);
      refuseFaults(envelopeFaults(content, (await this.rigs.get(row.rigId)).content));
      const changed = { content, revision: revision + 1, status: 'draft' as const };
      await updateRow(manager, EnvelopeEntity, { id }, changed);
      await this.audit.record({ account: by, action: 'envelope.changed', rigId: row.rigId, subject: id });
      return toEnvelope({ ...row, ...changed });
    });
  }

  /**
   * Hands a draft in for approval; from then on it cannot be changed.
   *
   * @throws auth.forbidden unless `by` is its author
   * @throws envelope.wrong-status
   * @throws request.invalid where the rig has changed so that it does not fit any more
   */
  submit(id: string, by: string): Promise<Envelope> {
    return this.queue.transaction(async (manager) => {
      const row = await this.ownEditable(id, by);
      refuseFaults(envelopeFaults(row.content, (await this.rigs.get(row.rigId)).content));
      const changed = { status: 'submitted' as const, submittedBy: by };
      await updateRow(manager, EnvelopeEntity, { id }, changed);
      await this.audit.record({ account: by, action: 'envelope.submitted', rigId: row.rigId, subject: id });
      return toEnvelope({ ...row, ...changed });
    });
  }

  private async ownEditable(id: string, by: string): Promise<EnvelopeEntity> {
    const row = await this.store.get(id);
    if (row.author !== by) {
      throw new DomainError('auth.forbidden', `Only its author, ${row.author}, may change or submit it.`);
    }
    if (!editable.includes(row.status)) {
      throw new DomainError('envelope.wrong-status', `It is ${row.status}: make a new draft instead.`);
    }
    return row;
  }
}
