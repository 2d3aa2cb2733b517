import {
  canListen,
  createAxisDither,
  listen,
  resetAxisDither,
  writeDemodulators,
  writeNextDithers,
  type AxisDither,
} from './axis-dither.js';
import type { PeriodicAxis, TaperParameters } from './law-parameters.js';
import { admit, createSeekCore, fitDithers, remember, retreat, type SeekCore } from './seek-core.js';
import type { SeekingInput } from './seeking-law.js';

/** The core of a law that dithers periodically. */
export interface PeriodicCore extends SeekCore {
  readonly dithers: readonly AxisDither[];
  /** What the objective of this step is multiplied with, 1 / actuator unit. */
  readonly demodulators: Float64Array;
}

export interface PeriodicCoreSetup {
  axes: readonly PeriodicAxis[];
  start: ArrayLike<number>;
  signals: number;
  /** Corner of the washout that the objective goes through, of the dither frequency; 0 for none. */
  washoutRatio: number;
  taper: TaperParameters;
}

export function createPeriodicCore({ axes, washoutRatio, ...setup }: PeriodicCoreSetup): PeriodicCore {
  const trialS = Math.max(...axes.map(({ periodS }) => periodS));
  const core = createSeekCore({
    axes,
    ...setup,
    trialS,
    reach: axes.map(({ dither, amplitude }) => (dither === 'measured' ? 0 : amplitude)),
  });
  return {
    ...core,
    dithers: axes.map((axis) => createAxisDither(axis, washoutRatio)),
    demodulators: new Float64Array(axes.length),
  };
}

/**
 * Begins a step: admits the objective and follows measured ripple.
 *
 * @returns false where the law has to reset its filters
 */
export function admitPeriodic(core: PeriodicCore, input: SeekingInput, dtS: number): boolean {
  const { dithers } = core;
  if (!admit(core, input, dtS)) {
    resetDithers(core);
    return false;
  }
  for (let i = 0; i < dithers.length; i += 1) {
    const dither = dithers[i] as AxisDither;
    if (dither.axis.dither !== 'measured') continue;
    const measured = input.measured?.[i];
    if (!canListen(dither, measured)) {
      retreatPeriodic(core);
      return false;
    }
    listen(dither, measured as number, dtS);
  }
  return true;
}

export function retreatPeriodic(core: PeriodicCore): void {
  retreat(core);
  resetDithers(core);
}

/** Ends a step: remembers good points and puts out the next dither. */
export function perturb(core: PeriodicCore, dtS: number): void {
  remember(core, dtS);
  writeNextDithers(core.dithers, core.taper, core.dither, dtS);
  fitDithers(core);
}

/** Writes what the objective of this step is to be multiplied with. */
export function demodulate({ dithers, demodulators }: PeriodicCore): void {
  writeDemodulators(dithers, demodulators);
}

function resetDithers({ dithers }: PeriodicCore): void {
  for (let i = 0; i < dithers.length; i += 1) resetAxisDither(dithers[i] as AxisDither);
}
