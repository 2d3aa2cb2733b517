import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError, type CalibrationInForce } from '@cresthold/shared';
import { In, LessThan, type Repository } from 'typeorm';
import type { CalibrationQuery, CertificateFile } from './dto/calibration.dto.js';
import { CalibrationCertificateEntity } from './entities/calibration-certificate.entity.js';
import { CalibrationEntity } from './entities/calibration.entity.js';

/** Reads calibrations; knows nothing of rig hosts. */
@Injectable()
export class CalibrationStore {
  constructor(
    @InjectRepository(CalibrationEntity) private readonly calibrations: Repository<CalibrationEntity>,
    @InjectRepository(CalibrationCertificateEntity)
    private readonly certificates: Repository<CalibrationCertificateEntity>,
  ) {}

  /** @throws calibration.not-found */
  async get(id: string): Promise<CalibrationEntity> {
    const calibration = await this.calibrations.findOneBy({ id });
    if (calibration === null) throw new DomainError('calibration.not-found');
    return calibration;
  }

  /** What holds for the sensors of a rig now, in the order of their ids. */
  async inForce(rigId: string): Promise<CalibrationInForce[]> {
    const rows = await this.calibrations.find({
      where: { rigId, status: 'in-force' },
      order: { channel: 'ASC' },
    });
    return rows.map(({ id, channel, version, content }) => ({ id, channel, version, ...content }));
  }

  /** Calibrations of a rig, newest first, before `beforeKey`. */
  list(rigId: string, query: CalibrationQuery, beforeKey: string | null): Promise<CalibrationEntity[]> {
    const { channel, status, limit } = query;
    return this.calibrations.find({
      where: {
        rigId,
        ...(channel === undefined ? {} : { channel }),
        ...(status === undefined ? {} : { status }),
        ...(beforeKey === null ? {} : { id: LessThan(beforeKey) }),
      },
      order: { id: 'DESC' },
      take: limit + 1,
    });
  }

  /** What is known of the certificates of some calibrations, without their data. */
  async certificateFiles(ids: readonly string[]): Promise<ReadonlyMap<string, CertificateFile>> {
    const rows = await this.certificates.find({
      where: { calibrationId: In([...ids]) },
      select: { calibrationId: true, mediaType: true, sha256: true, bytes: true },
    });
    return new Map(
      rows.map(({ calibrationId, mediaType, sha256, bytes }) => [
        calibrationId,
        { mediaType, sha256, bytes },
      ]),
    );
  }

  /** @throws calibration.no-certificate */
  async certificate(id: string): Promise<CalibrationCertificateEntity> {
    const certificate = await this.certificates.findOneBy({ calibrationId: id });
    if (certificate === null) throw new DomainError('calibration.no-certificate');
    return certificate;
  }
}
