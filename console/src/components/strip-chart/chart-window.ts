import type { RingBuffer } from '../../live/index.js';

/** Times in s since 1970 and one list of values per column, null where there is no good one. */
export type ChartRows = [number[], ...(number | null)[][]];

interface ChartWindow {
  fromMs: number;
  toMs: number;
  /** Greatest number of points worth drawing; more are drawn as least and greatest per bucket. */
  maxPoints: number;
}

/**
 * The rows of a span, ready to draw. Where there are more than `maxPoints`, each bucket of rows becomes
 * its least and its greatest value in the order in which they came, so that no spike is lost.
 */
export function chartWindow(ring: RingBuffer, columns: readonly string[], window: ChartWindow): ChartRows {
  /** One row more on the left, so that the line comes in from the edge. */
  const first = Math.max(0, ring.firstAtOrAfter(window.fromMs) - 1);
  const end = ring.firstAtOrAfter(window.toMs + 1);
  const size = Math.ceil((end - first) / Math.max(1, Math.floor(window.maxPoints / 2)));
  return size <= 2 ? exactRows(ring, columns, first, end) : bucketRows(ring, columns, first, end, size);
}

function exactRows(ring: RingBuffer, columns: readonly string[], first: number, end: number): ChartRows {
  const indices = Array.from({ length: end - first }, (_, offset) => first + offset);
  const valuesOf = (column: string) => indices.map((index) => orNull(ring.valueAt(column, index)));
  return [indices.map((index) => ring.timeAt(index) / 1000), ...columns.map(valuesOf)];
}

function bucketRows(
  ring: RingBuffer,
  columns: readonly string[],
  first: number,
  end: number,
  size: number,
): ChartRows {
  /** Buckets lie at fixed rows, not at the window's edge, so that the drawing does not shimmer as it moves. */
  const origin = ring.version - ring.length;
  const start = first - ((origin + first) % size);
  const times: number[] = [];
  const lists: (number | null)[][] = columns.map(() => []);
  for (let from = start; from < end; from += size) {
    const [low, high] = [Math.max(0, from), Math.min(end, from + size)];
    times.push(ring.timeAt(low) / 1000, ring.timeAt(high - 1) / 1000);
    columns.forEach((column, at) => lists[at]?.push(...extremes(ring, column, low, high)));
  }
  return [times, ...lists];
}

function extremes(
  ring: RingBuffer,
  column: string,
  low: number,
  high: number,
): [number | null, number | null] {
  let [least, greatest, leastAt, greatestAt] = [Infinity, -Infinity, low, low];
  for (let index = low; index < high; index += 1) {
    const value = ring.valueAt(column, index);
    if (value < least) [least, leastAt] = [value, index];
    if (value > greatest) [greatest, greatestAt] = [value, index];
  }
  if (least === Infinity) return [null, null];
  return leastAt <= greatestAt ? [least, greatest] : [greatest, least];
}

function orNull(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}

/** Least and greatest value of a column from a time on; null where there is no good one. */
export function extentSince(
  ring: RingBuffer,
  column: string,
  fromMs: number,
): { least: number; greatest: number } | null {
  const [a, b] = extremes(ring, column, ring.firstAtOrAfter(fromMs), ring.length);
  return a === null || b === null ? null : { least: Math.min(a, b), greatest: Math.max(a, b) };
}
