import { setTimeout as wait } from 'node:timers/promises';
import { Inject, Injectable, Logger, type OnApplicationShutdown, type OnModuleInit } from '@nestjs/common';
import type { Trip } from '@cresthold/shared';
import type { Subscription } from 'rxjs';
import { CONFIG } from '../config/config.module.js';
import type { Config } from '../config/config.schema.js';
import { HostFeed } from '../rig-hosts/host-feed.js';
import { RigStore } from '../rigs/rig-store.js';
import { Mailer } from './mailer.js';
import { tripMail } from './trip-mail.js';

/** Waits between attempts, ms; a trip is news for as long as somebody may still be on the way. */
const retryWaitsMs = [5_000, 30_000, 120_000];

/** Mails each new trip to the people that the configuration names. */
@Injectable()
export class TripNotifier implements OnModuleInit, OnApplicationShutdown {
  private readonly logger = new Logger(TripNotifier.name);
  private readonly ending = new AbortController();
  private subscription: Subscription | null = null;

  constructor(
    @Inject(CONFIG) private readonly config: Config,
    private readonly mailer: Mailer,
    private readonly rigs: RigStore,
    private readonly feed: HostFeed,
  ) {}

  onModuleInit(): void {
    this.subscription = this.feed.trips.subscribe(({ rigId, trip }) => void this.notify(rigId, trip));
  }

  onApplicationShutdown(): void {
    this.subscription?.unsubscribe();
    this.ending.abort();
    this.mailer.close();
  }

  /** Sends the mail, trying again for a while; never rejects, for nothing may wait for a mail server. */
  async notify(rigId: string, trip: Trip): Promise<void> {
    if (this.config.mail === null) return;
    try {
      const rig = await this.rigs.find(rigId);
      const title = rig?.content.title ?? rigId;
      await this.deliver(() => this.mailer.send(tripMail(title, rigId, trip, this.recipients())));
    } catch (error) {
      this.logger.error(`The trip of ${rigId} could not be mailed: ${String(error)}`);
    }
  }

  private recipients(): readonly string[] {
    return this.config.mail?.tripRecipients ?? [];
  }

  private async deliver(send: () => Promise<void>): Promise<void> {
    for (const waitMs of retryWaitsMs) {
      try {
        return await send();
      } catch (error) {
        this.logger.warn(`Mail failed, trying again in ${waitMs / 1000} s: ${String(error)}`);
        await wait(waitMs, undefined, { signal: this.ending.signal });
      }
    }
    await send();
  }
}
