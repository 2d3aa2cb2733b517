import type { DitherLaw } from '../dither/dither-lines.js';
import { planDithers } from '../dither/plan-dithers.js';
import { DomainError } from '../errors/domain-error.js';
import type { PlantDynamics } from './plant-answer.js';

/** Lag of the plant at the dither, rad: ω·τ = 1/2 for one time constant, where 89 % of the answer is left. */
export const plantLagRad = Math.atan(0.5);
export const scansPerPeriodMin = 12;

/** Lag of all time constants and the dead time, rad. */
export function plantLagAt({ timeConstantsS, deadTimeS }: PlantDynamics, omega: number): number {
  return timeConstantsS.reduce((sum, tau) => sum + Math.atan(omega * tau), omega * deadTimeS);
}

/**
 * Fastest dither that a plant follows with no more lag than `plantLagRad`, and that has 12 scans a period; by
 * bisection, since the lag grows with the frequency.
 *
 * @returns rad/s
 */
export function fastestDither(plant: PlantDynamics, scanS: number): number {
  const fastest = (2 * Math.PI) / (scanS * scansPerPeriodMin);
  if (plantLagAt(plant, fastest) <= plantLagRad) return fastest;
  let [low, high] = [0, fastest];
  for (let i = 0; i < 80; i += 1) {
    const middle = (low + high) / 2;
    if (plantLagAt(plant, middle) < plantLagRad) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

export interface ChosenDithers {
  /** One for each actuator, rising, rad/s. */
  omegas: number[];
  /** Smallest distance of a line that is demodulated from another; infinite for one dither, rad/s. */
  apartRadPerS: number;
}

export interface DitherNeed {
  actuators: number;
  law: DitherLaw;
  scanS: number;
  fastestRadPerS: number;
  forbidden: readonly { fromHz: number; toHz: number }[];
}

/**
 * Steps of the grid up to the fastest dither with which a plan is looked for first. Gradient: n … 2n − 1 always do
 * (sums begin at 2n, differences end at n − 1). Newton: the least with which the planner found one, for 1 to 8.
 */
function firstSteps(law: DitherLaw, actuators: number): number {
  const forNewton = [3, 4, 8, 12, 22, 37, 57, 92];
  return law === 'newton' ? (forNewton[actuators - 1] ?? 2 * actuators ** 2) : 2 * actuators - 1;
}

/** Slowest dither over the fastest, tried in this order, and how much finer the grid gets in vain. */
const lowestShares = [0.75, 0.6, 0.5, 0.4, 0.3, 0.2, 0.1];
const finer = 1.25;
const refinements = 12;

/**
 * Dithers for several actuators as far apart as can be found below the fastest: on a grid whose step is the distance
 * of the lines, as coarse as a plan may be had on, and finer from there. One dither alone is the fastest itself,
 * unless that is forbidden.
 *
 * @throws analysis.invalid-input where no plan was found
 */
export function chooseDithers(need: DitherNeed): ChosenDithers {
  const { actuators, law, fastestRadPerS, forbidden } = need;
  if (actuators === 1 && forbidden.length === 0) {
    return { omegas: [fastestRadPerS], apartRadPerS: Infinity };
  }
  let fault: unknown = null;
  let steps = firstSteps(law, actuators);
  for (let i = 0; i < refinements; i += 1) {
    for (const lowest of law === 'newton' ? lowestShares : [actuators / steps, ...lowestShares]) {
      try {
        return planOn(need, Math.round(steps), lowest);
      } catch (error) {
        if (!(error instanceof DomainError)) throw error;
        fault = error;
      }
    }
    steps *= finer;
  }
  throw fault;
}

/** @throws analysis.invalid-input where there is no plan with so many steps of the grid up to the fastest dither */
function planOn(
  { actuators, law, scanS, fastestRadPerS, forbidden }: DitherNeed,
  steps: number,
  lowest: number,
) {
  const windowS = Math.ceil((2 * Math.PI * steps) / (fastestRadPerS * scanS)) * scanS;
  const plan = planDithers({
    actuators,
    law,
    scanS,
    scansPerPeriodMin,
    lowestHz: (lowest * steps) / windowS,
    highestHz: steps / windowS,
    apartHz: 1 / windowS,
    windowS,
    forbidden: [...forbidden],
  });
  const apartRadPerS = actuators === 1 ? Infinity : 2 * Math.PI * plan.apartHz;
  return { omegas: plan.frequenciesHz.map((f) => 2 * Math.PI * f), apartRadPerS };
}
