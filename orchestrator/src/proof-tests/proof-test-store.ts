import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError } from '@cresthold/shared';
import { LessThan, type Repository } from 'typeorm';
import { ProofTestEntity } from './entities/proof-test.entity.js';

/** Reads proof tests; knows nothing of rig hosts. */
@Injectable()
export class ProofTestStore {
  constructor(@InjectRepository(ProofTestEntity) private readonly tests: Repository<ProofTestEntity>) {}

  /** @throws proof-test.not-found where the rig has no such test */
  async get(rigId: string, id: string): Promise<ProofTestEntity> {
    const test = await this.tests.findOneBy({ rigId, id });
    if (test === null) throw new DomainError('proof-test.not-found');
    return test;
  }

  openOf(rigId: string): Promise<ProofTestEntity | null> {
    return this.tests.findOneBy({ rigId, status: 'open' });
  }

  /** Newest first, older than the test `beforeId`. */
  list(rigId: string, beforeId: string | null, limit: number): Promise<ProofTestEntity[]> {
    const where = beforeId === null ? { rigId } : { rigId, id: LessThan(beforeId) };
    return this.tests.find({ where, order: { id: 'DESC' }, take: limit });
  }

  /** Signed tests of one interlock, newest signature first. */
  signed(rigId: string, interlock: string): Promise<ProofTestEntity[]> {
    return this.tests.find({
      where: { rigId, interlock, status: 'signed' },
      order: { signedAt: 'DESC' },
      take: 50,
    });
  }
}
