import { RunningStatistics } from '../../signals/running-statistics.js';
import type { ObjectiveSample } from '../sequencer.types.js';
import { ObjectiveAverage } from './objective-average.js';

/** Whole dither periods whose mean is the objective at the start. */
const startPeriods = 2;
/** Whole dither periods whose mean is the objective at the end. */
const endPeriods = 5;

/**
 * Means of estimate and objective over whole dither periods, in which the dither and its first-order answer
 * average out. A period that an invalid objective broke is not counted.
 */
export class SeekPeriods {
  /** Mean estimate of the last whole period; NaN before the first. */
  lastEstimate = NaN;
  private readonly estimate = new RunningStatistics();
  private readonly objective = new ObjectiveAverage();
  private readonly objectives = new Float64Array(endPeriods);
  private readonly start = new RunningStatistics();
  private elapsedS = 0;
  private count = 0;

  constructor(private readonly periodS: number) {}

  /** Begins the present period anew and forgets the last ones: the estimate has jumped. */
  interrupt(): void {
    this.estimate.clear();
    this.objective.clear();
    this.elapsedS = 0;
    this.count = 0;
    this.lastEstimate = NaN;
  }

  /** @returns true in the scan that completes a period */
  add(estimate: number, sample: Readonly<ObjectiveSample>, dtS: number): boolean {
    this.estimate.add(estimate);
    this.objective.add(sample);
    this.elapsedS += dtS;
    if (this.elapsedS + dtS / 2 < this.periodS) return false;
    // What is left over goes into the next period, so that the cut does not drift against the dither.
    this.elapsedS = Math.max(0, this.elapsedS - this.periodS);
    const slot = this.count % endPeriods;
    this.lastEstimate = this.estimate.mean;
    this.objectives[slot] = this.objective.mean;
    if (this.start.count < startPeriods) this.start.add(this.objective.mean);
    this.count += 1;
    this.estimate.clear();
    this.objective.clear();
    return true;
  }

  /** Mean of the objective over the last whole periods; NaN before the first. */
  get meanObjective(): number {
    return mean(this.objectives, this.count);
  }

  get objectiveAtStart(): number {
    return this.start.mean;
  }
}

function mean(ring: Float64Array, count: number): number {
  const used = Math.min(count, ring.length);
  let sum = 0;
  for (let i = 0; i < used; i += 1) sum += ring[i] ?? NaN;
  return sum / used;
}
