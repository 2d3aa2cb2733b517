import { describe, expect, it } from 'vitest';
import {
  bestTrim,
  carbonDioxideOfOxygen,
  carbonMonoxide,
  coCurve,
  efficiencyAt,
  flueGasAt,
  lambdaOfTrim,
  lightOil,
  naturalGas,
  oxygenOfLambda,
  stackLoss,
  unburntLoss,
} from './burner-physics.js';

const criticals = [1.08, 1.1, 1.12];

describe('stack loss', () => {
  // Siegert's formula with the constants of the 1. BImSchV annex (from memory), worked by hand:
  // 160 K · (0.66 / 18 + 0.009) and 160 K · (0.68 / 18 + 0.007).
  it.each([
    ['natural gas', naturalGas, 7.307],
    ['light oil', lightOil, 7.164],
  ])('of %s at 180/20 °C and 3 %% oxygen is the worked figure', (_name, fuel, lossPct) => {
    expect(stackLoss(180, 20, 3, fuel)).toBeCloseTo(lossPct, 3);
  });

  it('agrees with the carbon-dioxide form of the same annex to one percent', () => {
    // A1 = 0.37 for natural gas (annex, from memory): qA = (tA − tL)(A1/CO2 + B).
    for (const o2Pct of [1, 3, 6]) {
      const byCarbonDioxide = 160 * (0.37 / carbonDioxideOfOxygen(o2Pct) + 0.009);
      expect(stackLoss(180, 20, o2Pct) / byCarbonDioxide).toBeCloseTo(1, 2);
    }
  });

  it('is no number where nothing burns', () => {
    expect(stackLoss(20, 20, 21)).toBeNaN();
    expect(stackLoss(20, 20, NaN)).toBeNaN();
  });
});

describe('excess air', () => {
  it('gives 3 % of oxygen at 1.1667, the 21 form', () => {
    expect(oxygenOfLambda(21 / 18)).toBeCloseTo(3, 12);
  });

  it('is near the 20.9 form of other texts', () => {
    // λ = 20.9 / (20.9 − O2): 1.0503, 1.1676 and 1.4027 at 1, 3 and 6 % (textbook form).
    for (const [o2Pct, lambda] of [
      [1, 1.0503],
      [3, 1.1676],
      [6, 1.4027],
    ] as const) {
      expect(oxygenOfLambda(lambda)).toBeGreaterThan(o2Pct);
      expect(oxygenOfLambda(lambda)).toBeCloseTo(o2Pct, 1);
    }
  });

  it('leaves no oxygen below the stoichiometric ratio', () => {
    expect(oxygenOfLambda(0.97)).toBe(0);
  });
});

describe('unburnt loss', () => {
  it('takes a third of a point for 0.1 % of CO', () => {
    // 0.1 / (0.1 + 10.114) of the carbon as CO, each losing 283.0 of 802.3 kJ/mol (heats of combustion).
    expect(unburntLoss(1000, 3)).toBeCloseTo(((0.1 / 10.2143) * 283.0 * 100) / 802.3, 4);
  });

  it('grows by e for one width of the CO curve', () => {
    const rise = (lambda: number) => carbonMonoxide(lambda, 1.1) - coCurve.floorPpm;
    expect(rise(1.15) / rise(1.15 + coCurve.width)).toBeCloseTo(Math.E, 9);
    expect(carbonMonoxide(0.95, 1.1)).toBe(coCurve.maxPpm);
  });
});

describe('the map from air trim to efficiency', () => {
  it.each(criticals)('has one best trim for the critical ratio %f, better than all others', (critical) => {
    const best = bestTrim(critical);
    for (let trimPct = 0; trimPct <= 100; trimPct += 0.1) {
      expect(efficiencyAt(trimPct, critical)).toBeLessThanOrEqual(best.efficiencyPct + 1e-12);
    }
    expect(best.efficiencyPct).toBe(efficiencyAt(best.trimPct, critical));
  });

  it.each(criticals)('loses at least two points at trim 60 for the critical ratio %f', (critical) => {
    expect(bestTrim(critical).efficiencyPct - efficiencyAt(60, critical)).toBeGreaterThan(2);
  });

  it('falls off a cliff on the side of little air', () => {
    const best = bestTrim(1.1);
    const lossAt = (offset: number) => best.efficiencyPct - efficiencyAt(best.trimPct + offset, 1.1);
    expect(lossAt(-5)).toBeGreaterThan(5 * lossAt(5));
    expect(flueGasAt(best.trimPct - 5, 1.1).coPpm).toBeGreaterThan(10 * flueGasAt(best.trimPct, 1.1).coPpm);
  });

  it('moves its best trim with the critical ratio', () => {
    expect(bestTrim(1.12).trimPct - bestTrim(1.08).trimPct).toBeCloseTo(4, 0);
    expect(lambdaOfTrim(bestTrim(1.1).trimPct)).toBeGreaterThan(1.1);
  });
});
