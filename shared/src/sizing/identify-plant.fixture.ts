import { fitStepResponse } from '../identification/step-response.js';
import { readSurveyCurve } from '../identification/survey-curve.js';
import type { SurveySample } from '../identification/survey-map.types.js';
import { readSurveySurface } from '../identification/survey-surface.js';
import { RunningStatistics } from '../signals/running-statistics.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { describePlant } from './describe-plant.js';
import type { SizingPlant } from './sizing-plant.schema.js';

/** −½·xᵀHx behind one lag, with white noise. */
export interface QuadraticPlant {
  scanS: number;
  timeConstantS: number;
  noise: number;
  /** H. */
  curvature: number[][];
  best: number[];
  half: number;
}

export class PlantCourse {
  private readonly random: SeededNoise;
  private answer: number;

  constructor(
    readonly plant: QuadraticPlant,
    seed: number,
    start: readonly number[],
  ) {
    this.random = new SeededNoise(seed);
    this.answer = this.valueAt(start);
  }

  /** Objective without lag and noise; 0 at the best point. */
  valueAt(applied: readonly number[]): number {
    const { curvature, best } = this.plant;
    const x = applied.map((value, i) => value - best[i]!);
    return -curvature.reduce((sum, row, i) => sum + x[i]! * row.reduce((s, h, j) => s + h * x[j]!, 0), 0) / 2;
  }

  /** What is read a scan after the actuators were put there. */
  scan(applied: readonly number[]): number {
    const { timeConstantS, scanS, noise } = this.plant;
    const approach = timeConstantS > 0 ? 1 - Math.exp(-scanS / timeConstantS) : 1;
    this.answer += approach * (this.valueAt(applied) - this.answer);
    return this.answer + noise * this.random.normal();
  }
}

/** Step test and survey on the noisy plant, by the code of identification alone. */
export function identify(plant: QuadraticPlant, seed: number): SizingPlant {
  const { scanS, half, best } = plant;
  const start = best.map(() => -half);
  const course = new PlantCourse(plant, seed, start);
  const spanScans = Math.max(80, Math.ceil((10 * plant.timeConstantS) / scanS));
  const values: number[] = [];
  for (let i = 0; i < spanScans / 4; i += 1) values.push(course.scan(start));
  const stepAtS = (values.length - 1) * scanS;
  const stepped = start.map((value, i) => (i === 0 ? 0 : value));
  for (let i = 0; i < spanScans; i += 1) values.push(course.scan(stepped));
  const timesS = values.map((_, i) => i * scanS);
  const step = fitStepResponse({ timesS, values, stepAtS, stepSize: half });
  const dwellScans = Math.max(20, Math.ceil((6 * step.timeConstantS.value) / scanS));
  const visit = (applied: readonly number[]) => dwell(course, applied, dwellScans);
  const actuators = best.map(() => ({ min: -2 * half, max: 2 * half }));
  return describePlant({ scanS, step, peak: surveyed(plant, visit), actuators });
}

/** Waits for half of the dwell, then averages. */
function dwell(course: PlantCourse, applied: readonly number[], scans: number): SurveySample {
  const statistics = new RunningStatistics();
  for (let i = 0; i < scans; i += 1) course.scan(applied);
  for (let i = 0; i < 2 * scans; i += 1) statistics.add(course.scan(applied));
  return { objective: statistics.mean, standardError: statistics.standardError, isValid: true };
}

function surveyed({ half, best }: QuadraticPlant, visit: (applied: readonly number[]) => SurveySample) {
  const line = Array.from(
    { length: best.length === 1 ? 21 : 9 },
    (_, i, all = best.length === 1 ? 20 : 8) => {
      return -half + (2 * half * i) / all;
    },
  );
  if (best.length === 1) {
    const up = line.map((value) => ({ value, ...visit([value]) }));
    const peak = readSurveyCurve(up, [], 'maximise').hills[0]?.peak;
    if (!peak) throw new Error('The survey found no peak.');
    return peak;
  }
  const up = line.flatMap((y) => line.map((x) => visit([x, y])));
  const peak = readSurveySurface({ xs: line, ys: line, up, down: [] }, 'maximise').hills[0]?.peak;
  if (!peak) throw new Error('The survey found no peak.');
  return peak;
}
