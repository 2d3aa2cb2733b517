import { placeAt, type PlacedTrace } from './placed-trace.js';

/** Least and greatest values of several traces over equal stretches of their axis; NaN where no point fell. */
export interface TraceBand {
  readonly low: Float64Array;
  readonly high: Float64Array;
}

/** @param stretches number of equal stretches that the axis is cut into */
export function bandOf(traces: readonly PlacedTrace[], stretches: number): TraceBand {
  const low = new Float64Array(stretches).fill(NaN);
  const high = new Float64Array(stretches).fill(NaN);
  for (const trace of traces) {
    for (let i = 0; i < trace.points.length; i += 1) {
      const share = placeAt(trace, i) / Math.max(1, trace.count - 1);
      const at = Math.min(stretches - 1, Math.floor(share * stretches));
      const point = trace.points[i]!;
      if (!(low[at]! <= point)) low[at] = point;
      if (!(high[at]! >= point)) high[at] = point;
    }
  }
  return { low, high };
}
