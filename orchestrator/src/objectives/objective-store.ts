import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError } from '@cresthold/shared';
import { MoreThan, type Repository } from 'typeorm';
import type { RigCondition } from '../auth/rig-scope.js';
import { ObjectiveEntity } from './entities/objective.entity.js';

/** Reads objectives. */
@Injectable()
export class ObjectiveStore {
  constructor(@InjectRepository(ObjectiveEntity) private readonly objectives: Repository<ObjectiveEntity>) {}

  find(id: string): Promise<ObjectiveEntity | null> {
    return this.objectives.findOneBy({ id });
  }

  /** @throws objective.not-found */
  async get(id: string): Promise<ObjectiveEntity> {
    const objective = await this.find(id);
    if (objective === null) throw new DomainError('objective.not-found');
    return objective;
  }

  /** Objectives in the order of their making, after `afterId`; of the rigs that `rigId` allows. */
  list(rigId: RigCondition, afterId: string, limit: number): Promise<ObjectiveEntity[]> {
    const after = { id: MoreThan(afterId) };
    return this.objectives.find({
      where: rigId === undefined ? after : { ...after, rigId },
      order: { id: 'ASC' },
      take: limit,
    });
  }
}
