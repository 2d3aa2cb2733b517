import { DomainError } from '../errors/domain-error.js';
import type { Direction } from '../objectives/objective.schema.js';
import { checkSettings } from '../signals/check-settings.js';
import { noEstimate, type Estimate } from '../signals/estimate.js';
import { backlashWidth, type SweepPair } from './backlash.js';
import { fitSurfacePeak, type SurfacePeakFit, type SurfacePoint } from './fit-surface-peak.js';
import { findHills, gridNeighbours } from './hills.js';
import { distinctErrors, type SurveyHill, type SurveySample } from './survey-map.types.js';

/**
 * A survey over two actuators on a grid: for each y in turn, x goes up and, where there is a way down, down
 * again.
 */
export interface SurveyGrid {
  /** Values of the first actuator, rising. */
  xs: readonly number[];
  /** Values of the second, rising. */
  ys: readonly number[];
  /** Samples with x going up, row by row: index = row of y · number of xs + column of x. */
  up: readonly SurveySample[];
  /** The same with x going down; empty without a way down. */
  down: readonly SurveySample[];
}

export interface SurveySurfaceHill extends SurveyHill {
  x: number;
  y: number;
  /**
   * By a paraboloid through the samples around; null where they determine none, and of hills that are not
   * distinct.
   */
  peak: SurfacePeakFit | null;
}

export interface SurveySurfaceFindings {
  /** Mean objective per place, row by row; NaN where a visit was not valid. */
  objectives: number[];
  /** Most prominent first; the first is the best of all. */
  hills: SurveySurfaceHill[];
  /** Standard error of one sample; NaN where unknown. */
  sampleError: number;
  /** Backlash of the first actuator, from all rows together. */
  backlash: Estimate;
}

/** Half axes of the window of a peak, in grid steps. */
const stepsBeside = 2.5;
/** Fewest valid samples in a row for it to tell the backlash. */
const rowSamplesMin = 6;

/**
 * What a survey over two actuators shows.
 *
 * @throws analysis.invalid-input where the samples do not fill the grid; analysis.too-little-data where none is
 * valid
 */
export function readSurveySurface(grid: SurveyGrid, direction: Direction): SurveySurfaceFindings {
  const { xs, ys, up, down } = grid;
  const isRising = (values: readonly number[]) =>
    values.every((value, i) => i === 0 || value > values[i - 1]!);
  checkSettings(
    [isRising(xs) && xs.length > 1, 'xs', 'must be two or more rising values.'],
    [isRising(ys) && ys.length > 1, 'ys', 'must be two or more rising values.'],
    [up.length === xs.length * ys.length, 'up', 'must be one sample per place of the grid.'],
    [down.length === 0 || down.length === up.length, 'down', 'must be empty or as many as up.'],
  );
  const objectives = up.map((sample, i) => joined(sample, down[i]));
  if (!objectives.some(Number.isFinite)) throw new DomainError('analysis.too-little-data');
  const sampleError = errorOf(grid);
  const sign = direction === 'maximise' ? 1 : -1;
  const threshold = Number.isFinite(sampleError) ? distinctErrors * Math.SQRT2 * sampleError : 0;
  const heights = objectives.map((objective) => sign * objective);
  const points = pointsOf(grid, objectives);
  const hills = findHills(heights, gridNeighbours(xs.length, ys.length)).map((hill, rank) => {
    const isDistinct = rank === 0 || hill.prominence > threshold;
    const [x, y] = [xs[hill.index % xs.length]!, ys[Math.floor(hill.index / xs.length)]!];
    return {
      index: hill.index,
      x,
      y,
      objective: objectives[hill.index]!,
      prominence: hill.prominence,
      isDistinct,
      peak: isDistinct ? peakAt(grid, points, [x, y], sign, sampleError) : null,
    };
  });
  return { objectives, hills, sampleError, backlash: backlashOf(grid) };
}

function joined(up: SurveySample, down: SurveySample | undefined): number {
  if (!up.isValid || down?.isValid === false) return NaN;
  return down ? (up.objective + down.objective) / 2 : up.objective;
}

/** Root mean square of the known standard errors, of a mean of two visits where there are two. */
function errorOf({ up, down }: SurveyGrid): number {
  const known = [...up, ...down].map((sample) => sample.standardError).filter((error) => error > 0);
  const square = known.reduce((sum, error) => sum + error * error, 0) / known.length;
  return Math.sqrt(square / (down.length > 0 ? 2 : 1));
}

/** The valid places with their objective. */
function pointsOf({ xs, ys }: SurveyGrid, objectives: readonly number[]): SurfacePoint[] {
  return objectives.flatMap((objective, i) =>
    Number.isFinite(objective)
      ? [{ x: xs[i % xs.length]!, y: ys[Math.floor(i / xs.length)]!, objective }]
      : [],
  );
}

function peakAt(
  { xs, ys }: SurveyGrid,
  points: readonly SurfacePoint[],
  near: readonly [number, number],
  sign: number,
  sampleError: number,
): SurfacePeakFit | null {
  const step = (values: readonly number[]) => (values[values.length - 1]! - values[0]!) / (values.length - 1);
  const halfWidths = [stepsBeside * step(xs), stepsBeside * step(ys)] as const;
  const errors = sampleError > 0 ? points.map(() => sampleError) : undefined;
  try {
    const fit = fitSurfacePeak(points, { near, halfWidths }, errors);
    return fit.principal.every((curvature) => sign * curvature.value < 0) ? fit : null;
  } catch (error) {
    if (error instanceof DomainError) return null;
    throw error;
  }
}

function backlashOf({ xs, ys, up, down }: SurveyGrid): Estimate {
  if (down.length === 0) return noEstimate();
  const lines = ys.flatMap((_, row): SweepPair[] => {
    const good = xs
      .map((_x, column) => row * xs.length + column)
      .filter((i) => up[i]!.isValid && down[i]!.isValid);
    if (good.length < rowSamplesMin) return [];
    return [
      {
        values: good.map((i) => xs[i % xs.length]!),
        up: good.map((i) => up[i]!.objective),
        down: good.map((i) => down[i]!.objective),
      },
    ];
  });
  return lines.length > 0 ? backlashWidth(lines) : noEstimate();
}
