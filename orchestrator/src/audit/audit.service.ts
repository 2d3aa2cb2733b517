import { Injectable } from '@nestjs/common';
import type { EntityManager } from 'typeorm';
import { TransactionQueue } from '../database/transaction-queue.js';
import { genesisHash, hashOf } from './audit-chain.js';
import { AuditEntry } from './entities/audit-entry.entity.js';

/** One act to be kept. */
export interface AuditAct {
  account: string;
  /** In the past tense, e.g. `envelope.approved`. */
  action: string;
  rigId?: string;
  subject?: string;
  reason?: string;
  /** What it was before and what it became; kept as JSON. */
  before?: unknown;
  after?: unknown;
}

/** Keeps who did what, when and why, each entry chained to the one before by its hash. */
@Injectable()
export class AuditService {
  constructor(private readonly queue: TransactionQueue) {}

  /** Inside a transaction of the queue the act is kept with it, or not at all. */
  async record({ account, action, rigId, subject, reason, before, after }: AuditAct): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const last = await lastEntry(manager);
      const entry = {
        id: (last?.id ?? 0) + 1,
        at: new Date().toISOString(),
        account,
        action,
        rigId: rigId ?? null,
        subject: subject ?? null,
        reason: reason ?? null,
        before: before === undefined ? null : JSON.stringify(before),
        after: after === undefined ? null : JSON.stringify(after),
        previousHash: last?.hash ?? genesisHash,
      };
      await manager.insert(AuditEntry, { ...entry, hash: hashOf(entry) });
    });
  }
}

async function lastEntry(manager: EntityManager): Promise<AuditEntry | null> {
  const [last] = await manager.find(AuditEntry, { order: { id: 'DESC' }, take: 1 });
  return last ?? null;
}
