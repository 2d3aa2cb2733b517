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

export interface PeriodicCoreSetup {
  axes: readonly PeriodicAxis[];
  start: ArrayLike<number>;
  signals: number;
  /** Corner of the washout that the objective goes through, of the dither frequency; 0 for none. */
  washoutRatio: number;
  taper: TaperParameters;
}

/** @param own makes what belongs to the law alone, from its dithers */
export function createPeriodicCore<Own>(
  { axes, washoutRatio, ...setup }: PeriodicCoreSetup,
  own: (dithers: readonly AxisDither[]) => Own,
): SeekCore<Own> {
  const dithers = axes.map((axis) => createAxisDither(axis, washoutRatio));
  return createSeekCore({
    axes,
    ...setup,
    dithers,
    own: own(dithers),
    trialS: Math.max(...axes.map(({ periodS }) => periodS)),
    reach: axes.map(({ dither, amplitude }) => (dither === 'measured' ? 0 : amplitude)),
  });
}

/**
 * Begins a step: admits the objective and follows measured ripple.
 *
 * @returns false where the law has to reset its filters
 */
export function admitPeriodic(core: SeekCore, input: SeekingInput, dtS: number): boolean {
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

export function retreatPeriodic(core: SeekCore): void {
  retreat(core);
  resetDithers(core);
}

/** Ends a step: remembers good points and puts out the next dither. */
export function perturb(core: SeekCore, dtS: number): void {
  remember(core, dtS);
  writeNextDithers(core.dithers, core.taper, core.dither, dtS);
  fitDithers(core);
}

/** Writes what the objective of this step is to be multiplied with. */
export function demodulate({ dithers, demodulators }: SeekCore): void {
  writeDemodulators(dithers, demodulators);
}

function resetDithers({ dithers }: SeekCore): void {
  for (let i = 0; i < dithers.length; i += 1) resetAxisDither(dithers[i] as AxisDither);
}
