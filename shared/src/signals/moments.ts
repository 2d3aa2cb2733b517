/**
 * Moments of a group of values that can be joined with those of another group without looking at the values
 * again, kept in a stretch of a Float64Array so that joining allocates nothing.
 *
 * Groups are joined, never taken apart: nothing is subtracted, so no digits are lost however long it goes on,
 * and a value that has left a window leaves no trace.
 *
 * @source P. Pébay (2008), "Formulas for robust, one-pass parallel computation of covariances and
 * arbitrary-order statistical moments", Sandia report SAND2008-6212; for two groups T. F. Chan, G. H. Golub and
 * R. J. LeVeque (1983), "Algorithms for computing the sample variance", The American Statistician 37:242–247.
 * The joining of lag-1 products is derived here.
 */
export const Moment = {
  count: 0,
  mean: 1,
  /** Σ(x − mean)^k for k = 2, 3, 4. */
  second: 2,
  third: 3,
  fourth: 4,
  /** Σ(xᵢ − mean)(xᵢ₊₁ − mean). */
  lag: 5,
  first: 6,
  last: 7,
  min: 8,
  max: 9,
} as const;

/** Numbers that one group takes. */
export const momentStride = 10;

/** Makes the group at an offset empty. */
export function clearMoments(group: Float64Array, at = 0): void {
  group.fill(0, at, at + momentStride);
}

/** Makes the group at an offset hold one value. @param value finite */
export function setSingleMoment(group: Float64Array, at: number, value: number): void {
  clearMoments(group, at);
  group[at + Moment.count] = 1;
  group[at + Moment.mean] = value;
  group[at + Moment.first] = value;
  group[at + Moment.last] = value;
  group[at + Moment.min] = value;
  group[at + Moment.max] = value;
}

/**
 * Joins two groups, the left one earlier in time. The target may be one of the two.
 *
 * @realtime safe: allocates nothing
 */
export function joinMoments(
  left: Float64Array,
  l: number,
  right: Float64Array,
  r: number,
  target: Float64Array,
  t: number,
): void {
  const nl = left[l]!;
  const nr = right[r]!;
  if (nl === 0 || nr === 0) {
    const from = nl === 0 ? right : left;
    const offset = nl === 0 ? r : l;
    for (let i = 0; i < momentStride; i += 1) target[t + i] = from[offset + i]!;
    return;
  }
  joinLag(left, l, right, r, target, t);
  joinPowers(left, l, right, r, target, t);
}

/** The part of the joining that needs the means of both groups; leaves count and mean to `joinPowers`. */
function joinLag(
  left: Float64Array,
  l: number,
  right: Float64Array,
  r: number,
  target: Float64Array,
  t: number,
): void {
  const nl = left[l]!;
  const nr = right[r]!;
  const ml = left[l + Moment.mean]!;
  const mr = right[r + Moment.mean]!;
  const step = (mr - ml) / (nl + nr);
  const fromLeft = shiftedLag(left, l, nl, ml, -step * nr);
  const fromRight = shiftedLag(right, r, nr, mr, step * nl);
  const mean = ml + step * nr;
  const bridge = (left[l + Moment.last]! - mean) * (right[r + Moment.first]! - mean);
  const first = left[l + Moment.first]!;
  const last = right[r + Moment.last]!;
  const min = Math.min(left[l + Moment.min]!, right[r + Moment.min]!);
  const max = Math.max(left[l + Moment.max]!, right[r + Moment.max]!);
  target[t + Moment.lag] = fromLeft + bridge + fromRight;
  target[t + Moment.first] = first;
  target[t + Moment.last] = last;
  target[t + Moment.min] = min;
  target[t + Moment.max] = max;
}

/** Lag-1 products of one group about a mean that is lower than its own by `shift`. */
function shiftedLag(group: Float64Array, at: number, n: number, mean: number, shift: number): number {
  const ends = group[at + Moment.first]! - mean + (group[at + Moment.last]! - mean);
  return group[at + Moment.lag]! - shift * ends + (n - 1) * shift * shift;
}

function joinPowers(
  left: Float64Array,
  l: number,
  right: Float64Array,
  r: number,
  target: Float64Array,
  t: number,
): void {
  const nl = left[l]!;
  const nr = right[r]!;
  const n = nl + nr;
  const delta = right[r + Moment.mean]! - left[l + Moment.mean]!;
  const step = delta / n;
  const mean = left[l + Moment.mean]! + step * nr;
  const [l2, r2] = [left[l + Moment.second]!, right[r + Moment.second]!];
  const [l3, r3] = [left[l + Moment.third]!, right[r + Moment.third]!];
  const cross = delta * step * nl * nr;
  target[t + Moment.fourth] =
    left[l + Moment.fourth]! +
    right[r + Moment.fourth]! +
    cross * step * step * (nl * nl - nl * nr + nr * nr) +
    6 * step * step * (nl * nl * r2 + nr * nr * l2) +
    4 * step * (nl * r3 - nr * l3);
  target[t + Moment.third] = l3 + r3 + cross * step * (nl - nr) + 3 * step * (nl * r2 - nr * l2);
  target[t + Moment.second] = l2 + r2 + cross;
  target[t + Moment.mean] = mean;
  target[t] = n;
}
