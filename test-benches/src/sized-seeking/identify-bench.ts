import {
  describePlant,
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

interface Span {
  from: number;
  to: number;
  points: number;
}

/** A coarse survey, a fine one around its best, and a step of the first actuator beside it. */
export function identifyBench(bench: SizedBench, drive: BenchDrive): IdentifiedBench {
  const { actuators, coarsePoints, finePoints, scanS } = bench;
  const whole = actuators.map(({ min, max }) => ({ from: min, to: max, points: coarsePoints }));
  const around = bestOf(survey(bench, drive, whole));
  const steps = actuators.map(({ min, max }) => (max - min) / (coarsePoints - 1));
  const near = actuators.map(({ min, max }, i) => ({
    from: Math.max(min, (around[i] ?? NaN) - (steps[i] ?? NaN)),
    to: Math.min(max, (around[i] ?? NaN) + (steps[i] ?? NaN)),
    points: finePoints,
  }));
  const peak = peakOf(survey(bench, drive, near), near);
  const best = [peak.position].flat().map(({ value }) => value);
  // On a flank the objective answers nearly in proportion; the one with more room is the safer.
  const { min, max } = actuators[0] ?? { min: NaN, max: NaN };
  const side = ((steps[0] ?? NaN) / 2) * ((best[0] ?? NaN) > (min + max) / 2 ? -1 : 1);
  const beside = (count: number) => best.map((value, i) => (i === 0 ? value + count * side : value));
  const step = stepTest(bench, drive, beside(1), beside(3));
  drive.goTo(beside(3), best);
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
  const peak = findings.hills[0]?.peak;
  if (!peak) throw new Error('The survey shows no peak.');
  return peak;
}

/** Shares of the record before the step and after it, in dwells. */
const record = { before: 1, after: 4 };

function stepTest(bench: SizedBench, drive: BenchDrive, from: readonly number[], to: readonly number[]) {
  const { scanS, dwellS } = bench;
  const scans = Math.max(20, Math.ceil(dwellS / scanS));
  drive.goTo(to, from);
  for (let i = 0; i < scans; i += 1) drive.scan(from);
  const values: number[] = [];
  for (let i = 0; i < record.before * scans; i += 1) values.push(drive.scan(from));
  const stepAtS = (values.length - 1) * scanS;
  for (let i = 0; i < record.after * scans; i += 1) values.push(drive.scan(to));
  const timesS = values.map((_, i) => i * scanS);
  return fitStepResponse({ timesS, values, stepAtS, stepSize: (to[0] ?? NaN) - (from[0] ?? NaN) });
}
