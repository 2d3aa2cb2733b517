import { createHash } from 'node:crypto';
import { Injectable } from '@nestjs/common';
import { DomainError } from '@cresthold/shared';
import { AuditService } from '../audit/audit.service.js';
import { insertRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { CalibrationStore } from './calibration-store.js';
import type { CertificateFile } from './dto/calibration.dto.js';
import { CalibrationCertificateEntity } from './entities/calibration-certificate.entity.js';

/** First bytes of each kind of file that is taken. */
const signatures: Readonly<Record<string, Buffer>> = {
  'application/pdf': Buffer.from('%PDF-'),
  'image/png': Buffer.from([0x89, 0x50, 0x4e, 0x47]),
  'image/jpeg': Buffer.from([0xff, 0xd8, 0xff]),
};
export const certificateTypes = Object.keys(signatures);
export const certificateBytesMax = 5 * 1024 * 1024;

/** Keeps the certificates of calibrations. One that is there stays: it is part of the record. */
@Injectable()
export class CertificatesService {
  constructor(
    private readonly store: CalibrationStore,
    private readonly queue: TransactionQueue,
    private readonly audit: AuditService,
  ) {}

  /**
   * @throws calibration.not-found
   * @throws request.invalid where the file is empty or not what its type says
   * @throws calibration.has-certificate
   */
  async put(id: string, mediaType: string, data: Buffer, by: string): Promise<CertificateFile> {
    const calibration = await this.store.get(id);
    requireKind(mediaType, data);
    const file = {
      mediaType,
      sha256: createHash('sha256').update(data).digest('hex'),
      bytes: data.length,
    };
    await this.queue.transaction(async (manager) => {
      if (await manager.existsBy(CalibrationCertificateEntity, { calibrationId: id })) {
        throw new DomainError('calibration.has-certificate');
      }
      await insertRow(manager, CalibrationCertificateEntity, { calibrationId: id, ...file, data });
      const { rigId } = calibration;
      const act = { account: by, action: 'calibration.certified', rigId, subject: id };
      await this.audit.record({ ...act, reason: `SHA-256 ${file.sha256}` });
    });
    return file;
  }

  /** @throws calibration.not-found, calibration.no-certificate */
  async get(id: string): Promise<CalibrationCertificateEntity> {
    await this.store.get(id);
    return this.store.certificate(id);
  }
}

function requireKind(mediaType: string, data: Buffer): void {
  const signature = signatures[mediaType];
  const isKind = signature !== undefined && data.subarray(0, signature.length).equals(signature);
  if (isKind) return;
  const message = `Send a file of one of these types, with that Content-Type: ${certificateTypes.join(', ')}.`;
  throw new DomainError('request.invalid', undefined, [{ field: 'body', message }]);
}
