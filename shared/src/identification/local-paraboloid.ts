import { DomainError } from '../errors/domain-error.js';
import { solveByReflections } from './solve-by-reflections.js';

/** A place over two actuators. */
export interface SurfacePlace {
  readonly x: number;
  readonly y: number;
}

/** Half axes of an ellipse, units of x and y; above 0. */
export type HalfAxes = readonly [x: number, y: number];

/** Weights that make a figure at a place out of data: each is Σ weight_i · z_i. */
export interface ParaboloidWeights {
  value: Float64Array;
  slopeX: Float64Array;
  slopeY: Float64Array;
  /** Second derivatives. */
  xx: Float64Array;
  xy: Float64Array;
  yy: Float64Array;
}

const unknowns = 6;
/** Factor by which the ellipse grows until it holds enough, and how often at most. */
const growth = 1.15;
const growthsMax = 80;

/**
 * Paraboloid around a place by least squares, with weights (1 − r³)³ that fade out at the rim of an ellipse; exact for
 * data on a paraboloid. Where the data within do not determine six unknowns the ellipse grows until they do.
 *
 * @param places of the data
 * @param at place looked at
 * @param halfAxes of the ellipse at whose rim the weight is 0
 * @throws analysis.no-fit where the places together determine no paraboloid
 * @source W. S. Cleveland and S. J. Devlin (1988), "Locally weighted regression: an approach to regression analysis by
 * local fitting", J. American Statistical Association 83:596–610 (from memory)
 */
export function localParaboloid(
  places: readonly SurfacePlace[],
  at: SurfacePlace,
  halfAxes: HalfAxes,
): ParaboloidWeights {
  let axes = halfAxes;
  for (let i = 0; i < growthsMax; i += 1) {
    const weights = weightsWithin(places, at, axes);
    if (weights) return weights;
    axes = [axes[0] * growth, axes[1] * growth];
  }
  throw new DomainError('analysis.no-fit');
}

function weightsWithin(
  places: readonly SurfacePlace[],
  at: SurfacePlace,
  [wx, wy]: HalfAxes,
): ParaboloidWeights | null {
  const used: number[] = [];
  const kernels: number[] = [];
  const rows: number[][] = [];
  places.forEach(({ x, y }, i) => {
    const [u, v] = [(x - at.x) / wx, (y - at.y) / wy];
    const r = Math.hypot(u, v);
    if (r >= 1) return;
    used.push(i);
    kernels.push((1 - r * r * r) ** 3);
    rows.push([1, u, v, u * u, u * v, v * v]);
  });
  // One more than the unknowns, so that something is left over to judge it by.
  if (used.length <= unknowns) return null;
  const inverse = inverseNormal(rows, kernels);
  if (!inverse) return null;
  const figure = (j: number, scale: number) => {
    const weights = new Float64Array(places.length);
    used.forEach((i, k) => {
      const row = rows[k]!;
      const along = row.reduce((sum, factor, m) => sum + factor * inverse[j]![m]!, 0);
      weights[i] = scale * kernels[k]! * along;
    });
    return weights;
  };
  return {
    value: figure(0, 1),
    slopeX: figure(1, 1 / wx),
    slopeY: figure(2, 1 / wy),
    xx: figure(3, 2 / (wx * wx)),
    xy: figure(4, 1 / (wx * wy)),
    yy: figure(5, 2 / (wy * wy)),
  };
}

/** Inverse of XᵀWX; null where it has none. */
function inverseNormal(rows: readonly (readonly number[])[], kernels: readonly number[]): number[][] | null {
  const weighted = rows.map((row, k) => row.map((factor) => factor * Math.sqrt(kernels[k]!)));
  try {
    return solveByReflections(weighted, new Array<number>(rows.length).fill(0)).inverse;
  } catch (error) {
    if (error instanceof DomainError && error.code === 'analysis.no-fit') return null;
    throw error;
  }
}
