import { Injectable, Logger, type OnModuleDestroy, type OnModuleInit } from '@nestjs/common';
import type { InterlockResponse } from '@cresthold/shared';
import type { Subscription } from 'rxjs';
import { updateRow } from '../database/rows.js';
import { TransactionQueue } from '../database/transaction-queue.js';
import { HostFeed } from '../rig-hosts/host-feed.js';
import { ProofTestEntity } from './entities/proof-test.entity.js';

/** What acts this long after a test was begun has nothing to do with it, ms. */
const openAtMostMs = 3_600_000;

/** Puts what rig hosts measure into the open proof test that waits for it. */
@Injectable()
export class ProofTestResponses implements OnModuleInit, OnModuleDestroy {
  private readonly logger = new Logger('ProofTests');
  private subscription: Subscription | null = null;

  constructor(
    private readonly feed: HostFeed,
    private readonly queue: TransactionQueue,
  ) {}

  onModuleInit(): void {
    this.subscription = this.feed.interlockResponses.subscribe(({ rigId, response }) => {
      this.take(rigId, response).catch((error: unknown) => this.logger.error(error));
    });
  }

  onModuleDestroy(): void {
    this.subscription?.unsubscribe();
  }

  /** The first response counts; a forced one is none of a test that was to be made real, nor the other way round. */
  private take(rigId: string, response: InterlockResponse): Promise<void> {
    const { interlock, atMs, responseMs, writes, isForced } = response;
    return this.queue.transaction(async (manager) => {
      const test = await manager.findOneBy(ProofTestEntity, { rigId, interlock, status: 'open' });
      if (test === null || test.responseMs !== null) return;
      if (isForced !== (test.method === 'forced')) return;
      if (atMs - Date.parse(test.startedAt) > openAtMostMs) return;
      const measured = { responseMs, writes, conditionAt: new Date(atMs).toISOString() };
      await updateRow(manager, ProofTestEntity, { id: test.id }, measured);
    });
  }
}
