import { goldenSection } from '../kit/golden-section.js';
import { steadyState, type Feed, type Kinetics } from './chemostat-physics.js';

/** A culture tank on the distributor. */
export interface Tank {
  /** L. */
  volume: number;
  kinetics: Kinetics;
}

/** Feed flow, L/h, and what is in it. */
export const feedFlow = 1;
export const feed: Feed = { substrate: 10, biomass: 1 };

/** Cultures of one strain, with its Haldane kinetics, in four tanks of different size (all chosen here). */
const strain: Kinetics = { growthMax: 0.5, halfSaturation: 1, inhibition: 40, yield: 0.5 };
export const tanks: readonly Tank[] = [1, 1.1, 1.6, 0.7].map((volume) => ({ volume, kinetics: strain }));

/**
 * Share of the feed that a tank gets. The port of the distributor covers one tank at a time, or two neighbours in
 * part while it is between them.
 *
 * @param position 0 % wholly at the first tank, 100 % wholly at the last
 * @returns 0 to 1; the shares of all tanks sum up to 1
 */
export function shareOf(position: number, tank: number): number {
  return Math.max(0, 1 - Math.abs((position / 100) * (tanks.length - 1) - tank));
}

/** What leaves all tanks together, g/L. */
export interface Product {
  /** Biomass that was made, without what the feed brought along. */
  biomass: number;
  /** Substrate that was not used: the waste. */
  substrate: number;
}

/**
 * What the plant settles to at a position of the distributor.
 *
 * @param vigour growth rates of the tanks over their nominal ones: the drift
 */
export function settledProduct(position: number, vigour: readonly number[]): Product {
  const product = { biomass: 0, substrate: 0 };
  tanks.forEach(({ volume, kinetics }, tank) => {
    const share = shareOf(position, tank);
    if (share === 0) return;
    const grown = { ...kinetics, growthMax: kinetics.growthMax * (vigour[tank] ?? 1) };
    const { substrate, biomass } = steadyState(grown, feed, (share * feedFlow) / volume);
    product.biomass += share * (biomass - feed.biomass);
    product.substrate += share * substrate;
  });
  return product;
}

/** A hill of the yield, which is a hollow of the waste. */
export interface Hill extends Product {
  position: number;
}

const gridStep = 2;

/** All hills at a drift, best first. */
export function hillsOf(vigour: readonly number[]): Hill[] {
  const yieldAt = (position: number) => settledProduct(position, vigour).biomass;
  const count = 100 / gridStep;
  const grid = Array.from({ length: count + 1 }, (_, i) => yieldAt(i * gridStep));
  const hills: Hill[] = [];
  for (let i = 1; i < count; i += 1) {
    const here = grid[i] ?? NaN;
    if (here < (grid[i - 1] ?? NaN) || here <= (grid[i + 1] ?? NaN)) continue;
    const position = goldenSection(yieldAt, (i - 1) * gridStep, (i + 1) * gridStep, 1e-5);
    hills.push({ position, ...settledProduct(position, vigour) });
  }
  return hills.sort((a, b) => b.biomass - a.biomass);
}
