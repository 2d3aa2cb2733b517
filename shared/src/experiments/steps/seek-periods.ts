import { RunningStatistics } from '../../signals/running-statistics.js';
import type { ObjectiveSample } from '../sequencer.types.js';
import { ObjectiveAverage } from './objective-average.js';

/** Whole periods whose mean is the objective at the start. */
const startPeriods = 2;
/** Whole periods whose mean is the objective at the end. */
const endPeriods = 5;

/**
 * Means of estimates and objective over whole periods of the slowest dither (or whole trials), in which the dither
 * and its first-order answer average out. A period that an invalid objective broke is not counted.
 */
export class SeekPeriods {
  /** Mean estimates of the last whole period, actuator units; NaN before the first. */
  readonly lastEstimates: Float64Array;
  private readonly estimates: RunningStatistics[];
  private readonly objective = new ObjectiveAverage();
  private readonly objectives = new Float64Array(endPeriods);
  private readonly start = new RunningStatistics();
  private elapsedS = 0;
  private count = 0;

  constructor(
    private readonly periodS: number,
    actuators: number,
  ) {
    this.lastEstimates = new Float64Array(actuators).fill(NaN);
    this.estimates = Array.from({ length: actuators }, () => new RunningStatistics());
  }

  /** Begins the present period anew and forgets the last ones: the estimate has jumped. */
  interrupt(): void {
    this.clear();
    this.elapsedS = 0;
    this.count = 0;
    this.lastEstimates.fill(NaN);
  }

  /** @returns true in the scan that completes a period */
  add(estimate: Float64Array, sample: Readonly<ObjectiveSample>, dtS: number): boolean {
    for (let i = 0; i < this.estimates.length; i += 1) this.estimates[i]?.add(estimate[i] as number);
    this.objective.add(sample);
    this.elapsedS += dtS;
    if (this.elapsedS + dtS / 2 < this.periodS) return false;
    // What is left over goes into the next period, so that the cut does not drift against the dither.
    this.elapsedS = Math.max(0, this.elapsedS - this.periodS);
    const slot = this.count % endPeriods;
    this.estimates.forEach((estimate, i) => (this.lastEstimates[i] = estimate.mean));
    this.objectives[slot] = this.objective.mean;
    if (this.start.count < startPeriods) this.start.add(this.objective.mean);
    this.count += 1;
    this.clear();
    return true;
  }

  /** Mean of the objective over the last whole periods; NaN before the first. */
  get meanObjective(): number {
    return mean(this.objectives, this.count);
  }

  get objectiveAtStart(): number {
    return this.start.mean;
  }

  private clear(): void {
    for (const estimate of this.estimates) estimate.clear();
    this.objective.clear();
  }
}

function mean(ring: Float64Array, count: number): number {
  const used = Math.min(count, ring.length);
  let sum = 0;
  for (let i = 0; i < used; i += 1) sum += ring[i] ?? NaN;
  return sum / used;
}
