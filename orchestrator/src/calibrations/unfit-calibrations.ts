import { isDeepStrictEqual } from 'node:util';
import { Injectable } from '@nestjs/common';
import { calibrationFaults, type Rig } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { CalibrationStore } from './calibration-store.js';
import { CalibrationEntity } from './entities/calibration.entity.js';

/** Takes calibrations out of force whose sensor is no longer the one that was calibrated. */
@Injectable()
export class UnfitCalibrations {
  constructor(
    private readonly store: CalibrationStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** Withdraws those of sensors that are gone, or wired to another place, or that lost their cold junction. */
  async withdraw(before: Rig, after: Rig, by: string): Promise<void> {
    await this.queue.transaction(async (manager) => {
      let kept = await this.store.inForce(before.id);
      const isUnfit = (channel: string) =>
        !isDeepStrictEqual(wiringOf(before, channel), wiringOf(after, channel));
      const unfit = kept.filter(({ channel }) => isUnfit(channel));
      kept = kept.filter(({ channel }) => !isUnfit(channel));
      unfit.push(...kept.filter((calibration) => calibrationFaults([calibration], after).length > 0));
      const endedAt = new Date().toISOString();
      for (const { id, channel } of unfit) {
        await updateRow(manager, CalibrationEntity, { id }, { status: 'withdrawn', endedAt });
        const act = { account: by, action: 'calibration.withdrawn', rigId: before.id, subject: id };
        await this.audit.record({ ...act, reason: `The wiring of "${channel}" changed.` });
      }
    });
  }
}

function wiringOf(rig: Rig, id: string): unknown {
  const channel = rig.channels.find((candidate) => candidate.id === id);
  if (channel?.kind !== 'sensor') return null;
  return { connection: channel.connection, address: channel.address, unit: channel.unit };
}
