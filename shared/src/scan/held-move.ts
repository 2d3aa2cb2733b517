import { DomainError } from '../errors/domain-error.js';
import type { HeldMove, MoveAnswer, MoveHold } from './held-move.schema.js';

/** Presses that are remembered as over, so that a request that was under way cannot begin them again. */
const rememberedPresses = 32;

/** What of an actuator a held move is about. */
export interface Movable {
  readonly channel: string;
  readonly limit: { readonly min: number; readonly max: number };
  readonly guarded: { readonly applied: number };
  base: number;
  target: number;
  grip: Grip | null;
  heldTowards: number;
  readonly pressesOver: string[];
}

/** Who holds a move, and until when it goes on. */
export interface Grip {
  readonly id: string;
  readonly by: string;
  /** The first scan from here on finds it over, s. */
  untilS: number;
}

/**
 * Begins a held move or renews it. The time runs from the last scan, which is never later than the
 * renewal itself: the move is over rather too early than too late.
 *
 * @param nowS time of the last scan, s
 * @throws move.hold-ended where this press is over: released, run out, or ended by the rig
 * @throws move.held-by-another where another press holds the actuator
 */
export function grip(actuator: Movable, hold: MoveHold, by: string, nowS: number): MoveAnswer {
  if (actuator.pressesOver.includes(hold.id)) throw new DomainError('move.hold-ended');
  const { grip: held } = actuator;
  requireNotHeldByAnother(actuator, hold.id);
  const untilS = nowS + hold.forS;
  if (held) held.untilS = untilS;
  else actuator.grip = { id: hold.id, by, untilS };
  return { isRenewal: held !== null };
}

/** @throws move.held-by-another */
export function requireNotHeldByAnother({ grip: held }: Movable, id: string | null): void {
  if (held === null || held.id === id) return;
  throw new DomainError('move.held-by-another', `${held.by} holds this actuator: wait until it is released.`);
}

/** The press is over: what it moved stops where it is. Also one that never arrived cannot begin any more. */
export function release(actuator: Movable, id: string): void {
  if (actuator.grip?.id === id) stopWhereItIs(actuator);
  else rememberAsOver(actuator, id);
}

/** Ends a held move that was not renewed in time. True where it ended. */
export function endWhereNotRenewed(actuator: Movable, tS: number): boolean {
  if (actuator.grip === null || tS < actuator.grip.untilS) return false;
  stopWhereItIs(actuator);
  return true;
}

/** Forgets where a move led, because something else decides about the actuator from now on. */
export function dropMove(actuator: Movable): void {
  actuator.target = NaN;
  if (actuator.grip === null) return;
  rememberAsOver(actuator, actuator.grip.id);
  actuator.grip = null;
}

/** @returns the held moves that are going on */
export function heldMovesOf(actuators: readonly Movable[]): HeldMove[] {
  return actuators.flatMap(({ channel, grip: held, heldTowards }) =>
    held === null ? [] : [{ channel, value: heldTowards, by: held.by }],
  );
}

/** What is written from now on is what was written last: no way back, no rest of the way. */
function stopWhereItIs(actuator: Movable): void {
  const { min, max } = actuator.limit;
  dropMove(actuator);
  actuator.base = Math.min(Math.max(actuator.guarded.applied, min), max);
}

function rememberAsOver({ pressesOver }: Movable, id: string): void {
  if (pressesOver.includes(id)) return;
  pressesOver.push(id);
  if (pressesOver.length > rememberedPresses) pressesOver.shift();
}
