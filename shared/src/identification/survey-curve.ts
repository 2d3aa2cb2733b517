import { DomainError } from '../errors/domain-error.js';
import type { Direction } from '../objectives/objective.schema.js';
import { checkSettings } from '../signals/check-settings.js';
import { noEstimate, type Estimate } from '../signals/estimate.js';
import { backlashWidth } from './backlash.js';
import { fitPeak } from './fit-peak.js';
import { findHills, lineNeighbours } from './hills.js';
import { smoothCurve, type SmoothCurve } from './smooth-curve.js';
import { distinctErrors, type SurveyCurveHill, type SurveySample } from './survey-map.types.js';

/** A sample of a survey over one actuator. */
export interface SurveyCurveSample extends SurveySample {
  /** Applied value, actuator unit. */
  value: number;
}

export interface SurveyCurveFindings {
  /** Samples that count: valid on every visit, up and down averaged, by rising value. */
  samples: SurveyCurveSample[];
  /** Most prominent first; the first is the best of all. */
  hills: SurveyCurveHill[];
  /** Null with fewer than six samples that count. */
  curve: SmoothCurve | null;
  /**
   * Standard error of one sample: as measured where known, otherwise the scatter about the curve; NaN where
   * neither.
   */
  sampleError: number;
  /** Difference of the two ways, up less down, where it is greatest in size; objective unit. */
  greatestGap: Estimate;
  /** Width of the actuator's backlash, actuator unit; see `backlashWidth`. */
  backlash: Estimate;
}

/** Samples on each side of a peak that a parabola is laid through, at least. */
const samplesBeside = 3;

/**
 * What a survey over one actuator shows.
 *
 * @param up samples on the way up, by rising value
 * @param down the same values on the way down, in the order of `up`; empty without a way down
 * @param smoothedMax the curve, which costs the square of it, is laid through so many samples at most: neighbours are
 * averaged first
 * @throws analysis.invalid-input where the two ways do not match; analysis.too-little-data where no value is valid
 */
export function readSurveyCurve(
  up: readonly SurveyCurveSample[],
  down: readonly SurveyCurveSample[],
  direction: Direction,
  smoothedMax: number = Infinity,
): SurveyCurveFindings {
  checkSettings(
    [down.length === 0 || down.length === up.length, 'down', 'must be empty or as long as up.'],
    [up.every((sample, i) => i === 0 || sample.value > up[i - 1]!.value), 'up', 'must have rising values.'],
  );
  const pairs = up.flatMap((sample, i) => {
    const other = down[i] ?? sample;
    return isGood(sample) && isGood(other) ? [{ up: sample, down: other }] : [];
  });
  if (pairs.length === 0) throw new DomainError('analysis.too-little-data');
  const hasDown = down.length > 0;
  const samples = pairs.map((pair) => (hasDown ? join(pair.up, pair.down) : pair.up));
  const curve = samples.length >= 6 ? curveThrough(samples, smoothedMax) : null;
  const sampleError = errorOf(samples, curve);
  return {
    samples,
    hills: hillsOf(samples, direction, sampleError, curve),
    curve,
    sampleError,
    greatestGap: hasDown ? gapOf(pairs) : noEstimate(),
    backlash: hasDown && samples.length >= 6 ? backlashOf(pairs) : noEstimate(),
  };
}

function curveThrough(samples: readonly SurveyCurveSample[], most: number): SmoothCurve {
  const size = Math.ceil(samples.length / most) || 1;
  const groups = Array.from({ length: Math.ceil(samples.length / size) }, (_, k) =>
    samples.slice(k * size, (k + 1) * size),
  );
  const means = (of: (sample: SurveyCurveSample) => number) =>
    groups.map((group) => group.reduce((sum, sample) => sum + of(sample), 0) / group.length);
  return smoothCurve(
    means((sample) => sample.value),
    means((sample) => sample.objective),
  );
}

interface Pair {
  up: SurveyCurveSample;
  down: SurveyCurveSample;
}

function isGood(sample: SurveyCurveSample): boolean {
  return sample.isValid && Number.isFinite(sample.objective);
}

function join(up: SurveyCurveSample, down: SurveyCurveSample): SurveyCurveSample {
  return {
    value: (up.value + down.value) / 2,
    objective: (up.objective + down.objective) / 2,
    standardError: Math.hypot(up.standardError, down.standardError) / 2,
    isValid: true,
  };
}

function errorOf(samples: readonly SurveyCurveSample[], curve: SmoothCurve | null): number {
  const known = samples.map((sample) => sample.standardError).filter((error) => error > 0);
  if (known.length === 0) return curve?.noise ?? NaN;
  return Math.sqrt(known.reduce((sum, error) => sum + error * error, 0) / known.length);
}

function hillsOf(
  samples: readonly SurveyCurveSample[],
  direction: Direction,
  sampleError: number,
  curve: SmoothCurve | null,
): SurveyCurveHill[] {
  const sign = direction === 'maximise' ? 1 : -1;
  const heights = samples.map((sample) => sign * sample.objective);
  const threshold = Number.isFinite(sampleError) ? distinctErrors * Math.SQRT2 * sampleError : 0;
  return findHills(heights, lineNeighbours(samples.length)).map((hill, rank) => {
    const sample = samples[hill.index]!;
    const isDistinct = rank === 0 || hill.prominence > threshold;
    return {
      index: hill.index,
      value: sample.value,
      objective: sample.objective,
      prominence: hill.prominence,
      isDistinct,
      peak: isDistinct ? peakAt(samples, hill.index, sign, curve?.width ?? 0) : null,
    };
  });
}

/**
 * Parabola within the width of the smoothing, but not wider than a quarter of the range, and over three samples
 * a side.
 */
function peakAt(
  samples: readonly SurveyCurveSample[],
  index: number,
  sign: number,
  width: number,
): SurveyCurveHill['peak'] {
  const values = samples.map((sample) => sample.value);
  const near = values[index]!;
  const sorted = values.map((value) => Math.abs(value - near)).sort((a, b) => a - b);
  const least = sorted[Math.min(2 * samplesBeside, sorted.length - 1)]!;
  const quarter = (values[values.length - 1]! - values[0]!) / 4;
  const errors = samples.map((sample) => sample.standardError);
  try {
    const fit = fitPeak(
      values,
      samples.map((sample) => sample.objective),
      { near, halfWidth: Math.max(least, Math.min(width, quarter)) },
      errors.every((error) => error > 0) ? errors : undefined,
    );
    return sign * fit.curvature.value < 0 ? fit : null;
  } catch (error) {
    if (error instanceof DomainError) return null;
    throw error;
  }
}

function gapOf(pairs: readonly Pair[]): Estimate {
  const greatest = pairs.reduce((a, b) =>
    Math.abs(b.up.objective - b.down.objective) > Math.abs(a.up.objective - a.down.objective) ? b : a,
  );
  return {
    value: greatest.up.objective - greatest.down.objective,
    standardError: Math.hypot(greatest.up.standardError, greatest.down.standardError),
  };
}

function backlashOf(pairs: readonly Pair[]): Estimate {
  return backlashWidth([
    {
      values: pairs.map((pair) => pair.up.value),
      up: pairs.map((pair) => pair.up.objective),
      down: pairs.map((pair) => pair.down.objective),
    },
  ]);
}
