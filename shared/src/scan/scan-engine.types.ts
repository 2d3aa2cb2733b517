import type { CalibrationInForce } from '../calibrations/calibration.schema.js';
import type { EnvelopeInForce } from '../envelopes/envelope.schema.js';
import type { RunOrder } from '../live/host-message.schema.js';
import type { RigStatus, Trip } from '../live/rig-status.schema.js';
import type { Rig } from '../rigs/rig.schema.js';
import type { RunColumn } from '../runs/run-columns.js';
import type { RunEventBody, RunStatus, Verdict } from '../runs/run-event.schema.js';
import type { MoveAnswer, MoveHold } from './held-move.schema.js';
import type { Readings } from './readings.js';

/** The grid of values that an actuator's wire can carry; `step` 0 where it is continuous. */
export interface ValueGrid {
  step: number;
  origin: number;
}

export interface ScanEngineConfiguration {
  rig: Rig;
  envelope: EnvelopeInForce | null;
  /** A trip latched before this engine began: it starts in `tripped`. */
  trip: Trip | null;
  isLockedOut: boolean;
  /**
   * Grid of each actuator by channel id; missing means continuous. Looked up whenever the actuator's
   * connection comes up, so it may be filled once the wire is open.
   */
  grids: ReadonlyMap<string, ValueGrid>;
  /** Calibrations of sensors, at most one each; a sensor without one is taken as the adapter gives it. */
  calibrations?: readonly CalibrationInForce[] | undefined;
}

/** What the wire and the clock brought in one scan. */
export interface ScanInput {
  /** Monotonic time, s; any origin. */
  tS: number;
  /** Time since the scan before, s; above zero. */
  dtS: number;
  /** Wall time, ms since 1970; for records only, never for decisions. */
  atMs: number;
  /** How late this scan began after its due time, s. */
  latenessS: number;
  /** Connections that are down, with why; empty where all are up. */
  lostConnections: readonly { connection: string; code: string; message: string }[];
  /** Time since the server was last heard, s; 0 where there is no server to be heard. */
  serverSilentS: number;
}

/** Reused by every scan: copy what is to be kept. */
export interface ScanOutput {
  /** What to write, in this order, after the guard; the heartbeat last. */
  readonly writes: { channel: string; value: number }[];
  /** What the guard let through by channel index; NaN where an actuator is not written, and for the heartbeat. */
  readonly applied: Float64Array;
  /** Values of `columns` (NaN is NULL) where this scan belongs to a run, else null. */
  row: Float64Array | null;
  /** Time since the run began, s; null outside a run. */
  runTS: number | null;
  /** `runTS` is 0 outside a run: such events belong to no run (`runTS` of the output is null then). */
  readonly events: { runTS: number; atMs: number; body: RunEventBody }[];
  /** Set in the scan that ended the run (its row is the last). */
  runEnded: {
    status: RunStatus;
    verdict: Verdict;
    reason: string;
    results: Record<string, number>;
  } | null;
  /** Something of `status()` changed: tell the server now. */
  isStatusChanged: boolean;
}

/**
 * The scan without the wire: judge, decide, guard. The caller reads into `readings`, calls `scan`, writes
 * `output.writes`, records `output.row`. The same engine runs on a real and on a virtual clock.
 *
 * Commands throw a DomainError where they are not allowed now, and then change nothing.
 */
export interface ScanEngine {
  /** Where the caller puts what it read; derived channels are filled by `scan`. */
  readonly readings: Readings;
  scan(input: ScanInput): ScanOutput;
  setEnvelope(envelope: EnvelopeInForce): void;
  setLockout(isLockedOut: boolean): void;
  arm(by: string): void;
  disarm(by: string): void;
  /**
   * A manual move: ramps the actuator to `value` at its slew limit. With a hold it must be renewed within
   * `hold.forS`, else the actuator stops where it is; without one (the default) it goes on by itself.
   */
  move(channel: string, value: number, by: string, hold?: MoveHold | null): MoveAnswer;
  /** Ends a held move at once, where it is; accepted in every phase. */
  releaseMove(channel: string, holdId: string): void;
  /** @returns the columns of the run's rows, in order */
  startRun(order: RunOrder): readonly RunColumn[];
  pause(by: string, reason: string): void;
  resume(by: string): void;
  stop(by: string, reason: string): void;
  /** Accepted in every state. `atMs` as in ScanInput. */
  emergencyStop(by: string, reason: string, atMs: number): void;
  /** Latches a trip from outside the scan, e.g. `server-silent` when the link to the server closed. */
  trip(cause: string, message: string, atMs: number): void;
  reset(by: string, reason: string): void;
  /** Lets an interlock not act for `forS`, where its envelope allows that. */
  bypassInterlock(order: { interlock: string; forS: number; by: string; reason: string }): void;
  endBypass(interlock: string, by: string): void;
  /** Clears a latched interlock whose condition is false again. */
  acknowledgeInterlock(interlock: string, by: string): void;
  /** Takes an interlock's condition as true for `forS`, for its proof test. */
  forceInterlock(order: { interlock: string; forS: number; by: string }): void;
  /** True once every actuator is at rest and no run is open: the wire may be let go. */
  isAtRest(): boolean;
  /** All of the rig's status but what only the caller knows. */
  status(): Omit<RigStatus, 'connections' | 'channelFaults' | 'scan'>;
}
