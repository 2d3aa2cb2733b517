import type { TraceAxis } from '@cresthold/shared';
import { formatNumber, plainNumber } from '../format-quantity.js';

/** Points of a trace, and where they stand in it. */
export interface PlacedTrace {
  readonly points: ArrayLike<number>;
  /** Numbers of the points in the whole trace; null where all of them are there. */
  readonly places: ArrayLike<number> | null;
  /** Points of the whole trace. */
  readonly count: number;
}

export const wholeTrace = (points: ArrayLike<number>): PlacedTrace => ({
  points,
  places: null,
  count: points.length,
});

/** Number in the whole trace of the point at an index. */
export const placeAt = ({ places }: PlacedTrace, index: number): number => places?.[index] ?? index;

export interface TraceExtremes {
  least: number;
  greatest: number;
  /** Number of the greatest point in the whole trace. */
  greatestPlace: number;
}

/** Null where there is no point. */
export function extremesOf(trace: PlacedTrace): TraceExtremes | null {
  const { points } = trace;
  if (points.length === 0) return null;
  let [low, high] = [0, 0];
  for (let i = 1; i < points.length; i += 1) {
    if (points[i]! < points[low]!) low = i;
    if (points[i]! > points[high]!) high = i;
  }
  return { least: points[low]!, greatest: points[high]!, greatestPlace: placeAt(trace, high) };
}

/** What a trace says, in words. */
export function traceSummary(trace: PlacedTrace, axis: TraceAxis, unit: string, decimals: number): string {
  const extremes = extremesOf(trace);
  if (!extremes) return 'No points.';
  const value = (number: number) => withUnit(formatNumber(number, decimals), unit);
  const place = (number: number) => plainNumber(axis.from + number * axis.step);
  const { least, greatest, greatestPlace } = extremes;
  const span = `${place(0)} to ${withUnit(place(trace.count - 1), axis.unit)}`;
  return `${trace.count} points from ${span}; least ${value(least)}; greatest ${value(greatest)} at ${withUnit(place(greatestPlace), axis.unit)}.`;
}

export const withUnit = (text: string, unit: string) => (unit === '' ? text : `${text} ${unit}`);

/** A title with its unit, for an axis. */
export const titleWithUnit = (title: string, unit: string) => (unit === '' ? title : `${title}, ${unit}`);
