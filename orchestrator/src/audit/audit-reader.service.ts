import { Injectable } from '@nestjs/common';
import { DataSource, type SelectQueryBuilder } from 'typeorm';
import type { RigScope } from '../auth/rig-scope.js';
import { afterKey, toPage, type Page } from '../paging/page.js';
import type { AuditFilter, AuditQuery, AuditRecord, AuditVerification } from './dto/audit.dto.js';
import { AuditEntry } from './entities/audit-entry.entity.js';
import { verifyAudit } from './verify-audit.js';

const exportBatch = 500;

/** Searches, exports and verifies the audit log. */
@Injectable()
export class AuditReader {
  constructor(private readonly database: DataSource) {}

  /**
   * Newest first.
   *
   * @param visible rigs whose entries may be shown; entries about no rig are for those who reach all
   */
  async list(query: AuditQuery, visible: RigScope): Promise<Page<AuditRecord>> {
    const before = afterKey(query);
    const found = this.filtered(query, visible)
      .orderBy('entry.id', 'DESC')
      .take(query.limit + 1);
    if (before !== null) found.andWhere('entry.id < :before', { before: Number(before) });
    return toPage(await found.getMany(), query.limit, ({ id }) => String(id), toRecord);
  }

  /** All entries that match, oldest first, a batch at a time. */
  async *all(filter: AuditFilter, visible: RigScope): AsyncGenerator<AuditRecord> {
    let last = 0;
    for (;;) {
      const batch = await this.filtered(filter, visible)
        .andWhere('entry.id > :last', { last })
        .orderBy('entry.id', 'ASC')
        .take(exportBatch)
        .getMany();
      for (const entry of batch) yield toRecord(entry);
      if (batch.length < exportBatch) return;
      last = batch.at(-1)?.id ?? last;
    }
  }

  verify(): Promise<AuditVerification> {
    return verifyAudit(this.database);
  }

  private filtered(filter: AuditFilter, visible: RigScope): SelectQueryBuilder<AuditEntry> {
    const { rigId, account, action, subject, from, to, text } = filter;
    const found = this.database.getRepository(AuditEntry).createQueryBuilder('entry').where('1 = 1');
    if (visible !== null) found.andWhere('entry.rigId IN (:...visible)', { visible });
    if (rigId !== undefined) found.andWhere('entry.rigId = :rigId', { rigId });
    if (account !== undefined) found.andWhere('entry.account = :account', { account });
    if (action !== undefined)
      found.andWhere('substr(entry.action, 1, length(:action)) = :action', { action });
    if (subject !== undefined) found.andWhere('entry.subject = :subject', { subject });
    if (from !== undefined) found.andWhere('entry.at >= :from', { from });
    if (to !== undefined) found.andWhere('entry.at < :to', { to });
    if (text !== undefined) found.andWhere('instr(lower(entry.reason), lower(:text)) > 0', { text });
    return found;
  }
}

function toRecord({ previousHash: _, before, after, ...entry }: AuditEntry): AuditRecord {
  return { ...entry, before: parsed(before), after: parsed(after) };
}

function parsed(json: string | null): unknown {
  return json === null ? null : (JSON.parse(json) as unknown);
}
