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

const stepsMax = 40;
/** A step of less than this share of the range, or of the standard error, ends the search. */
const stepShare = 1e-11;
const errorShare = 1e-3;
const roundingShare = 1e-9;

/**
 * Width of the backlash of an actuator, from the distance of the two ways: with a play of width b the way up
 * shows f(u − b/2), the way down f(u + b/2). The width is the one at which both ways, shifted by half of it
 * each, lie on one smooth curve: residuals and slope of that curve say by Gauss and Newton how far to go. What
 * the smoothing flattens is the same on both ways and falls out.
 *
 * A sweep too fast for the plant parts the two ways in the same way: repeat it at another speed to tell the two
 * apart. The backlash must be narrower than the hills of the map. Standard errors come out about a tenth too large.
 *
 * @param lines one or more; those of a map are judged together
 * @returns unit of the actuator; below 0 by some standard errors where there is none; NaN where the map is too
 * flat, or the noise too strong, to tell
 * @throws analysis.invalid-input, analysis.too-little-data below six values in a line
 * @source W. Härdle and J. S. Marron (1990), "Semiparametric comparison of regression curves", Annals of
 * Statistics 18:63–89, for a shift; the play model and its derivatives are derived here
 */
export function backlashWidth(lines: readonly SweepPair[]): Estimate {
  checkSettings([lines.length > 0, 'lines', 'must be one or more.']);
  const widths = lines.map(smoothingWidth);
  const rangeOf = ({ values }: SweepPair) => values[values.length - 1]! - values[0]!;
  const range = Math.max(...lines.map(rangeOf));
  let backlash = 0;
  for (let i = 0; i < stepsMax; i += 1) {
    const { pull, raw, squares, spread } = total(lines.map((line, k) => align(line, backlash, widths[k]!)));
    if (isFlat(lines, raw)) return noEstimate();
    const step = -pull / raw;
    // Ways that are still apart look like noise: whether the slope stands out of it counts only at the end.
    const standardError = squares > raw / 2 ? Math.sqrt(spread / (raw * squares)) : NaN;
    backlash += step;
    if (Math.abs(step) <= Math.max(stepShare * range, errorShare * (standardError || 0))) {
      return Number.isNaN(standardError) ? noEstimate() : { value: backlash, standardError };
    }
    if (Math.abs(backlash) > range) return noEstimate();
  }
  return noEstimate();
}

function smoothingWidth({ values, up, down }: SweepPair): number {
  checkSeries(up, 'up', values.length);
  checkSeries(down, 'down', values.length);
  return smoothCurve(
    values,
    Array.from(values, (_, i) => (up[i]! + down[i]!) / 2),
  ).width;
}

/** Sums over the samples of a line, with d the derivative of a residual by the backlash. */
interface Alignment {
  /** Σ residual·d. */
  pull: number;
  /** Σ d². */
  raw: number;
  /** Σ d² without what the scatter of the slope adds to it. */
  squares: number;
  /** Σ d² times the variance of a sample. */
  spread: number;
}

/** How the two ways lie to each other once each is shifted by half of a supposed backlash. */
function align({ values, up, down }: SweepPair, backlash: number, width: number): Alignment {
  const xs = [
    ...Array.from(values, (value) => value - backlash / 2),
    ...Array.from(values, (value) => value + backlash / 2),
  ];
  const ys = [...Array.from(up), ...Array.from(down)];
  const curve = smoothCurve(xs, ys, { width });
  const sums = { pull: 0, raw: 0, squares: 0, spread: 0 };
  xs.forEach((x, i) => {
    const { value, slope } = curve.at(x);
    const derivative = (i < values.length ? 1 : -1) * (slope.value / 2);
    const square = derivative * derivative;
    sums.pull += (ys[i]! - value.value) * derivative;
    sums.raw += square;
    sums.squares += square - (slope.standardError / 2) ** 2;
    sums.spread += square * curve.noise ** 2;
  });
  return sums;
}

function total(parts: readonly Alignment[]): Alignment {
  return parts.reduce((a, b) => ({
    pull: a.pull + b.pull,
    raw: a.raw + b.raw,
    squares: a.squares + b.squares,
    spread: a.spread + b.spread,
  }));
}

/** True where all that the slope does to the objective over the range is rounding. */
function isFlat(lines: readonly SweepPair[], raw: number): boolean {
  return lines.every(({ values, up }) => {
    const range = values[values.length - 1]! - values[0]!;
    const size = Array.from(up).reduce((greatest, value) => Math.max(greatest, Math.abs(value)), 0);
    return Math.sqrt(raw / values.length) * range <= roundingShare * size;
  });
}
