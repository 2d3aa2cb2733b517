import { convergedShare } from './predict-seeking.js';

/** One principal direction of the curvature, scaled so that the law's first guess of it is 1. */
export interface NewtonDirection {
  /** True curvature λ over the guess. */
  curvature: number;
  /** Rate with which the estimate approaches the best point once the curvature is known, 1/s. */
  rate: number;
  /** Of the Riccati filter, 1/s, and corner of the low-pass of the second derivatives, rad/s. */
  inverseRate: number;
  hessianRadPerS: number;
  /** Corner of the low-pass of the slope, rad/s, and time in which filters settle before the law moves, s. */
  lowPassRadPerS: number;
  settleS: number;
}

const stepsPerTime = 100;
const timesMax = 1000;

/**
 * Time until a tenth of the distance is left along one direction, by stepping the averaged equations
 * h' = ωh·(λ − h), P' = ωr·(h − P), g' = ωl·(λ·x − g), x' = −κ·g/P from h = P = 1. With ωh and ωl far above κ it is
 * ln((10^(ωr/κ) − 1 + λ)/λ)/ωr after the settling.
 *
 * @returns s; NaN where the curvature is not positive
 * @source the averaged system of A. Ghaffari, M. Krstić and D. Nešić (2012), Automatica 48:1759–1767 (from memory),
 * with the filters of this law; the closed form is its integral, derived here
 */
export function newtonConvergence(direction: NewtonDirection): number {
  const { curvature, rate, inverseRate, hessianRadPerS, lowPassRadPerS, settleS } = direction;
  if (!(curvature > 0)) return NaN;
  const dtS = 1 / (stepsPerTime * Math.max(rate, inverseRate, hessianRadPerS, lowPassRadPerS));
  let distance = 1;
  let inverse = 1;
  let seen = curvature + (1 - curvature) * Math.exp(-hessianRadPerS * settleS);
  let slope = curvature * (1 - Math.exp(-lowPassRadPerS * settleS));
  const endS = timesMax / rate;
  for (let tS = settleS; tS < endS; tS += dtS) {
    if (distance <= convergedShare) return tS;
    seen += hessianRadPerS * (curvature - seen) * dtS;
    inverse += inverseRate * (seen - inverse) * dtS;
    slope += lowPassRadPerS * (curvature * distance - slope) * dtS;
    distance -= ((rate * slope) / inverse) * dtS;
  }
  return NaN;
}
