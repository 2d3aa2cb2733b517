import {
  decimateTrace,
  livePointsMax,
  type Readings,
  type Rig,
  type ScanInput,
  type ScanOutput,
} from '@cresthold/shared';
import type { Link } from './publisher.js';
import type { ScanSink } from './scan-loop.js';

/** Time between two traces of a channel, s: five a second. */
const traceEveryS = 0.2;

/** Sends the newest trace of each channel to screens: thinned, five times a second at most, dropped rather than queued. */
export class TracePublisher implements ScanSink {
  private readonly indices: readonly number[];
  private lastS = -Infinity;
  private runId: string | null = null;

  constructor(
    private readonly rig: Rig,
    private readonly readings: Readings,
    private readonly link: Link,
  ) {
    this.indices = rig.channels.flatMap(({ kind }, index) => (kind === 'trace' ? [index] : []));
  }

  useRun(runId: string | null): void {
    this.runId = runId;
  }

  /** @realtime but for the traces that are sent */
  onScan({ tS, atMs }: ScanInput, { runTS }: ScanOutput): void {
    if (this.indices.length === 0 || tS - this.lastS < traceEveryS) return;
    this.lastS = tS;
    for (const index of this.indices) this.send(index, atMs, this.runId === null ? null : runTS);
  }

  private send(index: number, atMs: number, tS: number | null): void {
    const trace = this.readings.goodTrace(index);
    if (trace === null) return;
    const { points, places } = decimateTrace(trace.points, livePointsMax);
    const message = {
      rigId: this.rig.id,
      runId: this.runId,
      channel: this.readings.channelIds[index] ?? '',
      atMs,
      tS,
      count: trace.points.length,
      points: points.map(inSinglePrecision),
      places,
    };
    this.link.sendDroppable({ type: 'trace', trace: message });
  }
}

/** In the nine digits that tell any number of single precision, not in the seventeen of a double. */
const inSinglePrecision = (point: number) => Number(point.toPrecision(9));
