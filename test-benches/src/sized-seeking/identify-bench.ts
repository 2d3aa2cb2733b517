import {
  describePlant,
  DomainError,
  fitStepResponse,
  readSurveyCurve,
  readSurveySurface,
  RunningStatistics,
  type SizingPlant,
  type SurveySample,
} from '@cresthold/shared';
import type { BenchDrive } from './bench-drive.js';
import type { SizedBench } from './sized-bench.js';

export interface IdentifiedBench {
  plant: SizingPlant;
  /** Best place by the surveys. */
  best: number[];
}

/** Nothing can be sized where no survey shows a peak. */
export class NoPeakError extends Error {}

interface Span {
  from: number;
  to: number;
  points: number;
}

/** A coarse survey, a fine one around its best, and a step of the first actuator beside it. */
export function identifyBench(bench: SizedBench, drive: BenchDrive): IdentifiedBench {
  const { actuators, coarsePoints, scanS } = bench;
  const whole = actuators.map(({ min, max }) => ({ from: min, to: max, points: coarsePoints }));
  const coarse = survey(bench, drive, whole);
  const steps = actuators.map(({ min, max }) => (max - min) / (coarsePoints - 1));
  const peak = finerPeak(bench, drive, bestOf(coarse)) ?? peakOf(coarse, whole);
  if (!peak) throw new NoPeakError('No survey shows a peak.');
  const best = [peak.position].flat().map(({ value }) => value);
  const step = stepBeside(bench, drive, best, (steps[0] ?? NaN) * saferSide(bench, coarse, best));
  const plant = describePlant({
    scanS,
    step,
    peak,
    actuators: actuators.map(({ min, max, resolution, slewPerS, driftPerS }) => ({
      min,
      max,
      resolution,
      slewPerS,
      driftPerS,
    })),
  });
  return { plant, best };
}

/** Finer surveys, each around the best of the one before, until one shows a peak. */
const finerSurveysMax = 3;

/** @returns null where noise, drift or a cliff hide the peak */
function finerPeak(bench: SizedBench, drive: BenchDrive, start: readonly number[]) {
  const { actuators, coarsePoints, finePoints } = bench;
  let around = start;
  for (let i = 0; i < finerSurveysMax; i += 1) {
    const near = actuators.map(({ min, max }, k) => {
      const [middle = NaN, step] = [around[k], (max - min) / (coarsePoints - 1)];
      return { from: Math.max(min, middle - step), to: Math.min(max, middle + step), points: finePoints };
    });
    const visits = survey(bench, drive, near);
    const peak = peakOf(visits, near);
    if (peak) return peak;
    around = bestOf(visits);
  }
  return null;
}

/**
 * On a flank the objective answers nearly in proportion. The safer one is where there is room for the largest step, and
 * of two such the one on which the coarse survey was valid everywhere and lost least: away from a cliff.
 *
 * @returns 1 upwards, −1 downwards
 */
function saferSide(
  { actuators, coarsePoints }: SizedBench,
  coarse: readonly Visit[],
  best: readonly number[],
): 1 | -1 {
  const steps = actuators.map(({ min, max }) => (max - min) / (coarsePoints - 1));
  const [step = NaN] = steps;
  const meanOn = (side: 1 | -1): number => {
    const end = (best[0] ?? NaN) + side * 3 * Math.max(...reaches) * step;
    if (!(end >= (actuators[0]?.min ?? NaN) && end <= (actuators[0]?.max ?? NaN))) return -Infinity;
    const onTheWay = coarse.filter(({ at }) =>
      at.every((value, i) => {
        const away = (value - (best[i] ?? NaN)) / (steps[i] ?? NaN);
        return i === 0 ? side * away > 0 && side * away <= 4 : Math.abs(away) <= 1;
      }),
    );
    const values = onTheWay.map(({ isValid, objective }) => (isValid ? objective : -Infinity));
    return values.reduce((sum, value) => sum + value, 0) / values.length;
  };
  return meanOn(1) > meanOn(-1) ? 1 : -1;
}

interface Visit extends SurveySample {
  at: number[];
}

const line = ({ from, to, points }: Span) =>
  Array.from({ length: points }, (_, i) => from + ((to - from) * i) / (points - 1));

/** The first actuator moves fastest. */
function survey(bench: SizedBench, drive: BenchDrive, spans: readonly Span[]): Visit[] {
  const places = spans.reduce<number[][]>(
    (rows, span) => line(span).flatMap((value) => rows.map((row) => [...row, value])),
    [[]],
  );
  let from = places[0] ?? [];
  return places.map((at) => {
    drive.goTo(from, at);
    from = at;
    return { at, ...dwell(bench, drive, at) };
  });
}

function dwell({ dwellS, scanS }: SizedBench, drive: BenchDrive, at: readonly number[]): SurveySample {
  const scans = Math.ceil(dwellS / scanS);
  const statistics = new RunningStatistics();
  for (let i = 0; i < scans; i += 1) drive.scan(at);
  for (let i = 0; i < scans; i += 1) statistics.add(drive.scan(at));
  const { mean, standardError } = statistics;
  return { objective: mean, standardError, isValid: Number.isFinite(mean) };
}

function bestOf(visits: readonly Visit[]): number[] {
  const valid = visits.filter(({ isValid }) => isValid);
  return valid.reduce((a, b) => (b.objective > a.objective ? b : a)).at;
}

function peakOf(visits: readonly Visit[], spans: readonly Span[]) {
  const [xs = [], ys] = spans.map(line);
  const findings = ys
    ? readSurveySurface({ xs, ys, up: visits, down: [] }, 'maximise')
    : readSurveyCurve(
        visits.map((visit) => ({ ...visit, value: visit.at[0] ?? NaN })),
        [],
        'maximise',
      );
  return findings.hills[0]?.peak ?? null;
}

/** Shares of the record before the step and after it, in dwells. */
const record = { before: 1, after: 4 };
const stepScansMin = 10;

/** Steps that are tried one after the other, coarse steps of the survey; a larger one where that showed too little. */
const reaches = [0.5, 1, 1.5];
/** Standard error of a time constant that is good enough, as share of it. */
const clearShare = 0.3;

/** A step of the first actuator from one reach beside the best to three, and back. */
function stepBeside(bench: SizedBench, drive: BenchDrive, best: readonly number[], coarseStep: number) {
  let fault: unknown = null;
  for (const reach of reaches) {
    const beside = (count: number) =>
      best.map((value, i) => (i === 0 ? value + count * reach * coarseStep : value));
    try {
      const step = stepTest(bench, drive, beside(1), beside(3));
      const { value, standardError } = step.timeConstantS;
      if (value <= bench.scanS || standardError < clearShare * value || reach === reaches.at(-1)) return step;
    } catch (error) {
      if (!(error instanceof DomainError)) throw error;
      fault = error;
    } finally {
      drive.goTo(beside(3), best);
    }
  }
  throw fault;
}

function stepTest(bench: SizedBench, drive: BenchDrive, from: readonly number[], to: readonly number[]) {
  const { scanS, dwellS } = bench;
  const scans = Math.max(stepScansMin, Math.ceil(dwellS / scanS));
  drive.goTo(to, from);
  for (let i = 0; i < scans; i += 1) drive.scan(from);
  const values: number[] = [];
  for (let i = 0; i < record.before * scans; i += 1) values.push(drive.scan(from));
  const stepAtS = (values.length - 1) * scanS;
  for (let i = 0; i < record.after * scans; i += 1) values.push(drive.scan(to));
  const timesS = values.map((_, i) => i * scanS);
  return fitStepResponse({ timesS, values, stepAtS, stepSize: (to[0] ?? NaN) - (from[0] ?? NaN) });
}
