import type { RunSamples } from '../api/run-queries.js';

export interface ChartRows {
  timesS: number[];
  /** One list per column asked for. */
  values: (number | null)[][];
}

/**
 * Samples as rows of a chart. Where they are buckets, each becomes two rows, its least and its greatest
 * value, so that no spike is lost to the eye.
 */
export function chartRows(samples: RunSamples, columns: readonly string[]): ChartRows {
  const places = columns.map((column) => samples.columns.indexOf(column));
  if (samples.isExact) {
    return { timesS: samples.tS, values: places.map((place) => samples.mean[place] ?? []) };
  }
  const widthS = samples.tS.length > 1 ? (samples.tS[1] ?? 0) - (samples.tS[0] ?? 0) : 0;
  return {
    timesS: samples.tS.flatMap((timeS) => [timeS, timeS + widthS / 2]),
    values: places.map((place) => interleave(samples.min[place] ?? [], samples.max[place] ?? [])),
  };
}

function interleave(
  least: readonly (number | null)[],
  greatest: readonly (number | null)[],
): (number | null)[] {
  return least.flatMap((value, index) => [value, greatest[index] ?? null]);
}
