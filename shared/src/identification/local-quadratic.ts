/**
 * Weights that make value, slope and curvature at a place out of data: each is Σ weight_i · y_i.
 */
export interface LocalWeights {
  value: Float64Array;
  /** Per unit of x. */
  slope: Float64Array;
  /** Second derivative, per unit of x². */
  curvature: Float64Array;
}

/** Least points that must count for a parabola with something left over to judge it. */
const pointsMin = 4;

/**
 * Parabola around a place by least squares, with weights (1 − |distance/width|³)³ that fade out at the width;
 * exact for data on a parabola. Where fewer than four points are within the width it is widened to take them
 * in.
 *
 * @param xs places of the data, at least four different ones
 * @param at place looked at
 * @param width distance at which the weight is 0; above 0
 * @source W. S. Cleveland (1979), "Robust locally weighted regression and smoothing scatterplots", J. American
 * Statistical Association 74:829–836 (weights); J. Fan and I. Gijbels (1996), "Local Polynomial Modelling",
 * section 3.1
 */
export function localQuadratic(xs: ArrayLike<number>, at: number, width: number): LocalWeights {
  const reach = hasPointsWithin(xs, at, width) ? width : widened(xs, at);
  const kernel = new Float64Array(xs.length);
  const moments: Moments = [0, 0, 0, 0, 0];
  for (let i = 0; i < xs.length; i += 1) {
    const u = (xs[i]! - at) / reach;
    const size = Math.abs(u);
    if (size >= 1) continue;
    const weight = (1 - size * size * size) ** 3;
    kernel[i] = weight;
    moments[0] += weight;
    moments[1] += weight * u;
    moments[2] += weight * u * u;
    moments[3] += weight * u * u * u;
    moments[4] += weight * u * u * u * u;
  }
  const inverse = invertMoments(moments);
  const row = ([a, b, c]: Row, scale: number) =>
    kernel.map((weight, i) => {
      if (weight === 0) return 0;
      const u = (xs[i]! - at) / reach;
      return weight * scale * (a + b * u + c * u * u);
    });
  return {
    value: row(inverse[0], 1),
    slope: row(inverse[1], 1 / reach),
    curvature: row(inverse[2], 2 / (reach * reach)),
  };
}

/** True where enough different places lie within the width. */
function hasPointsWithin(xs: ArrayLike<number>, at: number, width: number): boolean {
  const seen: number[] = [];
  for (let i = 0; i < xs.length && seen.length < pointsMin; i += 1) {
    const x = xs[i]!;
    if (Math.abs(x - at) < width && !seen.includes(x)) seen.push(x);
  }
  return seen.length >= pointsMin;
}

/** A width that just takes enough different places in. */
function widened(xs: ArrayLike<number>, at: number): number {
  const distances = [...new Set(Array.from(xs))].map((x) => Math.abs(x - at)).sort((a, b) => a - b);
  return 1.02 * distances[Math.min(pointsMin, distances.length) - 1]!;
}

type Moments = [number, number, number, number, number];
type Row = [number, number, number];

/** Inverse of the symmetric matrix [[m0, m1, m2], [m1, m2, m3], [m2, m3, m4]]. */
function invertMoments([m0, m1, m2, m3, m4]: readonly [number, number, number, number, number]): [
  Row,
  Row,
  Row,
] {
  const c00 = m2 * m4 - m3 * m3;
  const c01 = m2 * m3 - m1 * m4;
  const c02 = m1 * m3 - m2 * m2;
  const determinant = m0 * c00 + m1 * c01 + m2 * c02;
  const c11 = m0 * m4 - m2 * m2;
  const c12 = m1 * m2 - m0 * m3;
  const c22 = m0 * m2 - m1 * m1;
  const scaled = (...row: Row): Row => [row[0] / determinant, row[1] / determinant, row[2] / determinant];
  return [scaled(c00, c01, c02), scaled(c01, c11, c12), scaled(c02, c12, c22)];
}
