import type { ErrorCode } from '../errors/error-catalogue.js';
import type { RigPhase, Trip } from '../live/rig-status.schema.js';
import { rigMoves, type RigEventType, type RigMoves } from './rig-moves.js';

/** Where a rig is, with what stands beside its phase. Never changed in place. */
export interface RigState {
  readonly phase: RigPhase;
  readonly isWireUp: boolean;
  readonly isLockedOut: boolean;
  /** The latch: set exactly while the phase is `tripped`. */
  readonly trip: Readonly<Trip> | null;
}

/** A cause of a trip, as it is noted. */
export interface TripNote {
  cause: string;
  message: string;
  /** Wall time, ISO 8601. */
  at: string;
  /** Who pressed, for an emergency stop. */
  by: string | null;
}

/** What arming asks about beside what the state knows itself. */
export interface ArmingConditions {
  isEnvelopeInForce: boolean;
  areSensorsFresh: boolean;
  areInterlocksClear: boolean;
  /** Whatever else forbids arming, e.g. an actuator that cannot be read back. */
  hasOtherObstacle: boolean;
}

export type RigEvent =
  | { type: Exclude<RigEventType, 'arm' | 'reset' | 'trip' | 'emergency-stop' | 'wire-lost'> }
  | ({ type: 'arm' } & ArmingConditions)
  | { type: 'reset'; isCausePresent: boolean; hasReason: boolean }
  | { type: 'trip' | 'emergency-stop' | 'wire-lost'; note: TripNote };

/** Why an event was refused: the code of a DomainError. The state has not changed. */
export interface RigRefusal {
  refusal: ErrorCode;
}

const laterAtMost = 50;

export function isRefusal(outcome: RigState | RigRefusal): outcome is RigRefusal {
  return 'refusal' in outcome;
}

/** The state before the first scan: nothing is known of the wire. A trip latched before is kept. */
export function initialRigState(trip: Trip | null, isLockedOut: boolean): RigState {
  return { phase: trip ? 'tripped' : 'offline', isWireUp: false, isLockedOut, trip };
}

/**
 * The only way from one rig state to another: pure, total, and laid down as data in `rigMoves`.
 *
 * @param moves the table; another one only in tests that show that a wrong table is found out
 * @returns the next state, or why the event was refused
 */
export function transition(
  state: RigState,
  event: RigEvent,
  moves: RigMoves = rigMoves,
): RigState | RigRefusal {
  const move = moves[state.phase][event.type];
  if ('refuse' in move) return { refusal: move.refuse };
  const refusal = conditionRefusal(state, event, move.when);
  if (refusal) return { refusal };
  const beside = besideAfter(state, event);
  const to = move.to === 'idle' && move.orOffline && !beside.isWireUp ? 'offline' : move.to;
  return { phase: to, ...beside, trip: tripAfter(state, event, to) };
}

function conditionRefusal(
  state: RigState,
  event: RigEvent,
  when: 'may-arm' | 'may-reset' | undefined,
): ErrorCode | null {
  if (when === 'may-arm') return armingRefusal(state, event);
  return when === 'may-reset' ? resetRefusal(event) : null;
}

function armingRefusal(state: RigState, event: RigEvent): ErrorCode | null {
  if (event.type !== 'arm') return null;
  const isReady =
    event.isEnvelopeInForce &&
    !state.isLockedOut &&
    state.isWireUp &&
    event.areSensorsFresh &&
    event.areInterlocksClear &&
    !event.hasOtherObstacle;
  return isReady ? null : 'rig.cannot-arm';
}

function resetRefusal(event: RigEvent): ErrorCode | null {
  if (event.type !== 'reset') return null;
  if (!event.hasReason) return 'request.invalid';
  return event.isCausePresent ? 'rig.cause-present' : null;
}

function besideAfter(state: RigState, event: RigEvent): Pick<RigState, 'isWireUp' | 'isLockedOut'> {
  return {
    isWireUp: event.type === 'wire-restored' || (event.type !== 'wire-lost' && state.isWireUp),
    isLockedOut: event.type === 'lock-out' || (event.type !== 'lift-lockout' && state.isLockedOut),
  };
}

/** First-out: the first cause stays; each further cause is listed once, in the order of coming. */
function tripAfter(state: RigState, event: RigEvent, to: RigPhase): Readonly<Trip> | null {
  if (to !== 'tripped') return null;
  if (!('note' in event)) return state.trip;
  const { cause, message, at, by } = event.note;
  const { trip } = state;
  if (!trip) return { cause, message, at, by, later: [] };
  const isKnown = trip.cause === cause || trip.later.some((later) => later.cause === cause);
  if (isKnown || trip.later.length >= laterAtMost) return trip;
  return { ...trip, later: [...trip.later, { cause, at }] };
}
