import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError, type EnvelopeInForce } from '@cresthold/shared';
import { LessThan, type Repository } from 'typeorm';
import { EnvelopeEntity } from './entities/envelope.entity.js';

/** Reads envelopes; knows nothing of rig hosts. */
@Injectable()
export class EnvelopeStore {
  constructor(@InjectRepository(EnvelopeEntity) private readonly envelopes: Repository<EnvelopeEntity>) {}

  /** @throws envelope.not-found */
  async get(id: string): Promise<EnvelopeEntity> {
    const envelope = await this.envelopes.findOneBy({ id });
    if (envelope === null) throw new DomainError('envelope.not-found');
    return envelope;
  }

  /** The approved envelope that holds for a rig now; null where there is none. */
  async inForce(rigId: string): Promise<EnvelopeInForce | null> {
    const row = await this.envelopes.findOneBy({ rigId, status: 'in-force' });
    return row === null ? null : { id: row.id, version: row.version, content: row.content };
  }

  /** Versions of a rig, newest first, before `beforeVersion`. */
  list(rigId: string, beforeVersion: number, limit: number): Promise<EnvelopeEntity[]> {
    return this.envelopes.find({
      where: { rigId, version: LessThan(beforeVersion) },
      order: { version: 'DESC' },
      take: limit,
    });
  }
}
