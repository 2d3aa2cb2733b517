import type { Trace } from './trace.types.js';

/** How far beyond its ends a trace may be asked, in points: sums of steps are not exact. */
const slack = 1e-6;

/**
 * Where a place on the axis is, in points from the first.
 *
 * @param x in the axis' unit
 * @returns from 0 to the last point, between points where it lies so; NaN outside the axis
 */
export function placeOf({ points, from, step }: Trace, x: number): number {
  const last = points.length - 1;
  const place = (x - from) / step;
  if (!(place >= -slack && place <= last + slack)) return NaN;
  return Math.min(Math.max(place, 0), last);
}

/** Height at a place between two points, on the line that joins them. @param place 0 to the last point */
export function heightAt(points: ArrayLike<number>, place: number): number {
  const before = Math.floor(place);
  const height = points[before] ?? NaN;
  const share = place - before;
  return share === 0 ? height : height + share * ((points[before + 1] ?? NaN) - height);
}

/**
 * Value of a trace at a place on its axis, on the line between its points.
 *
 * @param x in the axis' unit
 * @returns NaN outside the axis: nothing is known there
 * @realtime safe: allocates nothing
 * @example
 * traceValueAt({ points: [1, 2, 4], from: 0, step: 10 }, 15) // 3
 */
export function traceValueAt(trace: Trace, x: number): number {
  return heightAt(trace.points, placeOf(trace, x));
}
