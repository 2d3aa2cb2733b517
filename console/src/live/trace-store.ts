import type { LiveTrace } from '@cresthold/shared';
import { FrameBatch, type RequestFrame } from './frame-batch.js';

/** Traces kept per channel: eight seconds at five a second. */
const kept = 40;

/** The last live traces of one channel; a new object for each that comes. */
export interface LiveTraces {
  /** The oldest first. */
  readonly traces: readonly LiveTrace[];
  /** Browser's clock when the newest came, ms; NaN before the first. */
  readonly receivedAtMs: number;
}

const none: LiveTraces = { traces: [], receivedAtMs: NaN };

/** The last live traces of every channel of every rig. They never enter the query cache. */
export class TraceStore {
  private readonly byChannel = new Map<string, LiveTraces>();
  private readonly batch: FrameBatch;
  readonly subscribe: FrameBatch['subscribe'];

  constructor(requestFrame: RequestFrame) {
    this.batch = new FrameBatch(requestFrame);
    this.subscribe = this.batch.subscribe;
  }

  of(rigId: string, channel: string): LiveTraces {
    return this.byChannel.get(keyOf(rigId, channel)) ?? none;
  }

  take(trace: LiveTrace, nowMs: number): void {
    const key = keyOf(trace.rigId, trace.channel);
    const { traces } = this.byChannel.get(key) ?? none;
    this.byChannel.set(key, { traces: [...traces.slice(1 - kept), trace], receivedAtMs: nowMs });
    this.batch.changed();
  }
}

const keyOf = (rigId: string, channel: string) => `${rigId} ${channel}`;
