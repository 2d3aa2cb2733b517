import { Injectable } from '@nestjs/common';
import { TransactionQueue } from '../database/transaction-queue.js';
import { AuditEntry } from './entities/audit-entry.entity.js';

/** One act to be kept. */
export interface AuditAct {
  account: string;
  /** In the past tense, e.g. `envelope.approved`. */
  action: string;
  rigId?: string;
  subject?: string;
  reason?: string;
}

/** Keeps who did what, when and why. */
@Injectable()
export class AuditService {
  constructor(private readonly queue: TransactionQueue) {}

  /** Inside a transaction of the queue the act is kept with it, or not at all. */
  async record({ account, action, rigId, subject, reason }: AuditAct): Promise<void> {
    await this.queue.transaction((manager) =>
      manager.insert(AuditEntry, {
        at: new Date().toISOString(),
        account,
        action,
        rigId: rigId ?? null,
        subject: subject ?? null,
        reason: reason ?? null,
      }),
    );
  }
}
