import { DomainError } from '../errors/domain-error.js';
import { checkSettings } from '../signals/check-settings.js';
import { propagateUncertainty, type Estimate } from '../signals/estimate.js';
import { fitLinear } from './least-squares.js';

/** A hill or hollow as a parabola. */
export interface PeakFit {
  /** Where it is flat, unit of x. */
  position: Estimate;
  height: Estimate;
  /** Second derivative there: below 0 on a hill, above 0 in a hollow. */
  curvature: Estimate;
  /** Data that were used. */
  points: number;
}

export interface PeakWindow {
  /** Middle of the data to use, unit of x. */
  near: number;
  /** Farthest distance from it, unit of x; above 0. */
  halfWidth: number;
}

/**
 * Position, height and curvature of a peak by a parabola through the data near it.
 *
 * Where the map is no parabola the window makes an error that the standard errors do not show: of the position
 * about −f'''·w²/(10·f'') and of the curvature about f''''·w²/14, for many evenly spaced data within ±w.
 * (Derived here, by projecting x³ and x⁴ on lower powers.)
 *
 * @param standardErrors of the data; their scatter about the parabola is used where not given
 * @throws analysis.invalid-input, analysis.too-little-data below four points in the window, analysis.no-fit
 * where the data are straight or the flat place is outside the window
 * @source least squares as in `fitLinear`; position and height by propagation, JCGM 100:2008 (GUM), clause 5.2
 */
export function fitPeak(
  xs: ArrayLike<number>,
  ys: ArrayLike<number>,
  { near, halfWidth }: PeakWindow,
  standardErrors?: ArrayLike<number>,
): PeakFit {
  checkSettings([halfWidth > 0, 'halfWidth', 'must be above 0.']);
  const used = Array.from(xs, (_, i) => i).filter((i) => Math.abs(xs[i]! - near) <= halfWidth * (1 + 1e-12));
  if (used.length < 4) throw new DomainError('analysis.too-little-data');
  const fit = fitLinear(
    used.map((i) => [1, (xs[i]! - near) / halfWidth, ((xs[i]! - near) / halfWidth) ** 2]),
    used.map((i) => ys[i]!),
    standardErrors && used.map((i) => standardErrors[i]!),
  );
  const { results, standardErrors: errors } = propagateUncertainty(
    ([a = NaN, b = NaN, c = NaN]) => [-b / (2 * c), a - (b * b) / (4 * c), 2 * c],
    fit.parameters,
    fit.covariance,
  );
  const [place = NaN, height = NaN, bend = NaN] = results;
  if (!(Math.abs(place) <= 1)) throw new DomainError('analysis.no-fit');
  return {
    position: { value: near + place * halfWidth, standardError: errors[0]! * halfWidth },
    height: { value: height, standardError: errors[1]! },
    curvature: { value: bend / halfWidth ** 2, standardError: errors[2]! / halfWidth ** 2 },
    points: used.length,
  };
}
