import type { SeekingInput, SeekingLaw, SeekingState } from './seeking-law.js';

export interface SeekingSimulation<P extends object> {
  law: SeekingLaw<P, SeekingState>;
  parameters: P;
  start: readonly number[];
  /** Objective to be made large as a function of the applied values and the time, s. */
  map: (applied: readonly number[], tS: number) => number;
  /** Time constant of a first-order lag behind the map, s; 0 for none. */
  lagS?: number;
  /** Period over which means are taken, s. */
  periodS: number;
  stepsPerPeriod: number;
  periods: number;
  /** What else the law is told, as a function of the applied values. */
  tell?: (input: SeekingInput, applied: readonly number[], tS: number) => void;
  /** Looks at the state after each step. */
  watch?: (state: SeekingState, tS: number) => void;
}

/** @returns mean of the estimate over each period, per actuator */
export function simulateSeeking<P extends object>(simulation: SeekingSimulation<P>): number[][] {
  const { law, parameters, map, lagS = 0, periodS, stepsPerPeriod, tell, watch } = simulation;
  const dtS = periodS / stepsPerPeriod;
  // Exact for an input that is held constant over the step, as an actuator holds it between two scans.
  const approach = lagS === 0 ? 1 : 1 - Math.exp(-dtS / lagS);
  const state = law.init(parameters, simulation.start);
  const applied = [...simulation.start];
  const input: SeekingInput = { objective: map(applied, 0), isValid: true };
  const means: number[][] = [];
  let tS = 0;
  for (let period = 0; period < simulation.periods; period += 1) {
    const sums = applied.map(() => 0);
    for (let i = 0; i < stepsPerPeriod; i += 1) {
      tS += dtS;
      input.objective += approach * (map(applied, tS) - input.objective);
      tell?.(input, applied, tS);
      law.step(state, input, dtS);
      watch?.(state, tS);
      for (let k = 0; k < applied.length; k += 1) {
        applied[k] = (state.estimate[k] ?? NaN) + (state.dither[k] ?? NaN);
        sums[k] = (sums[k] ?? NaN) + (state.estimate[k] ?? NaN);
      }
    }
    means.push(sums.map((sum) => sum / stepsPerPeriod));
  }
  return means;
}

/** The means of one actuator. */
export const meansOf = (means: number[][], actuator = 0): number[] =>
  means.map((mean) => mean[actuator] ?? NaN);

/** Decay rate of |mean − target| by least squares on its logarithm, 1/s. */
export function decayRate(
  means: number[],
  target: number,
  periodS: number,
  from: number,
  to: number,
): number {
  const points = means
    .slice(from, to)
    .map((mean, i) => ({ t: (from + i + 0.5) * periodS, y: Math.log(Math.abs(mean - target)) }));
  const tMean = points.reduce((sum, p) => sum + p.t, 0) / points.length;
  const yMean = points.reduce((sum, p) => sum + p.y, 0) / points.length;
  const above = points.reduce((sum, p) => sum + (p.t - tMean) * (p.y - yMean), 0);
  const below = points.reduce((sum, p) => sum + (p.t - tMean) ** 2, 0);
  return -above / below;
}
