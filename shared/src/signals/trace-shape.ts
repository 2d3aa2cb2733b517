import type { Trace } from './trace.types.js';

/**
 * Width of the highest peak of a trace at a level: between the places left and right of the highest point where
 * the trace first comes down to it, on the lines between the points. At half the height it is the full width at
 * half maximum.
 *
 * @param level unit of the values
 * @returns unit of the axis; NaN where no point reaches the level, or the trace ends above it
 * @realtime safe: allocates nothing
 * @example
 * traceWidthAt({ points: [0, 2, 4, 2, 0], from: 0, step: 10 }, 1) // 30
 */
export function traceWidthAt({ points, step }: Trace, level: number): number {
  let top = 0;
  for (let i = 1; i < points.length; i += 1) if (points[i]! > points[top]!) top = i;
  if (!(points[top]! >= level)) return NaN;
  return step * (reach(points, top, level, 1) + reach(points, top, level, -1));
}

/** Distance from the top to where the trace comes down to the level, in points. */
function reach(points: ArrayLike<number>, top: number, level: number, direction: 1 | -1): number {
  for (let i = top; i >= 0 && i < points.length; i += direction) {
    const height = points[i]!;
    if (height > level) continue;
    if (height === level) return Math.abs(i - top);
    const before = points[i - direction]!;
    return Math.abs(i - top) - (level - height) / (before - height);
  }
  return NaN;
}

/**
 * Centre of the area under the points, each counted at its place: Σxy/Σy.
 *
 * @returns unit of the axis; NaN where the values do not sum up to more than zero
 * @realtime safe: one pass, allocates nothing
 * @example
 * traceCentroid({ points: [0, 1, 3, 0], from: 100, step: 10 }) // 117.5
 */
export function traceCentroid({ points, from, step }: Trace): number {
  let weight = 0;
  let moment = 0;
  for (let i = 0; i < points.length; i += 1) {
    weight += points[i]!;
    moment += i * points[i]!;
  }
  return weight > 0 ? from + (step * moment) / weight : NaN;
}

/**
 * How far two traces are apart: the root of the mean square of the difference of their points.
 *
 * @returns unit of the values; NaN where they have not the same number of points on the same axis
 * @realtime safe: one pass, allocates nothing
 * @example
 * rmsDifference({ points: [1, 2], from: 0, step: 1 }, { points: [4, -2], from: 0, step: 1 }) // 3.5355339059327378
 */
export function rmsDifference(a: Trace, b: Trace): number {
  const count = a.points.length;
  if (b.points.length !== count || a.from !== b.from || a.step !== b.step) return NaN;
  let sum = 0;
  for (let i = 0; i < count; i += 1) {
    const difference = a.points[i]! - b.points[i]!;
    sum += difference * difference;
  }
  return Math.sqrt(sum / count);
}
