/** Points of a trace that stand for all of them on a screen. */
export interface DecimatedTrace {
  points: number[];
  /** Numbers of the points in the whole trace, rising; null where all of them are there. */
  places: number[] | null;
}

/**
 * Thins a trace so that no extreme is lost: of each stretch its lowest and its highest point are kept, in their order.
 *
 * @param most greatest number of points to keep, 2 or more
 * @example
 * decimateTrace([1, 9, 2, 3, 0, 4], 4) // { points: [1, 9, 0, 4], places: [0, 1, 4, 5] }
 */
export function decimateTrace(points: ArrayLike<number>, most: number): DecimatedTrace {
  const { length } = points;
  if (length <= most) return { points: Array.from(points), places: null };
  const stretches = Math.floor(most / 2);
  const places: number[] = [];
  for (let stretch = 0; stretch < stretches; stretch += 1) {
    const from = Math.floor((stretch * length) / stretches);
    const to = Math.floor(((stretch + 1) * length) / stretches);
    places.push(...extremesOf(points, from, to));
  }
  return { points: places.map((place) => points[place] as number), places };
}

/** Places of the lowest and the highest point from `from` up to `to`, in rising order; once where they are one. */
function extremesOf(points: ArrayLike<number>, from: number, to: number): number[] {
  let [low, high] = [from, from];
  for (let i = from; i < to; i += 1) {
    if (points[i]! < points[low]!) low = i;
    if (points[i]! > points[high]!) high = i;
  }
  return low === high ? [low] : [Math.min(low, high), Math.max(low, high)];
}
