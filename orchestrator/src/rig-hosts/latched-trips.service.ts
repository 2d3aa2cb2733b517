import { isDeepStrictEqual } from 'node:util';
import { Injectable } from '@nestjs/common';
import type { StopTrajectory, Trip } from '@cresthold/shared';
import { TransactionQueue } from '../database/transaction-queue.js';
import { RigStore } from '../rigs/rig-store.js';
import type { TripReset } from '../trips/trip-history.js';
import { TripHistory } from '../trips/trip-history.js';
import { HostFeed } from './host-feed.js';

/** Kept with a trip of what followed it; as much as the trip's own schema allows. */
const laterMax = 50;

/** The trips of all rigs on disk: a trip outlives its host and the server, until a person resets it. */
@Injectable()
export class LatchedTrips {
  constructor(
    private readonly rigs: RigStore,
    private readonly history: TripHistory,
    private readonly queue: TransactionQueue,
    private readonly feed: HostFeed,
  ) {}

  /** Latches a trip of the server's own; where one is latched already, it becomes what followed. */
  async latch(rigId: string, trip: Trip): Promise<void> {
    await this.change(rigId, (latched) => {
      if (!latched) return trip;
      const later = [...latched.later, { cause: trip.cause, at: trip.at }];
      return { ...latched, later: later.slice(0, laterMax) };
    });
  }

  /** Latches a trip where none is latched yet. */
  async latchFirst(rigId: string, trip: Trip): Promise<void> {
    await this.change(rigId, (latched) => latched ?? trip);
  }

  /** Takes over a trip as the host, who saw it happen, tells it. */
  async follow(rigId: string, trip: Trip): Promise<void> {
    await this.change(rigId, () => trip);
  }

  /** Clears the trip that was reset; one that came after the reset stays. */
  async clear(rigId: string, trip: Trip, reset: TripReset): Promise<void> {
    const isSame = (latched: Trip | null) => latched?.cause === trip.cause && latched.at === trip.at;
    await this.change(rigId, (latched) => (isSame(latched) ? null : latched), reset);
  }

  /** Keeps how the rig came to rest after a trip, as its host saw it. */
  async keepTrajectory(
    rigId: string,
    trip: Pick<Trip, 'cause' | 'at'>,
    trajectory: StopTrajectory,
  ): Promise<void> {
    await this.history.keepTrajectory(rigId, trip, trajectory);
  }

  private async change(
    rigId: string,
    decide: (latched: Trip | null) => Trip | null,
    reset?: TripReset,
  ): Promise<void> {
    const news = await this.queue.transaction(async () => {
      const before = (await this.rigs.state(rigId)).trip;
      const after = decide(before);
      if (isDeepStrictEqual(before, after)) return null;
      await this.rigs.saveTrip(rigId, after);
      if (after) await this.history.follow(rigId, after);
      else if (before && reset) await this.history.close(rigId, before, reset);
      return before ? null : after;
    });
    if (news) this.feed.trips.next({ rigId, trip: news });
  }
}
