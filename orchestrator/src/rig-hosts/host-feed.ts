import { Injectable } from '@nestjs/common';
import type {
  FromHost,
  InterlockResponse,
  LiveTrace,
  RigStatus,
  RunEvent,
  Telemetry,
  Trip,
} from '@cresthold/shared';
import { Subject } from 'rxjs';

export type RunEnding = Extract<FromHost, { type: 'run-ended' }>;

/** What comes up from all rig hosts, for whoever wants to hear it. */
@Injectable()
export class HostFeed {
  readonly statuses = new Subject<RigStatus>();
  readonly telemetry = new Subject<Telemetry>();
  readonly traces = new Subject<LiveTrace>();
  readonly runEvents = new Subject<{ rigId: string; runId: string; event: RunEvent }>();
  /** How quickly interlocks acted. */
  readonly interlockResponses = new Subject<{ rigId: string; response: InterlockResponse }>();
  /** A trip that had not been latched before. */
  readonly trips = new Subject<{ rigId: string; trip: Trip }>();
}
