import { heightAt, placeOf } from './trace-place.js';
import type { Trace } from './trace.types.js';

/** Integral over one piece of a straight line, of length 1. */
type Integral = (left: number, right: number) => number;

const ofValue: Integral = (left, right) => (left + right) / 2;
const ofSquare: Integral = (left, right) => (left * left + left * right + right * right) / 3;

/**
 * Area under a trace in a window of its axis, with straight lines between the points (the trapezoidal rule, the
 * ends interpolated); below zero it counts negative.
 *
 * @param low lower end of the window, unit of the axis
 * @param high upper end
 * @returns unit of the values times that of the axis; NaN where the window is upside down or leaves the axis
 * @realtime safe: one pass over the window, allocates nothing
 * @example
 * traceArea({ points: [1, 2, 4], from: 0, step: 10 }, 5, 20) // 38.75
 */
export function traceArea(trace: Trace, low: number, high: number): number {
  return integrate(trace, low, high, ofValue);
}

/**
 * Integral of the square of a trace in a window of its axis, with straight lines between the points; exact for
 * those.
 *
 * @returns (unit of the values)² times that of the axis; NaN as for the area
 * @realtime safe: one pass over the window, allocates nothing
 * @example
 * traceEnergy({ points: [0, 3], from: 0, step: 1 }, 0, 1) // 3
 */
export function traceEnergy(trace: Trace, low: number, high: number): number {
  return integrate(trace, low, high, ofSquare);
}

/** Where the last point stands, unit of the axis. */
export function traceEnd({ points, from, step }: Trace): number {
  return from + step * (points.length - 1);
}

function integrate(trace: Trace, low: number, high: number, integral: Integral): number {
  const from = placeOf(trace, low);
  const to = placeOf(trace, high);
  if (!(from <= to)) return NaN;
  const { points, step } = trace;
  let sum = 0;
  let left = heightAt(points, from);
  for (let at = from; at < to;) {
    const next = Math.min(Math.floor(at) + 1, to);
    const right = heightAt(points, next);
    sum += (next - at) * integral(left, right);
    left = right;
    at = next;
  }
  return sum * step;
}
