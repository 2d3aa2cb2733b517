import { Injectable } from '@nestjs/common';
import { InjectRepository } from '@nestjs/typeorm';
import { DomainError, type StopTrajectory, type Trip } from '@cresthold/shared';
import { IsNull, LessThan, Not, type EntityManager, type Repository } from 'typeorm';
import { insertRow, updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { newId } from '../ids/new-id.js';
import { RigTripEntity } from './entities/rig-trip.entity.js';

export interface TripReset {
  by: string;
  reason: string;
}

/** Trajectories that are kept of one rig; of older trips the rest stays. */
const trajectoriesKept = 100;

/** Every trip that was ever latched, from its first cause to its reset. */
@Injectable()
export class TripHistory {
  constructor(
    @InjectRepository(RigTripEntity) private readonly trips: Repository<RigTripEntity>,
    private readonly queue: TransactionQueue,
  ) {}

  /** Keeps a latched trip: a new one, or what followed or was learnt of the one that is latched. */
  async follow(rigId: string, trip: Trip): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const open = await openTrip(manager, rigId);
      if (open) await updateRow(manager, RigTripEntity, { id: open.id }, { trip, at: trip.at });
      else await insertRow(manager, RigTripEntity, newTrip(rigId, trip));
    });
  }

  /** The trip was reset. One that was latched before trips were kept is kept now. */
  async close(rigId: string, trip: Trip, { by, reason }: TripReset): Promise<void> {
    await this.queue.transaction(async (manager) => {
      await this.follow(rigId, trip);
      const reset = { resetAt: new Date().toISOString(), resetBy: by, resetReason: reason };
      await updateRow(manager, RigTripEntity, { rigId, resetAt: IsNull() }, reset);
    });
  }

  /** Keeps how the rig came to rest; trajectories of long ago give way. */
  async keepTrajectory(
    rigId: string,
    { cause, at }: Pick<Trip, 'cause' | 'at'>,
    trajectory: StopTrajectory,
  ): Promise<void> {
    await this.queue.transaction(async (manager) => {
      const rows = await manager.find(RigTripEntity, { where: { rigId, at }, order: { id: 'DESC' } });
      const row = rows.find(({ trip }) => trip.cause === cause) ?? (await openTrip(manager, rigId));
      if (!row) return;
      const { timesToRest } = trajectory;
      await updateRow(manager, RigTripEntity, { id: row.id }, { timesToRest, trajectory });
      const [oldest] = await manager.find(RigTripEntity, {
        where: { rigId, trajectory: Not(IsNull()) },
        order: { id: 'DESC' },
        skip: trajectoriesKept,
        take: 1,
      });
      if (oldest) await updateRow(manager, RigTripEntity, { id: oldest.id }, { trajectory: null });
    });
  }

  /** Trips of a rig, newest first, before `beforeId`; without their trajectories. */
  list(rigId: string, limit: number, beforeId: string | null): Promise<RigTripEntity[]> {
    const before = beforeId === null ? {} : { id: LessThan(beforeId) };
    return this.trips.find({ where: { rigId, ...before }, order: { id: 'DESC' }, take: limit });
  }

  /**
   * One trip with its trajectory.
   *
   * @throws trip.not-found
   */
  async get(rigId: string, id: string): Promise<RigTripEntity> {
    const row = await this.trips
      .createQueryBuilder('trip')
      .addSelect('trip.trajectory')
      .where({ rigId, id })
      .getOne();
    if (row === null) throw new DomainError('trip.not-found');
    return row;
  }
}

async function openTrip(manager: EntityManager, rigId: string): Promise<RigTripEntity | null> {
  return manager.findOne(RigTripEntity, { where: { rigId, resetAt: IsNull() }, order: { id: 'DESC' } });
}

function newTrip(rigId: string, trip: Trip): RigTripEntity {
  return {
    id: newId(),
    rigId,
    at: trip.at,
    trip,
    resetAt: null,
    resetBy: null,
    resetReason: null,
    timesToRest: null,
    trajectory: null,
  };
}
