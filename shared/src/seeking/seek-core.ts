import type { AxisDither } from './axis-dither.js';
import type { SeekingAxis, TaperParameters } from './law-parameters.js';
import { ditherWithin, held, highestWithin, lowestWithin } from './seek-box.js';
import type { SeekingInput, SeekingState } from './seeking-law.js';
import { createTaper, restoreTaper, stepTaper, type TaperState } from './taper.js';
import { isUsable } from './usable-number.js';

/** Longest step that is taken for one, s. */
const stepMaxS = 1e6;

/**
 * The pieces that all laws share: box, validity with retreat, speed limit, taper. The states of all laws are objects
 * of this one shape, so that the shared code stays quick when several laws run in one process.
 */
export interface SeekCore<Own = unknown> extends SeekingState {
  /** What belongs to the law alone. */
  readonly own: Own;
  /** Periodic dithers, one per actuator; none for laws that try points. */
  readonly dithers: readonly AxisDither[];
  /** What the objective of this step is multiplied with for each of them, 1 / actuator unit. */
  readonly demodulators: Float64Array;
  /** Box of what is asked for, actuator units. */
  readonly min: Float64Array;
  readonly max: Float64Array;
  /** Greatest speed of each estimate, actuator units / s; infinite for none. */
  readonly speedMax: Float64Array;
  /** Change of each estimate that the law wants in this step, actuator units; `moveAll` takes it. */
  readonly change: Float64Array;
  /** The longest dither period or trial: so long must it be valid before a point counts as good, s. */
  readonly trialS: number;
  /** Estimate at the beginning of the present valid trial. */
  readonly candidate: Float64Array;
  /** Valid time since `candidate` was taken, s. */
  validS: number;
  readonly taper: TaperState;
}

export interface SeekCoreSetup<Own> {
  own: Own;
  dithers?: readonly AxisDither[];
  axes: readonly SeekingAxis[];
  start: ArrayLike<number>;
  trialS: number;
  signals: number;
  taper: TaperParameters;
  /** Largest dither of each actuator, by which its estimate keeps off the box, actuator units. */
  reach: readonly number[];
}

export function createSeekCore<Own>(setup: SeekCoreSetup<Own>): SeekCore<Own> {
  const { axes, start, trialS, signals, taper, reach, dithers = [] } = setup;
  const lowest = Float64Array.from(axes, ({ min }, i) => lowestWithin(min, reach[i] ?? 0));
  const highest = Float64Array.from(axes, ({ max }, i) => highestWithin(max, reach[i] ?? 0));
  axes.forEach(({ min, max }, i) => {
    // Without room for the dither the estimate stands in the middle and the dither is cut.
    if (at(lowest, i) > at(highest, i)) lowest[i] = highest[i] = min + (max - min) / 2;
  });
  const estimate = Float64Array.from(axes, (_, i) => {
    const value = start[i] ?? NaN;
    return Number.isFinite(value) ? held(value, at(lowest, i), at(highest, i)) : at(lowest, i);
  });
  return {
    own: setup.own,
    dithers,
    demodulators: new Float64Array(dithers.length),
    min: Float64Array.from(axes, ({ min }) => min),
    max: Float64Array.from(axes, ({ max }) => max),
    speedMax: Float64Array.from(axes, ({ speedMax }) => speedMax ?? Infinity),
    change: new Float64Array(axes.length),
    estimate,
    dither: new Float64Array(axes.length),
    signals: new Float64Array(signals).fill(NaN),
    lowest,
    highest,
    lastGood: estimate.slice(),
    candidate: estimate.slice(),
    trialS,
    validS: 0,
    settleS: trialS,
    isRetreated: false,
    taper: createTaper(taper, axes, trialS),
  };
}

/** An entry of an array whose bounds are known. */
export function at(values: Float64Array, i: number): number {
  return values[i] as number;
}

/**
 * Begins a step. Where there is no usable objective the core goes back to the last good point, stops the dither
 * and lets filters settle for one trial once it is valid again; the law has to reset its filters then.
 *
 * @returns true where the law can go on
 * @realtime safe: allocates nothing
 */
export function admit(core: SeekCore, input: SeekingInput, dtS: number): boolean {
  if (input.isValid && isUsable(input.objective) && dtS > 0 && dtS <= stepMaxS) {
    core.isRetreated = false;
    return true;
  }
  retreat(core);
  return false;
}

/** Goes back to the last good point. */
export function retreat(core: SeekCore): void {
  core.estimate.set(core.lastGood);
  core.candidate.set(core.lastGood);
  core.dither.fill(0);
  core.signals.fill(NaN);
  core.validS = 0;
  core.settleS = core.trialS;
  core.isRetreated = true;
  restoreTaper(core.taper);
}

/** @returns true once filters have settled, so that the law may adapt */
export function isSettled(core: SeekCore, dtS: number): boolean {
  if (core.settleS <= 0) return true;
  core.settleS -= dtS;
  return false;
}

/**
 * Moves the estimates by `core.change`, within their speed limits and their box. The estimate is the only state of
 * the integrator, so that it cannot wind up. A change that is no number moves nothing. (Numbers go through arrays
 * here and elsewhere, since a call that is not inlined would put each on the heap.)
 *
 * @param dtS time in which it happens, s
 */
export function moveAll({ change, estimate, lowest, highest, speedMax }: SeekCore, dtS: number): void {
  for (let i = 0; i < change.length; i += 1) {
    const reach = at(speedMax, i) * dtS;
    const next = at(estimate, i) + Math.max(Math.min(at(change, i), reach), -reach);
    if (next === next) estimate[i] = Math.max(Math.min(next, at(highest, i)), at(lowest, i));
  }
}

/** Cuts the dithers to the box. */
export function fitDithers({ estimate, dither, min, max }: SeekCore): void {
  for (let i = 0; i < dither.length; i += 1) {
    const asked = at(estimate, i) + at(dither, i);
    if (asked > at(max, i) || asked < at(min, i)) {
      dither[i] = ditherWithin(at(estimate, i), at(dither, i), at(min, i), at(max, i));
    }
  }
}

/**
 * Ends a step before the next dither is put out: remembers good points and judges the taper. Kept is the estimate
 * of one to two trials ago: the newest that is known to have been valid throughout.
 */
export function remember(core: SeekCore, dtS: number): void {
  stepTaper(core.taper, core.estimate, dtS);
  core.validS += dtS;
  if (core.validS < core.trialS) return;
  core.lastGood.set(core.candidate);
  core.candidate.set(core.estimate);
  core.validS = 0;
}
