import {
  canListen,
  createAxisDither,
  listen,
  nextDither,
  resetAxisDither,
  type AxisDither,
} from './axis-dither.js';
import type { PeriodicAxis, TaperParameters } from './law-parameters.js';
import { admit, createSeekCore, putDither, remember, retreat, type SeekCore } from './seek-core.js';
import type { SeekingInput } from './seeking-law.js';

/** The core of a law that dithers periodically. */
export interface PeriodicCore extends SeekCore {
  readonly dithers: readonly AxisDither[];
}

export interface PeriodicCoreSetup {
  axes: readonly PeriodicAxis[];
  start: ArrayLike<number>;
  signals: number;
  taper: TaperParameters;
}

export function createPeriodicCore({ axes, ...setup }: PeriodicCoreSetup): PeriodicCore {
  const trialS = Math.max(...axes.map(({ periodS }) => periodS));
  const core = createSeekCore({
    axes,
    ...setup,
    trialS,
    reach: axes.map(({ dither, amplitude }) => (dither === 'measured' ? 0 : amplitude)),
  });
  return { ...core, dithers: axes.map(createAxisDither) };
}

/**
 * Begins a step: admits the objective and follows measured ripple.
 *
 * @param washoutRatio corner of the washout that the objective goes through, of the dither frequency; 0 for none
 * @returns false where the law has to reset its filters
 */
export function admitPeriodic(
  core: PeriodicCore,
  input: SeekingInput,
  washoutRatio: number,
  dtS: number,
): boolean {
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
    listen(dither, measured as number, washoutRatio * dither.omega, dtS);
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
  const { dithers, taper } = core;
  for (let i = 0; i < dithers.length; i += 1) {
    putDither(core, i, nextDither(dithers[i] as AxisDither, taper.scale, dtS));
  }
}

function resetDithers({ dithers }: PeriodicCore): void {
  for (let i = 0; i < dithers.length; i += 1) resetAxisDither(dithers[i] as AxisDither);
}
