import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError } from '@cresthold/shared';
import { LessThan, MoreThan, type Repository } from 'typeorm';
import type { RigCondition } from '../auth/rig-scope.js';
import { ExperimentVersionEntity } from './entities/experiment-version.entity.js';
import { ExperimentEntity } from './entities/experiment.entity.js';

/** Reads experiments and their versions. */
@Injectable()
export class ExperimentStore {
  constructor(
    @InjectRepository(ExperimentEntity) private readonly experiments: Repository<ExperimentEntity>,
    @InjectRepository(ExperimentVersionEntity) private readonly versions: Repository<ExperimentVersionEntity>,
  ) {}

  /** @throws experiment.not-found */
  async get(id: string): Promise<ExperimentEntity> {
    const experiment = await this.experiments.findOneBy({ id });
    if (experiment === null) throw new DomainError('experiment.not-found');
    return experiment;
  }

  /** Experiments in the order of their making, after `afterId`; of the rigs that `rigId` allows. */
  list(rigId: RigCondition, afterId: string, limit: number): Promise<ExperimentEntity[]> {
    const after = { id: MoreThan(afterId) };
    return this.experiments.find({
      where: rigId === undefined ? after : { ...after, rigId },
      order: { id: 'ASC' },
      take: limit,
    });
  }

  /** @throws experiment.not-found */
  async getVersion(experimentId: string, version: number): Promise<ExperimentVersionEntity> {
    const row = await this.versions.findOneBy({ experimentId, version });
    if (row === null) throw new DomainError('experiment.not-found');
    return row;
  }

  /** Versions, newest first, before `beforeVersion`. */
  listVersions(
    experimentId: string,
    beforeVersion: number,
    limit: number,
  ): Promise<ExperimentVersionEntity[]> {
    return this.versions.find({
      where: { experimentId, version: LessThan(beforeVersion) },
      order: { version: 'DESC' },
      take: limit,
    });
  }
}
