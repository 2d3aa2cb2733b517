import { seededRandom } from '../kit/seeded-random.js';
import { nominalLoad, type Complex } from './matcher-physics.js';

/** How far and how slowly the load wanders: relative for its resistance, Ω for its reactance; s of bench time. */
const wander = { resistance: 0.2, resistancePeriodS: 3600, reactanceOhm: 1.5, reactancePeriodS: 2600 };

/**
 * The load at a bench time: resistance and reactance swing with periods of their own, from phases that the seed
 * chooses.
 */
export function wanderingLoad(seed: number, isDrifting: boolean): (tS: number) => Complex {
  if (!isDrifting) return () => nominalLoad;
  // A source of its own, so that the noise does not depend on whether there is a drift.
  const random = seededRandom(seed ^ 0x5eed);
  const [phase1, phase2] = [random.uniform(), random.uniform()];
  const swing = (tS: number, periodS: number, phase: number) =>
    Math.sin(2 * Math.PI * (tS / periodS + phase));
  return (tS) => ({
    re: nominalLoad.re * (1 + wander.resistance * swing(tS, wander.resistancePeriodS, phase1)),
    im: nominalLoad.im + wander.reactanceOhm * swing(tS, wander.reactancePeriodS, phase2),
  });
}
