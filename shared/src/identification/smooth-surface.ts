import { checkSeries, checkSettings } from '../signals/check-settings.js';
import type { Estimate } from '../signals/estimate.js';
import type { SurfacePoint } from './fit-surface-peak.js';
import {
  localParaboloid,
  type HalfAxes,
  type ParaboloidWeights,
  type SurfacePlace,
} from './local-paraboloid.js';

/** The surface at a place. */
export interface SurfaceFigures {
  value: Estimate;
  slope: readonly [x: Estimate, y: Estimate];
  hessian: { xx: Estimate; xy: Estimate; yy: Estimate };
}

export interface SmoothSurface {
  /** Width that was used, share of the range of x and of y alike. */
  width: number;
  /** Root mean square of the errors at points left out in turn, unit of the objective. */
  predictionError: number;
  /** Standard deviation of the data about the surface, unit of the objective. */
  noise: number;
  /** Surface at a place among the data; beyond them it is a guess. */
  at(x: number, y: number): SurfaceFigures;
}

export interface SurfaceSmoothingSettings {
  /** Half axes at which data stop to count, share of the ranges; chosen by cross-validation where not given. */
  width?: number;
  /** Standard error of each datum; the scatter about the surface is used where not given. */
  standardErrors?: ArrayLike<number>;
}

const pointsMin = 10;
const candidates = 14;
/** A point that decides its own value leaves nothing to judge a width by. */
const leverageMax = 0.999;

/**
 * Smooth surface through data with noise over two actuators: a paraboloid fitted around each place, as `smoothCurve`
 * does with one actuator. The width that predicts left-out points best is chosen; the error at a left-out point is
 * residual/(1 − own weight). It takes about 14·n² paraboloid rows for n data: for after a survey, not for a scan.
 *
 * Standard errors cover the noise, not what the width flattens.
 *
 * @param points at least ten, not all on a line or another conic
 * @throws analysis.invalid-input, analysis.too-little-data; analysis.no-fit where the places determine no paraboloid
 * @source M. Stone (1974), J. Royal Statistical Society B 36:111–147 (cross-validation); T. J. Hastie and R. J.
 * Tibshirani (1990), "Generalized Additive Models", section 3.4 (short cut) and 3.5 (degrees of freedom n −
 * 2·tr L + tr LLᵀ)
 */
export function smoothSurface(
  points: readonly SurfacePoint[],
  settings: SurfaceSmoothingSettings = {},
): SmoothSurface {
  const objectives = points.map(({ objective }) => objective);
  const ranges = [rangeOf(points.map(({ x }) => x)), rangeOf(points.map(({ y }) => y))] as const;
  checkSeries(objectives, 'points', pointsMin);
  checkSettings(
    [ranges[0] > 0 && ranges[1] > 0, 'points', 'must spread along both actuators.'],
    [settings.width === undefined || settings.width > 0, 'width', 'must be above 0.'],
  );
  const halfAxes = (width: number): HalfAxes => [width * ranges[0], width * ranges[1]];
  const trials = settings.width ? [settings.width] : candidateWidths(points.length);
  const judged = trials.map((width) => ({ width, ...judge(points, objectives, halfAxes(width)) }));
  const best = judged.reduce((a, b) => (b.predictionError < a.predictionError ? b : a));
  const errors = settings.standardErrors ?? new Float64Array(points.length).fill(best.noise);
  return {
    ...best,
    at: (x, y) => figuresOf(localParaboloid(points, { x, y }, halfAxes(best.width)), objectives, errors),
  };
}

function rangeOf(values: readonly number[]): number {
  return Math.max(...values) - Math.min(...values);
}

/** From about nine points of a full grid to far beyond all of them, where the surface becomes one paraboloid. */
function candidateWidths(points: number): number[] {
  const narrowest = 1.8 / Math.max(1, Math.sqrt(points) - 1);
  const factor = (8 / narrowest) ** (1 / (candidates - 1));
  return Array.from({ length: candidates }, (_, i) => narrowest * factor ** i);
}

function judge(places: readonly SurfacePlace[], objectives: readonly number[], halfAxes: HalfAxes) {
  let [squares, leftOut, freedom] = [0, 0, 0];
  places.forEach((place, i) => {
    const weights = localParaboloid(places, place, halfAxes).value;
    const residual = objectives[i]! - dot(weights, objectives);
    const leverage = weights[i]!;
    squares += residual * residual;
    leftOut += leverage < leverageMax ? (residual / (1 - leverage)) ** 2 : Infinity;
    freedom += 1 - 2 * leverage + dot(weights, weights);
  });
  return {
    predictionError: Math.sqrt(leftOut / places.length),
    noise: freedom > 0 ? Math.sqrt(squares / freedom) : NaN,
  };
}

function figuresOf(
  weights: ParaboloidWeights,
  objectives: readonly number[],
  errors: ArrayLike<number>,
): SurfaceFigures {
  const estimate = (of: Float64Array): Estimate => ({
    value: dot(of, objectives),
    standardError: Math.sqrt(
      of.reduce((sum, weight, i) => sum + (weight === 0 ? 0 : (weight * errors[i]!) ** 2), 0),
    ),
  });
  return {
    value: estimate(weights.value),
    slope: [estimate(weights.slopeX), estimate(weights.slopeY)],
    hessian: { xx: estimate(weights.xx), xy: estimate(weights.xy), yy: estimate(weights.yy) },
  };
}

function dot(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}
