import type { FromLive, RunEvent } from '@cresthold/shared';
import { FrameBatch, type RequestFrame } from './frame-batch.js';
import { LiveClient, type LinkState, type LiveClientOptions } from './live-client.js';
import { SampleStore } from './sample-store.js';
import { StatusStore } from './status-store.js';
import { TraceStore } from './trace-store.js';

export type RunChange = Extract<FromLive, { type: 'run-changed' }>;

export interface RunListener {
  onEvent?: (runId: string, event: RunEvent) => void;
  onChanged?: (change: RunChange) => void;
}

export type LiveHubOptions = Pick<LiveClientOptions, 'connect' | 'after' | 'random'> & {
  requestFrame: RequestFrame;
  nowMs: () => number;
};

/** How long the samples of a rig still come after the last page that shows them was left, ms. */
const lingerMs = 300_000;

/** All live data of the console in one place: the link, rig states, samples and run events. */
export class LiveHub {
  readonly statuses: StatusStore;
  readonly samples: SampleStore;
  readonly traces: TraceStore;
  private readonly client: LiveClient;
  private readonly linkBatch: FrameBatch;
  private readonly runListeners = new Set<RunListener>();
  private link: LinkState = 'idle';

  constructor(private readonly options: LiveHubOptions) {
    this.statuses = new StatusStore(options.requestFrame);
    this.samples = new SampleStore(options.requestFrame);
    this.traces = new TraceStore(options.requestFrame);
    this.linkBatch = new FrameBatch(options.requestFrame);
    this.client = new LiveClient({
      ...options,
      onMessage: (message) => this.receive(message),
      onState: (state) => {
        this.link = state;
        this.linkBatch.changed();
      },
    });
  }

  start(): void {
    this.client.start();
  }

  stop(): void {
    this.client.stop();
  }

  readonly linkState = (): LinkState => this.link;

  readonly subscribeLink = (listener: () => void): (() => void) => this.linkBatch.subscribe(listener);

  /** Asks for a rig's samples while somebody looks, and for a while after, so that going to and fro leaves no gap. */
  watchRig(rigId: string): () => void {
    const leave = this.client.subscribe(rigId);
    return () => void this.options.after(lingerMs, leave);
  }

  /** Events and status changes of all runs of watched rigs, in order, unbatched. */
  watchRuns(listener: RunListener): () => void {
    this.runListeners.add(listener);
    return () => this.runListeners.delete(listener);
  }

  private receive(message: FromLive): void {
    switch (message.type) {
      case 'rig-status':
        return this.statuses.take(message.status);
      case 'telemetry':
        return this.samples.of(message.telemetry.rigId).take(message.telemetry, this.options.nowMs());
      case 'trace':
        return this.traces
          .of(message.trace.rigId, message.trace.channel)
          .take(message.trace, this.options.nowMs());
      case 'run-event':
        return this.runListeners.forEach((listener) => listener.onEvent?.(message.runId, message.event));
      case 'run-changed':
        return this.runListeners.forEach((listener) => listener.onChanged?.(message));
      case 'error':
        return console.warn(`The live feed refused a request: ${message.message}`);
    }
  }
}
