import { checkSeries, checkSettings } from '../signals/check-settings.js';
import type { Estimate } from '../signals/estimate.js';
import { localQuadratic } from './local-quadratic.js';

export interface SmoothCurve {
  /** Width that was used, unit of x. */
  width: number;
  /** Root mean square of the errors at points left out in turn, unit of y. */
  predictionError: number;
  /** Standard deviation of the data about the curve, unit of y. */
  noise: number;
  /** Curve at a place between the first and the last; beyond them it is a guess. */
  at(x: number): { value: Estimate; slope: Estimate; curvature: Estimate };
}

export interface SmoothingSettings {
  /** Distance at which data stop to count, unit of x; chosen by cross-validation where not given. */
  width?: number;
  /** Standard error of each datum; the scatter about the curve is used where not given. */
  standardErrors?: ArrayLike<number>;
}

/** Least data for a curve, and its widest and narrowest reach. */
const pointsMin = 6;
const candidates = 24;
/** A point that decides its own value leaves nothing to judge a width by. */
const leverageMax = 0.999;

/**
 * Smooth curve through data with noise: a parabola fitted around each place. The width that predicts left-out
 * points best is chosen; leaving out costs nothing because the error at a left-out point is residual/(1 − own
 * weight).
 *
 * Standard errors cover the noise, not what the width flattens: a bend narrower than the width is drawn too blunt.
 *
 * @param xs places, at least six different ones, in any order
 * @param ys data
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source M. Stone (1974), J. Royal Statistical Society B 36:111–147 (cross-validation); T. J. Hastie and R. J.
 * Tibshirani (1990), "Generalized Additive Models", section 3.4 (short cut) and 3.5 (degrees of freedom n −
 * 2·tr L + tr LLᵀ)
 */
export function smoothCurve(
  xs: ArrayLike<number>,
  ys: ArrayLike<number>,
  settings: SmoothingSettings = {},
): SmoothCurve {
  const places = new Set(Array.from(xs));
  checkSeries(ys, 'ys', pointsMin);
  checkSeries([...places], 'xs', pointsMin);
  checkSettings(
    [xs.length === ys.length, 'xs', 'must be as many as the ys.'],
    [settings.width === undefined || settings.width > 0, 'width', 'must be above 0.'],
  );
  const trials = settings.width ? [settings.width] : candidateWidths(places);
  const judged = trials.map((width) => judgeWidth(xs, ys, width));
  const best = judged.reduce((a, b) => (b.predictionError < a.predictionError ? b : a));
  const errors = settings.standardErrors ?? new Float64Array(ys.length).fill(best.noise);
  const combine = (weights: Float64Array): Estimate => ({
    value: weights.reduce((sum, weight, i) => (weight === 0 ? sum : sum + weight * ys[i]!), 0),
    standardError: Math.sqrt(
      weights.reduce((sum, weight, i) => (weight === 0 ? sum : sum + (weight * errors[i]!) ** 2), 0),
    ),
  });
  return {
    ...best,
    at(x) {
      const weights = localQuadratic(xs, x, best.width);
      return {
        value: combine(weights.value),
        slope: combine(weights.slope),
        curvature: combine(weights.curvature),
      };
    },
  };
}

/** From a few points to far beyond all of them, where the curve becomes one parabola. */
function candidateWidths(places: ReadonlySet<number>): number[] {
  const range = Math.max(...places) - Math.min(...places);
  const narrowest = (2.5 * range) / (places.size - 1);
  const factor = ((8 * range) / narrowest) ** (1 / (candidates - 1));
  return Array.from({ length: candidates }, (_, i) => narrowest * factor ** i);
}

function judgeWidth(xs: ArrayLike<number>, ys: ArrayLike<number>, width: number) {
  let [squares, leftOut, freedom] = [0, 0, 0];
  for (let i = 0; i < ys.length; i += 1) {
    const weights = localQuadratic(xs, xs[i]!, width).value;
    const residual = ys[i]! - weights.reduce((sum, weight, j) => sum + weight * ys[j]!, 0);
    const leverage = weights[i]!;
    squares += residual * residual;
    leftOut += leverage < leverageMax ? (residual / (1 - leverage)) ** 2 : Infinity;
    freedom += 1 - 2 * leverage + weights.reduce((sum, weight) => sum + weight * weight, 0);
  }
  return {
    width,
    predictionError: Math.sqrt(leftOut / ys.length),
    noise: freedom > 0 ? Math.sqrt(squares / freedom) : NaN,
  };
}
