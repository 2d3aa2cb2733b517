import { isDeepStrictEqual } from 'node:util';
import { Injectable } from '@nestjs/common';
import { calibrationFaults, DomainError, type CalibrationInForce, type Rig } from '@cresthold/shared';
import type { EntityManager } from 'typeorm';
import { AuditService } from '../audit/audit.service.js';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { refuseFaults } from '../documents/prefix-faults.js';
import { EnvelopeWithdrawal } from '../envelopes/envelope-withdrawal.js';
import { newId } from '../ids/new-id.js';
import { afterKey, toPage, type Page } from '../paging/page.js';
import { RigHostsPort } from '../rigs/rig-hosts.port.js';
import { requireResting } from '../rigs/rig-phase.js';
import { RigStore } from '../rigs/rig-store.js';
import { CalibrationStore } from './calibration-store.js';
import { dueStateOf } from './due-state.js';
import type {
  Calibration,
  CalibrationQuery,
  CertificateFile,
  NewCalibration,
} from './dto/calibration.dto.js';
import { CalibrationEntity } from './entities/calibration.entity.js';

@Injectable()
export class CalibrationsService {
  constructor(
    private readonly store: CalibrationStore,
    private readonly rigs: RigStore,
    private readonly hosts: RigHostsPort,
    private readonly envelopes: EnvelopeWithdrawal,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /** @throws rig.not-found */
  async list(rigId: string, query: CalibrationQuery): Promise<Page<Calibration>> {
    await this.rigs.get(rigId);
    const rows = await this.store.list(rigId, query, afterKey(query));
    const files = await this.store.certificateFiles(rows.map(({ id }) => id));
    return toPage(
      rows,
      query.limit,
      ({ id }) => id,
      (row) => toDocument(row, files),
    );
  }

  /** @throws calibration.not-found */
  async get(id: string): Promise<Calibration> {
    const row = await this.store.get(id);
    return toDocument(row, await this.store.certificateFiles([id]));
  }

  /**
   * Puts a calibration in force and supersedes the one before. Where it converts otherwise than before, limits
   * and interlocks were approved for other values: the envelope in force is withdrawn, as after new wiring.
   *
   * @throws rig.not-found
   * @throws request.invalid where the rig has no such sensor, or none for the cold junction
   * @throws rig.busy unless idle, offline or tripped
   */
  async create(rigId: string, { channel, content }: NewCalibration, by: string): Promise<Calibration> {
    const row = await this.queue.transaction(async (manager) => {
      const { content: rig } = await this.rigs.get(rigId);
      const others = (await this.store.inForce(rigId)).filter((other) => other.channel !== channel);
      refuseUnfit({ channel, ...content }, others, rig);
      requireResting(this.hosts, rigId, 'put the calibration in force');
      const before = await manager.findOneBy(CalibrationEntity, { rigId, channel, status: 'in-force' });
      if (before) await end(manager, before.id, 'superseded');
      const made: CalibrationEntity = {
        id: newId(),
        rigId,
        channel,
        version: (await manager.countBy(CalibrationEntity, { rigId, channel })) + 1,
        status: 'in-force',
        author: by,
        createdAt: new Date().toISOString(),
        endedAt: null,
        content,
      };
      await insertRow(manager, CalibrationEntity, made);
      await this.keepAct('calibration.put-in-force', made, by, `version ${made.version} of ${channel}`);
      if (!isDeepStrictEqual(before?.content.conversion, content.conversion)) {
        await this.envelopes.withdraw(rigId, by, `The calibration of "${channel}" changed.`);
      }
      return made;
    });
    await this.hosts.reconfigure(rigId);
    return toDocument(row, new Map());
  }

  /**
   * Takes a calibration out of force; the sensor is then taken as its adapter gives it.
   *
   * @throws calibration.not-found
   * @throws calibration.not-in-force
   * @throws request.invalid where a thermocouple needs this sensor for its cold junction
   * @throws rig.busy unless idle, offline or tripped
   */
  async withdraw(id: string, reason: string, by: string): Promise<Calibration> {
    const rigId = await this.queue.transaction(async (manager) => {
      const row = await this.store.get(id);
      if (row.status !== 'in-force') throw new DomainError('calibration.not-in-force');
      requireResting(this.hosts, row.rigId, 'withdraw the calibration');
      await end(manager, id, 'withdrawn');
      await this.keepAct('calibration.withdrawn', row, by, reason);
      await this.envelopes.withdraw(row.rigId, by, `The calibration of "${row.channel}" was withdrawn.`);
      return row.rigId;
    });
    await this.hosts.reconfigure(rigId);
    return this.get(id);
  }

  private async keepAct(action: string, row: CalibrationEntity, by: string, reason: string): Promise<void> {
    await this.audit.record({ account: by, action, rigId: row.rigId, subject: row.id, reason });
  }
}

async function end(manager: EntityManager, id: string, status: 'superseded' | 'withdrawn'): Promise<void> {
  await updateRow(manager, CalibrationEntity, { id }, { status, endedAt: new Date().toISOString() });
}

/** Judged together with the others in force: a cold junction may be calibrated itself. */
function refuseUnfit(
  made: Pick<CalibrationInForce, 'channel' | 'conversion'>,
  others: readonly CalibrationInForce[],
  rig: Rig,
): void {
  const own = 'calibrations[0].';
  const faults = calibrationFaults([made, ...others], rig).map(({ field, message }) => ({
    field: field.startsWith(own)
      ? field.slice(own.length).replace('conversion', 'content.conversion')
      : 'channel',
    message,
  }));
  refuseFaults(faults);
}

function toDocument(
  { content, ...row }: CalibrationEntity,
  files: ReadonlyMap<string, CertificateFile>,
): Calibration {
  const { id, rigId, channel, version, status, author, createdAt, endedAt } = row;
  return {
    ...{ id, rigId, channel, version, status, author, createdAt, endedAt, content },
    certificateFile: files.get(id) ?? null,
    dueState: dueStateOf(content.dueOn, Date.now()),
  };
}
