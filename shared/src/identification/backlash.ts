import { checkSeries, checkSettings } from '../signals/check-settings.js';
import { noEstimate, type Estimate } from '../signals/estimate.js';
import { smoothCurve } from './smooth-curve.js';

/** One line of a survey, gone up and gone down over the same actuator values. */
export interface SweepPair {
  /** Actuator values, rising. */
  values: ArrayLike<number>;
  /** Objective on the way up and on the way down, by value. */
  up: ArrayLike<number>;
  down: ArrayLike<number>;
}

const roundingShare = 1e-9;

/**
 * Width of the backlash of an actuator, from the distance of the two ways: with a play of width b the way up
 * shows f(u − b/2), the way down f(u + b/2), so that up − down = −b·f'(u), to third order in b. The slope f' is
 * that of the smoothed mean of the two ways; its own scatter, which would make b too small, is taken out of the
 * sum of its squares.
 *
 * A sweep too fast for the plant parts the two ways in the same way: repeat it at another speed to tell the two
 * apart.
 *
 * @param lines one or more; those of a map are judged together
 * @returns unit of the actuator; below 0 by some standard errors where there is none; NaN where the map is too
 * flat to tell
 * @throws analysis.invalid-input, analysis.too-little-data
 * @source regression through the origin; correction for the scatter of the regressor: W. A. Fuller (1987),
 * "Measurement Error Models", section 1.2; the model is derived here
 */
export function backlashWidth(lines: readonly SweepPair[]): Estimate {
  const gaps = lines.flatMap(gapsOf);
  checkSettings([lines.length > 0, 'lines', 'must be one or more.']);
  const raw = gaps.reduce((sum, { slope }) => sum + slope * slope, 0);
  const squares = raw - gaps.reduce((sum, { slopeError }) => sum + slopeError * slopeError, 0);
  if (!(squares > raw / 2) || isFlat(lines, Math.sqrt(raw / gaps.length))) return noEstimate();
  const width = -gaps.reduce((sum, { gap, slope }) => sum + gap * slope, 0) / squares;
  const rest = gaps.reduce((sum, { gap, slope }) => sum + (gap + width * slope) ** 2, 0);
  const noise = Math.sqrt(rest / (gaps.length - 1));
  return { value: width, standardError: (noise * Math.sqrt(raw)) / squares };
}

/** True where all that the slope does to the objective is rounding. */
function isFlat(lines: readonly SweepPair[], slope: number): boolean {
  return lines.every(({ values, up }) => {
    const range = values[values.length - 1]! - values[0]!;
    const size = Array.from(up).reduce((greatest, value) => Math.max(greatest, Math.abs(value)), 0);
    return slope * range <= roundingShare * size;
  });
}

interface Gap {
  gap: number;
  slope: number;
  slopeError: number;
}

function gapsOf({ values, up, down }: SweepPair): Gap[] {
  checkSeries(up, 'up', values.length);
  checkSeries(down, 'down', values.length);
  const mean = Array.from(values, (_, i) => (up[i]! + down[i]!) / 2);
  const { width } = smoothCurve(values, mean);
  // The width that predicts best still flattens slopes; half of it does so four times less.
  const curve = smoothCurve(values, mean, { width: width / 2 });
  return Array.from(values, (value, i) => {
    const { slope } = curve.at(value);
    return { gap: up[i]! - down[i]!, slope: slope.value, slopeError: slope.standardError };
  });
}
