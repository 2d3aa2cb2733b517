import { gradientLaw, type GradientLawParameters } from './gradient-law.js';

export interface SeekingSimulation {
  parameters: GradientLawParameters;
  start: number;
  /** Objective to be made large as a function of the applied value. */
  map: (applied: number) => number;
  /** Time constant of a first-order lag behind the map, s; 0 for none. */
  lagS: number;
  stepsPerPeriod: number;
  periods: number;
}

/** @returns mean of the estimate over each dither period */
export function simulateSeeking(simulation: SeekingSimulation): number[] {
  const { parameters, map, lagS, stepsPerPeriod } = simulation;
  const dtS = parameters.periodS / stepsPerPeriod;
  // Exact for an input that is held constant over the step, as an actuator holds it between two scans.
  const approach = lagS === 0 ? 1 : 1 - Math.exp(-dtS / lagS);
  const state = gradientLaw.init(parameters, simulation.start);
  let applied = simulation.start;
  let measured = map(applied);
  const means: number[] = [];
  for (let period = 0; period < simulation.periods; period += 1) {
    let sum = 0;
    for (let i = 0; i < stepsPerPeriod; i += 1) {
      measured += approach * (map(applied) - measured);
      const output = gradientLaw.step(state, { objective: measured, isValid: true }, dtS);
      applied = output.estimate + output.dither;
      sum += output.estimate;
    }
    means.push(sum / stepsPerPeriod);
  }
  return means;
}

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
