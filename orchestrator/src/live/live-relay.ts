import { Injectable, type OnModuleDestroy, type OnModuleInit } from '@nestjs/common';
import type { Subscription } from 'rxjs';
import { RunRecords } from '../recordings/run-records.service.js';
import { HostFeed } from '../rig-hosts/host-feed.js';
import { LiveHub } from './live-hub.js';

/** Carries what rig hosts and run records tell to those who listen. */
@Injectable()
export class LiveRelay implements OnModuleInit, OnModuleDestroy {
  private readonly subscriptions: Subscription[] = [];

  constructor(
    private readonly feed: HostFeed,
    private readonly records: RunRecords,
    private readonly hub: LiveHub,
  ) {}

  onModuleInit(): void {
    const { feed, hub, records } = this;
    this.subscriptions.push(
      feed.statuses.subscribe((status) => hub.toAll(status.rigId, { type: 'rig-status', status })),
      feed.telemetry.subscribe((telemetry) => hub.telemetry(telemetry)),
      feed.traces.subscribe((trace) => hub.trace(trace)),
      feed.runEvents.subscribe(({ rigId, runId, event }) =>
        hub.toSubscribers(rigId, { type: 'run-event', runId, event }),
      ),
      records.changes.subscribe(({ runId, rigId, status, verdict }) =>
        hub.toSubscribers(rigId, { type: 'run-changed', runId, status, verdict }),
      ),
    );
  }

  onModuleDestroy(): void {
    for (const subscription of this.subscriptions) subscription.unsubscribe();
  }
}
