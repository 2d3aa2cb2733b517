import { describe, expect, it } from 'vitest';
import { cultureRates, growthRate, steadyState, type Kinetics } from './chemostat-physics.js';

const monod: Kinetics = { growthMax: 0.5, halfSaturation: 0.2, inhibition: Infinity, yield: 0.5 };
const haldane: Kinetics = { ...monod, inhibition: 5 };
const sterile = { substrate: 10, biomass: 0 };

/** Dilution of the greatest D·X, by a fine walk. */
function bestDilution(kinetics: Kinetics) {
  let best = { dilution: 0, productivity: 0, substrate: 0 };
  for (let dilution = 0.3; dilution < 0.5; dilution += 1e-5) {
    const { biomass, substrate } = steadyState(kinetics, sterile, dilution);
    if (dilution * biomass > best.productivity)
      best = { dilution, productivity: dilution * biomass, substrate };
  }
  return best;
}

describe('a chemostat after Monod', () => {
  // Closed form of every textbook (e.g. Bailey and Ollis 1986, ch. 9): D = μm·(1 − √(Ks/(Ks + S0))),
  // D·X = μm·Y·S0·(√((Ks + S0)/S0) − √(Ks/S0))², wash-out at μm·S0/(Ks + S0).
  it('gives most at the dilution of the closed form', () => {
    const best = bestDilution(monod);
    expect(best.dilution).toBeCloseTo(0.5 * (1 - Math.sqrt(0.2 / 10.2)), 4);
    expect(best.dilution).toBeCloseTo(0.429986, 4);
    expect(best.productivity).toBeCloseTo(1.885857, 6);
    expect(best.substrate).toBeCloseTo(1.228286, 2);
  });

  it('is washed out above the dilution of the closed form', () => {
    expect(steadyState(monod, sterile, 0.4901).biomass).toBeGreaterThan(0);
    expect(steadyState(monod, sterile, 0.4903).biomass).toBeCloseTo(0, 6);
  });
});

describe('a chemostat after Haldane', () => {
  it('grows fastest at √(Ks·Ki)', () => {
    // S* = √(Ks·Ki) = 1, μ* = μm/(1 + 2·√(Ks/Ki)) = 0.357143 (Andrews 1968).
    expect(growthRate(haldane, 1)).toBeCloseTo(0.357143, 6);
    expect(growthRate(haldane, 0.99)).toBeLessThan(growthRate(haldane, 1));
    expect(growthRate(haldane, 1.01)).toBeLessThan(growthRate(haldane, 1));
  });

  it('gives most where (1 + S0/Ki)·S² + 2·Ks·S − Ks·S0 is 0', () => {
    const best = bestDilution(haldane);
    expect(3 * best.substrate ** 2 + 0.4 * best.substrate - 2).toBeCloseTo(0, 2);
    expect(best.dilution).toBeCloseTo(0.353039, 4);
    expect(best.productivity).toBeCloseTo(1.632356, 5);
  });
});

describe('the balances', () => {
  const feed = { substrate: 10, biomass: 0.5 };

  it('stand still at the steady state', () => {
    for (const dilution of [0.05, 0.2, 0.35, 0.6]) {
      const rates = cultureRates(haldane, feed, steadyState(haldane, feed, dilution), dilution);
      expect(rates.substrate).toBeCloseTo(0, 9);
      expect(rates.biomass).toBeCloseTo(0, 9);
    }
  });

  it('lose nothing: X + Y·S tends to what is fed', () => {
    const rates = cultureRates(monod, feed, { substrate: 3, biomass: 2 }, 0.3);
    // d(X + Y·S)/dt = D·(X0 + Y·S0 − X − Y·S), whatever grows.
    expect(rates.biomass + 0.5 * rates.substrate).toBeCloseTo(0.3 * (0.5 + 5 - 2 - 1.5), 12);
  });

  it('keep a culture alive without feed', () => {
    expect(steadyState(monod, feed, 0)).toMatchObject({ substrate: expect.closeTo(0, 6) });
  });
});
