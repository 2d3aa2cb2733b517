import type { LiveTrace } from '@cresthold/shared';
import { FrameBatch, type RequestFrame } from './frame-batch.js';

/** Traces kept per channel: eight seconds at five a second. */
const kept = 40;

/** The last live traces of one channel. They never enter the query cache. */
export class ChannelTraces {
  /** The oldest first; a new list for each that comes. */
  traces: readonly LiveTrace[] = [];
  /** Browser's clock when the newest came, ms; NaN before the first. */
  receivedAtMs = NaN;
  private readonly batch: FrameBatch;
  readonly subscribe: FrameBatch['subscribe'];

  constructor(requestFrame: RequestFrame) {
    this.batch = new FrameBatch(requestFrame);
    this.subscribe = this.batch.subscribe;
  }

  take(trace: LiveTrace, nowMs: number): void {
    this.traces = [...this.traces.slice(1 - kept), trace];
    this.receivedAtMs = nowMs;
    this.batch.changed();
  }
}

/** The last live traces of every channel of every rig that a page asked for. */
export class TraceStore {
  private readonly byChannel = new Map<string, ChannelTraces>();

  constructor(private readonly requestFrame: RequestFrame) {}

  of(rigId: string, channel: string): ChannelTraces {
    const key = `${rigId} ${channel}`;
    let traces = this.byChannel.get(key);
    if (!traces) {
      traces = new ChannelTraces(this.requestFrame);
      this.byChannel.set(key, traces);
    }
    return traces;
  }
}
