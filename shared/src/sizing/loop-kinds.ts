import type { SeekingLawId } from '../seeking/seeking-laws.js';
import type { LoopKind } from './size-loops.js';

export const washoutRatio = 0.3;
export const lowPassRatio = 0.5;
/** Low-pass of the second derivatives, over the slowest dither. */
export const hessianRatio = 0.05;
/** Memory of the recursive fit, longest dither periods; a fit over less is shaken by the objective's own motion. */
export const memoryPeriods = 1;

const demodulating: LoopKind = {
  dithers: 'gradient',
  washoutRatio,
  lowPassRatio,
  isShared: false,
  canLag: true,
  lossFactor: 1,
};

/** Laws with periodic dithers. The memory m of a fit is a low-pass of the corner 1/(m·T). */
export const loopKinds = {
  gradient: demodulating,
  slope: demodulating,
  constrained: demodulating,
  newton: { ...demodulating, dithers: 'newton' },
  discrete: { ...demodulating, lowPassRatio: null, isShared: true },
  'least-squares': {
    ...demodulating,
    washoutRatio: 0,
    lowPassRatio: 1 / (2 * Math.PI * memoryPeriods),
    isShared: true,
  },
  'bounded-rate': { ...demodulating, washoutRatio: 0, lowPassRatio: null, canLag: false },
} as const satisfies Partial<Record<SeekingLawId, LoopKind>>;

export type PeriodicLawId = keyof typeof loopKinds;
