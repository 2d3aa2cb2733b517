import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError, type Rig, type Trip } from '@cresthold/shared';
import { And, In, MoreThan, type Repository } from 'typeorm';
import type { RigScope } from '../auth/rig-scope.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { RigLockoutEntity } from './entities/rig-lockout.entity.js';
import { RigStateEntity } from './entities/rig-state.entity.js';
import { RigEntity } from './entities/rig.entity.js';

/** A rig's latched trip and whether anybody holds it, which survive every restart. */
export interface RigState {
  trip: Trip | null;
  isLockedOut: boolean;
}

/** Reads rigs, and keeps their state; knows nothing of rig hosts. */
@Injectable()
export class RigStore {
  constructor(
    @InjectRepository(RigEntity) private readonly rigs: Repository<RigEntity>,
    @InjectRepository(RigStateEntity) private readonly states: Repository<RigStateEntity>,
    @InjectRepository(RigLockoutEntity) private readonly lockouts: Repository<RigLockoutEntity>,
    private readonly queue: TransactionQueue,
  ) {}

  find(rigId: string): Promise<RigEntity | null> {
    return this.rigs.findOneBy({ id: rigId });
  }

  /** @throws rig.not-found */
  async get(rigId: string): Promise<RigEntity> {
    const rig = await this.find(rigId);
    if (rig === null) throw new DomainError('rig.not-found', `There is no rig "${rigId}".`);
    return rig;
  }

  /** Rigs in the order of their ids, after `afterId`; of those that are `visible`. */
  list(afterId: string, limit: number, visible: RigScope = null): Promise<RigEntity[]> {
    const after = MoreThan(afterId);
    const id = visible === null ? after : And(after, In([...visible]));
    return this.rigs.find({ where: { id }, order: { id: 'ASC' }, take: limit });
  }

  /** The content of every rig, for whoever starts the hosts. */
  async all(): Promise<Rig[]> {
    return (await this.rigs.find({ order: { id: 'ASC' } })).map((rig) => rig.content);
  }

  async state(rigId: string): Promise<RigState> {
    const state = await this.states.findOneBy({ rigId });
    return { trip: state?.trip ?? null, isLockedOut: await this.lockouts.existsBy({ rigId }) };
  }

  /** Stores a latched trip, or that it was reset. Resolves when it is on disk. */
  async saveTrip(rigId: string, trip: Trip | null): Promise<void> {
    await this.queue.transaction((manager) => manager.upsert(RigStateEntity, { rigId, trip }, ['rigId']));
  }
}
