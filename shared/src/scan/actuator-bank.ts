import type { ActuatorLimit } from '../envelopes/envelope.schema.js';
import { createGuardedActuator, type GuardedActuator, takeOver, useGrid } from '../envelopes/guard.js';
import type { Rig, WiredChannel } from '../rigs/rig.schema.js';
import { dropMove, type Grip } from './held-move.js';
import type { Readings } from './readings.js';
import type { ValueGrid } from './scan-engine.types.js';

/** One actuator with an approved limit, as the scan holds it. */
export interface HeldActuator {
  readonly channel: string;
  readonly connection: string;
  readonly readingIndex: number;
  readonly limit: ActuatorLimit;
  readonly guarded: GuardedActuator;
  /** Goes into the output when it is written; reused by every scan. */
  readonly write: { channel: string; value: number };
  /** Base held, without dither, channel unit; NaN before it was taken over. */
  base: number;
  /** Goal of a manual move, channel unit; NaN where there is none. */
  target: number;
  /** Who holds the move; null where it is none that must be held. */
  grip: Grip | null;
  /** Where the held move leads, channel unit; of no meaning without a grip. */
  heldTowards: number;
  /** Names of the presses that are over, the latest last. */
  readonly pressesOver: string[];
  /** Base that is asked for in this scan, before the guard. */
  requestedBase: number;
  /** Signed dither that is asked for in this scan, before the guard. */
  requestedDither: number;
  /** Nothing asks for it in this scan: it holds its base. */
  isHolding: boolean;
  /** Sum of both, for the record; NaN where nothing was asked for. */
  requested: number;
  /** Written in this scan. */
  isWritten: boolean;
  isReachable: boolean;
  /** When its connection came up last, s. */
  reachableSinceS: number;
  /** Its present value is known: read back at arming or after its connection returned, and written since. */
  isTaken: boolean;
  /** Its part of the stop action is complete. */
  isStopped: boolean;
  /** Since when it has been written at rest by the stop action, s; NaN before. */
  atRestSinceS: number;
  /** Since when its read-back has been outside the tolerance, s; NaN while it is inside. */
  mismatchSinceS: number;
}

/** @returns the held actuators in the order of the envelope's limits */
export function createActuatorBank(
  rig: Rig,
  limits: readonly ActuatorLimit[],
  grids: ReadonlyMap<string, ValueGrid>,
  readings: Readings,
): HeldActuator[] {
  const channels = new Map(rig.channels.map((channel) => [channel.id, channel]));
  return limits.map((limit) => {
    const { connection } = channels.get(limit.channel) as WiredChannel;
    return {
      channel: limit.channel,
      connection,
      readingIndex: readings.indexOf(limit.channel),
      limit,
      guarded: createGuardedActuator(limit, grids.get(limit.channel), rig.periodMs / 1000),
      write: { channel: limit.channel, value: NaN },
      base: NaN,
      target: NaN,
      grip: null,
      heldTowards: NaN,
      pressesOver: [],
      requestedBase: NaN,
      requestedDither: 0,
      isHolding: true,
      requested: NaN,
      isWritten: false,
      isReachable: false,
      reachableSinceS: NaN,
      isTaken: false,
      isStopped: false,
      atRestSinceS: NaN,
      mismatchSinceS: NaN,
    };
  });
}

/** Takes an actuator over from its read-back. False where that is not good. */
export function takeOverFromReadBack(actuator: HeldActuator, readings: Readings): boolean {
  if (!takeOver(actuator.guarded, readings.goodValue(actuator.readingIndex))) return false;
  const { min, max } = actuator.limit;
  actuator.base = Math.min(Math.max(actuator.guarded.applied, min), max);
  actuator.target = NaN;
  actuator.isTaken = true;
  actuator.mismatchSinceS = NaN;
  return true;
}

/** Lets every actuator go: where it is from now on is not known. */
export function releaseAll(actuators: readonly HeldActuator[]): void {
  for (const actuator of actuators) {
    actuator.isTaken = false;
    actuator.base = NaN;
    dropMove(actuator);
    actuator.mismatchSinceS = NaN;
  }
}

/**
 * Marks which actuators can be reached. One whose connection was down must be taken over again, and its
 * grid is learnt anew.
 */
export function noteReachability(
  actuators: readonly HeldActuator[],
  isLost: (connection: string) => boolean,
  grids: ReadonlyMap<string, ValueGrid>,
  tS: number,
): void {
  for (const actuator of actuators) {
    const isReachable = !isLost(actuator.connection);
    if (isReachable && !actuator.isReachable) {
      actuator.reachableSinceS = tS;
      useGrid(actuator.guarded, grids.get(actuator.channel));
    }
    if (!isReachable && actuator.isReachable) {
      actuator.isTaken = false;
      actuator.mismatchSinceS = NaN;
      actuator.isStopped = false;
      actuator.atRestSinceS = NaN;
    }
    actuator.isReachable = isReachable;
  }
}

/** The value nearest to `to` that is not further than `by` from `from`. */
export function moveTowards(from: number, to: number, by: number): number {
  if (to > from + by) return from + by;
  return to < from - by ? from - by : to;
}
