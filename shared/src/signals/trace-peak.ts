/** The highest point of a trace. */
export interface TracePeak {
  /** Place in samples from the first, between samples where the parabola says so. */
  position: number;
  /** Height there, unit of the values. */
  height: number;
  /** Second difference at the peak, unit per sample²; zero or below. */
  curvature: number;
}

/**
 * Highest point of a trace, refined by the parabola through the highest sample and its two neighbours; exact for a
 * parabola. At an end, or on a plateau, the sample itself.
 *
 * @returns null where the trace is empty or a value is no finite number
 * @source parabolic interpolation, e.g. J. O. Smith (2011), "Spectral Audio Signal Processing"
 * @realtime safe in time (one pass); allocates one small object
 * @example
 * tracePeak([0, 3, 4, 3]) // { position: 2, height: 4, curvature: -2 }
 */
export function tracePeak(values: ArrayLike<number>): TracePeak | null {
  const peak = { position: NaN, height: NaN, curvature: NaN };
  return findTracePeak(values, peak) ? peak : null;
}

/**
 * The same, put into `peak`.
 *
 * @returns false where there is none; `peak` is then left as it is
 * @realtime safe: one pass, allocates nothing
 */
export function findTracePeak(values: ArrayLike<number>, peak: TracePeak): boolean {
  let top = 0;
  for (let i = 0; i < values.length; i += 1) {
    if (!Number.isFinite(values[i])) return false;
    if (values[i]! > values[top]!) top = i;
  }
  if (values.length === 0) return false;
  peak.position = top;
  peak.height = values[top]!;
  peak.curvature = 0;
  if (top === 0 || top === values.length - 1) return true;
  const slope = (values[top + 1]! - values[top - 1]!) / 2;
  const curvature = values[top + 1]! - 2 * peak.height + values[top - 1]!;
  if (curvature === 0) return true;
  peak.position = top - slope / curvature;
  peak.height -= (slope * slope) / (2 * curvature);
  peak.curvature = curvature;
  return true;
}
