import { Injectable } from '@nestjs/common';
import type { FromLive, LiveTrace, Telemetry } from '@cresthold/shared';
import type { LiveClient } from './live-client.js';

/** Everybody who listens, and who of them hears what. */
@Injectable()
export class LiveHub {
  private readonly clients = new Set<LiveClient>();

  add(client: LiveClient): void {
    this.clients.add(client);
  }

  remove(client: LiveClient): void {
    this.clients.delete(client);
  }

  all(): LiveClient[] {
    return [...this.clients];
  }

  /** To everybody who reaches the rig; never dropped. */
  toAll(rigId: string, message: FromLive): void {
    const text = JSON.stringify(message);
    for (const client of this.clients) if (client.mayHearOf(rigId)) client.send(text);
  }

  /** To those who subscribed to the rig; never dropped. */
  toSubscribers(rigId: string, message: FromLive): void {
    let text: string | null = null;
    for (const client of this.clients) {
      if (client.isSubscribed(rigId)) client.send((text ??= JSON.stringify(message)));
    }
  }

  /** To those who subscribed to the rig and can take it. */
  telemetry(telemetry: Telemetry): void {
    this.toThoseWithRoom(telemetry.rigId, { type: 'telemetry', telemetry });
  }

  /** Likewise: a newer trace stands for one that was dropped. */
  trace(trace: LiveTrace): void {
    this.toThoseWithRoom(trace.rigId, { type: 'trace', trace });
  }

  /** Made into text once, and only where somebody listens. */
  private toThoseWithRoom(rigId: string, message: FromLive): void {
    let text: string | null = null;
    for (const client of this.clients) {
      if (client.isSubscribed(rigId)) client.sendIfRoom((text ??= JSON.stringify(message)));
    }
  }
}
