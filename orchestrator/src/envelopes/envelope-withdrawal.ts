import { Injectable } from '@nestjs/common';
import { AuditService } from '../audit/audit.service.js';
import { updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { EnvelopeEntity } from './entities/envelope.entity.js';

/** Takes an envelope out of force when the rig is no longer the one that it was approved for. */
@Injectable()
export class EnvelopeWithdrawal {
  constructor(
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** Does nothing where no envelope is in force. */
  async withdraw(rigId: string, by: string, reason = 'The wiring of the rig changed.'): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const inForce = await manager.findOneBy(EnvelopeEntity, { rigId, status: 'in-force' });
      if (inForce === null) return;
      await updateRow(manager, EnvelopeEntity, { id: inForce.id }, { status: 'superseded' });
      await this.audit.record({
        account: by,
        action: 'envelope.withdrawn',
        rigId,
        subject: inForce.id,
        reason,
      });
    });
  }
}
