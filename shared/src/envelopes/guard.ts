import type { ValueGrid } from '../scan/scan-engine.types.js';
import type { ActuatorLimit } from './envelope.schema.js';

/** Why the guard changed or refused a request, in the order in which the rules are applied. */
export const guardRules = ['non-finite', 'range', 'dither', 'slew'] as const;
export type GuardRule = (typeof guardRules)[number];

const ruleBit: Record<GuardRule, number> = { 'non-finite': 1, range: 2, dither: 4, slew: 8 };

/**
 * The slew limit counts at most this many nominal periods of a scan: after a gap (a late scan, a
 * debugger, a sleeping machine) the actuator goes on at its rate and never makes up the lost time.
 */
export const slewPeriodsAtMost = 2;

const continuous: Readonly<ValueGrid> = { step: 0, origin: 0 };

/** Share of a grid step within which two values are the same grid point. */
const gridSlack = 1e-6;

/**
 * One actuator behind the guard: its limit and what the guard remembers of it. There is no other
 * way to a write, so an actuator without a limit cannot be written at all.
 */
export interface GuardedActuator {
  readonly limit: ActuatorLimit;
  /** Values that the wire can carry; step 0 where it is continuous. */
  grid: Readonly<ValueGrid>;
  /** The limit's rest value on the wire's grid. */
  rest: number;
  /** Longest time that the slew limit counts, s. */
  readonly slewDtMaxS: number;
  /** Value last let through or taken over, channel unit; NaN before. */
  applied: number;
  /** Movement allowed but not yet made because the wire's grid is coarser; at most one grid step. */
  carry: number;
  /** Rules that intervened in the last pass, as bits; ask {@link hasIntervened}. */
  intervened: number;
  /** Interventions so far by the index of {@link guardRules}. */
  readonly counts: Uint32Array;
}

/**
 * @param grid values that the wire can carry; undefined where it is continuous
 * @param periodS nominal time between two scans, s
 */
export function createGuardedActuator(
  limit: ActuatorLimit,
  grid: ValueGrid | undefined,
  periodS: number,
): GuardedActuator {
  const actuator: GuardedActuator = {
    limit,
    grid: continuous,
    rest: limit.rest,
    slewDtMaxS: slewPeriodsAtMost * periodS,
    applied: NaN,
    carry: 0,
    intervened: 0,
    counts: new Uint32Array(guardRules.length),
  };
  useGrid(actuator, grid);
  return actuator;
}

/** Sets the grid of the wire, which is known only once the wire is open. */
export function useGrid(actuator: GuardedActuator, grid: ValueGrid | undefined): void {
  const { rest, min, max } = actuator.limit;
  actuator.grid = grid && grid.step > 0 ? { ...grid } : continuous;
  actuator.carry = 0;
  const point = nearestOnGrid(actuator.grid, rest, min, max);
  actuator.rest = Number.isNaN(point) ? rest : point;
}

/** Begins from the value read back, so that the first write moves nothing. False where it is no number. */
export function takeOver(actuator: GuardedActuator, readBack: number): boolean {
  if (!Number.isFinite(readBack)) return false;
  actuator.applied = readBack;
  actuator.carry = 0;
  actuator.intervened = 0;
  return true;
}

/** Movement that the slew limit earns in `dtS`, channel unit. */
export function freshSlew(actuator: GuardedActuator, dtS: number): number {
  const countedS = dtS > 0 ? Math.min(dtS, actuator.slewDtMaxS) : 0;
  return actuator.limit.slewPerS * countedS;
}

/**
 * Greatest movement that the guard lets through in this scan, channel unit. Where the grid is coarser
 * than the slew limit, allowance that was not used is saved up to one grid step: so the actuator
 * moves a step now and then, and over any time not faster than its limit. Where it is finer nothing
 * is saved: no scan moves further than slew times dt, even if the grid then makes the ramp slower.
 */
export function slewAllowance(actuator: GuardedActuator, dtS: number): number {
  const fresh = freshSlew(actuator, dtS);
  return Math.max(fresh, Math.min(fresh + actuator.carry, actuator.grid.step));
}

/**
 * The guard: the last thing before the wire. Refuses what is not finite; then range, dither
 * amplitude and slew, in that order; then the wire's grid, rounded so that neither range nor slew
 * is left again. The value let through is `actuator.applied`. From outside its range (found so when
 * taken over) an actuator comes in at its slew limit and never moves further out.
 *
 * @param base wanted value without dither, channel unit
 * @param dither signed dither, channel unit
 * @param dtS time since the scan before, s
 * @returns false where the request was refused: nothing may be written, and the rig must trip
 * @realtime safe: allocates nothing
 */
export function guardRequest(actuator: GuardedActuator, base: number, dither: number, dtS: number): boolean {
  const { limit, applied } = actuator;
  actuator.intervened = 0;
  if (!Number.isFinite(base) || !Number.isFinite(dither) || !Number.isFinite(applied)) {
    note(actuator, 'non-finite');
    return false;
  }
  const heldBase = clamp(base, limit.min, limit.max);
  const heldDither = clamp(dither, -limit.ditherAmplitudeMax, limit.ditherAmplitudeMax);
  const wanted = clamp(heldBase + heldDither, limit.min, limit.max);
  if (heldBase !== base || wanted !== heldBase + heldDither) note(actuator, 'range');
  if (heldDither !== dither) note(actuator, 'dither');
  const earned = freshSlew(actuator, dtS) + actuator.carry;
  applyWithinSlew(actuator, wanted, slewAllowance(actuator, dtS));
  actuator.carry = clamp(earned - Math.abs(actuator.applied - applied), 0, actuator.grid.step);
  return true;
}

/**
 * The one exception from the slew limit: a stop of category 0 goes to rest at once. The rest value
 * lies inside the range; nothing else can be reached this way.
 *
 * @source IEC 60204-1, stop category 0
 */
export function guardJumpToRest(actuator: GuardedActuator): void {
  actuator.intervened = 0;
  actuator.applied = actuator.rest;
  actuator.carry = 0;
}

/** Whether the last value let through is the rest value. */
export function isAppliedAtRest(actuator: GuardedActuator): boolean {
  const { limit, grid, rest, applied } = actuator;
  return Math.abs(applied - rest) <= grid.step * 1e-3 + (limit.max - limit.min) * 1e-9;
}

export function isInsideRange(limit: ActuatorLimit, value: number): boolean {
  return value >= limit.min && value <= limit.max;
}

export function hasIntervened(actuator: GuardedActuator, rule: GuardRule): boolean {
  return (actuator.intervened & ruleBit[rule]) !== 0;
}

function applyWithinSlew(actuator: GuardedActuator, wanted: number, allowance: number): void {
  const { limit, grid, applied } = actuator;
  const slewed = clamp(wanted, applied - allowance, applied + allowance);
  /** Half a grid step of lag is rounding, not an intervention. */
  if (Math.abs(wanted - slewed) > grid.step * (0.5 + gridSlack) + allowance * 1e-9) note(actuator, 'slew');
  const low = Math.max(applied - allowance, slewed < limit.min ? applied : limit.min);
  const high = Math.min(applied + allowance, slewed > limit.max ? applied : limit.max);
  const point = nearestOnGrid(grid, slewed, low, high);
  actuator.applied = Number.isNaN(point) ? applied : point;
}

/** The grid point nearest to `wanted` in [low, high]; NaN where there is none. */
export function nearestOnGrid(grid: ValueGrid, wanted: number, low: number, high: number): number {
  if (grid.step === 0) return wanted;
  const lowest = Math.ceil((low - grid.origin) / grid.step - gridSlack);
  const highest = Math.floor((high - grid.origin) / grid.step + gridSlack);
  if (lowest > highest) return NaN;
  const nearest = clamp(Math.round((wanted - grid.origin) / grid.step), lowest, highest);
  /** The sum may miss a bound by its rounding: the bound is the grid point then. */
  return clamp(grid.origin + nearest * grid.step, low, high);
}

function note(actuator: GuardedActuator, rule: GuardRule): void {
  actuator.intervened |= ruleBit[rule];
  const index = guardRules.indexOf(rule);
  actuator.counts[index] = (actuator.counts[index] ?? 0) + 1;
}

function clamp(value: number, low: number, high: number): number {
  return value < low ? low : value > high ? high : value;
}
