import { DomainError } from '../errors/domain-error.js';
import { checkSettings } from '../signals/check-settings.js';
import { propagateUncertainty, type Estimate } from '../signals/estimate.js';
import { fitLinear } from './least-squares.js';

/** A hill or hollow over two actuators as a paraboloid. */
export interface SurfacePeakFit {
  position: readonly [x: Estimate, y: Estimate];
  height: Estimate;
  /** Second derivatives. */
  hessian: { xx: Estimate; xy: Estimate; yy: Estimate };
  /** Curvatures along the principal axes, the larger in size first. */
  principal: readonly [Estimate, Estimate];
  points: number;
}

export interface SurfacePoint {
  x: number;
  y: number;
  objective: number;
}

export interface SurfaceWindow {
  near: readonly [x: number, y: number];
  /** Half axes of the ellipse of points to use, units of x and y; above 0. */
  halfWidths: readonly [x: number, y: number];
}

/**
 * Position, height and curvatures of a peak over two actuators by a paraboloid through the points near it.
 *
 * @param standardErrors of the points; their scatter about the paraboloid is used where not given
 * @throws analysis.invalid-input, analysis.too-little-data below seven points in the window, analysis.no-fit
 * where the points do not determine it or the flat place is outside the window
 */
export function fitSurfacePeak(
  points: readonly SurfacePoint[],
  { near, halfWidths }: SurfaceWindow,
  standardErrors?: ArrayLike<number>,
): SurfacePeakFit {
  const [wx, wy] = halfWidths;
  checkSettings([wx > 0 && wy > 0, 'halfWidths', 'must be above 0.']);
  const scaled = points.map(({ x, y }) => [(x - near[0]) / wx, (y - near[1]) / wy] as const);
  const used = points.map((_, i) => i).filter((i) => Math.hypot(...scaled[i]!) <= 1 + 1e-12);
  if (used.length < 7) throw new DomainError('analysis.too-little-data');
  const fit = fitLinear(
    used.map((i) => {
      const [u, v] = scaled[i]!;
      return [1, u, v, u * u, u * v, v * v];
    }),
    used.map((i) => points[i]!.objective),
    standardErrors && used.map((i) => standardErrors[i]!),
  );
  const { results, standardErrors: errors } = propagateUncertainty(
    (parameters) => figures(parameters, halfWidths),
    fit.parameters,
    fit.covariance,
  );
  const at = (i: number): Estimate => ({ value: results[i]!, standardError: errors[i]! });
  if (!(Math.hypot(results[0]! / wx, results[1]! / wy) <= 1)) throw new DomainError('analysis.no-fit');
  const shifted = (i: 0 | 1): Estimate => ({ value: near[i] + results[i]!, standardError: errors[i]! });
  return {
    position: [shifted(0), shifted(1)],
    height: at(2),
    hessian: { xx: at(3), xy: at(4), yy: at(5) },
    principal: [at(6), at(7)],
    points: used.length,
  };
}

/** Flat place (from the middle of the window), height there, second derivatives and principal curvatures. */
function figures(parameters: readonly number[], [wx, wy]: readonly [number, number]): number[] {
  const [a, b, c, d, e, f] = parameters as [number, number, number, number, number, number];
  const [xx, xy, yy] = [(2 * d) / (wx * wx), e / (wx * wy), (2 * f) / (wy * wy)];
  const [gx, gy] = [b / wx, c / wy];
  const determinant = xx * yy - xy * xy;
  const [x, y] = [(xy * gy - yy * gx) / determinant, (xy * gx - xx * gy) / determinant];
  const [middle, spread] = [(xx + yy) / 2, Math.hypot((xx - yy) / 2, xy)];
  const larger = middle < 0 ? middle - spread : middle + spread;
  return [x, y, a + (gx * x + gy * y) / 2, xx, xy, yy, larger, 2 * middle - larger];
}
