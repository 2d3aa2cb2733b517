import { describe, expect, it } from 'vitest';
import {
  bestTuning,
  lNetwork,
  magnitudeOfRatio,
  mismatchLossDb,
  nominalLoad,
  reflectedShare,
  reflection,
  returnLossDb,
  standingWaveRatio,
} from './matcher-physics.js';

const henry = (ohm: number, hz: number) => ohm / (2 * Math.PI * hz);
const farad = (ohm: number, hz: number) => 1 / (2 * Math.PI * hz * ohm);

describe('an L network', () => {
  it('is that of Bowick, RF Circuit Design, example 4-1 (from memory: 477 nH and 4.8 pF at 100 MHz)', () => {
    const { q, seriesOhm, shuntOhm } = lNetwork(1000, 100);
    expect(q).toBeCloseTo(3, 12);
    expect(henry(seriesOhm, 100e6) * 1e9).toBeCloseTo(477.46, 2);
    expect(farad(shuntOhm, 100e6) * 1e12).toBeCloseTo(4.7746, 4);
  });

  // Worked in public calculator pages: 263 and 284 Ω; 1.732, 86.60 and 115.47 Ω; 7.07 pF and 3.54 nH at 900 MHz.
  it('has the reactances of published examples', () => {
    expect(lNetwork(1000, 75).seriesOhm).toBeCloseTo(263.39, 2);
    expect(lNetwork(1000, 75).shuntOhm).toBeCloseTo(284.75, 2);
    expect(lNetwork(200, 50).q).toBeCloseTo(1.732, 3);
    expect(lNetwork(200, 50).seriesOhm).toBeCloseTo(86.6, 2);
    expect(lNetwork(200, 50).shuntOhm).toBeCloseTo(115.47, 2);
    expect(farad(lNetwork(50, 10).shuntOhm, 900e6) * 1e12).toBeCloseTo(7.074, 3);
    expect(henry(lNetwork(50, 10).seriesOhm, 900e6) * 1e9).toBeCloseTo(3.537, 3);
  });
});

describe('a reflection', () => {
  // Standing wave ratio, |Γ|, return loss and mismatch loss as every table of them has it.
  it.each([
    [1.1, 0.04762, 26.444, 0.0099],
    [1.5, 0.2, 13.979, 0.1773],
    [2, 0.33333, 9.542, 0.5115],
    [3, 0.5, 6.021, 1.2494],
    [10, 0.81818, 1.743, 4.8073],
  ])(
    'at a standing wave ratio of %f is %f, %f dB down, and costs %f dB',
    (ratio, magnitude, lossDb, costDb) => {
      expect(magnitudeOfRatio(ratio)).toBeCloseTo(magnitude, 5);
      expect(standingWaveRatio(magnitudeOfRatio(ratio))).toBeCloseTo(ratio, 9);
      expect(returnLossDb(magnitudeOfRatio(ratio))).toBeCloseTo(lossDb, 3);
      expect(mismatchLossDb(magnitudeOfRatio(ratio))).toBeCloseTo(costDb, 4);
    },
  );

  it('of 25 − j50 Ω on 50 Ω is 0.0769 − j0.6154', () => {
    const gamma = reflection({ re: 25, im: -50 }, 50);
    expect(gamma.re).toBeCloseTo(0.0769, 4);
    expect(gamma.im).toBeCloseTo(-0.6154, 4);
    expect(standingWaveRatio(Math.hypot(gamma.re, gamma.im))).toBeCloseTo(4.2656, 4);
    expect((Math.atan2(gamma.im, gamma.re) * 180) / Math.PI).toBeCloseTo(-82.875, 3);
  });
});

describe('the map from the two capacitors to what is reflected', () => {
  const loads = [1.6, 2, 2.4].flatMap((re) => [-62, -60, -58].map((im) => ({ re, im })));

  it.each(loads)('reflects nothing at its best tuning, and something all around: $re, $im Ω', (load) => {
    const best = bestTuning(load);
    expect(reflectedShare(best, load)).toBeLessThan(1e-20);
    for (let shuntPct = 0; shuntPct <= 100; shuntPct += 2.5) {
      for (let seriesPct = 0; seriesPct <= 100; seriesPct += 0.5) {
        expect(reflectedShare({ shuntPct, seriesPct }, load)).toBeGreaterThan(0);
      }
    }
    expect(best.shuntPct).toBeGreaterThan(20);
    expect(best.shuntPct).toBeLessThan(80);
  });

  it('is a narrow valley askew: its curvatures differ by more than a hundred times', () => {
    const best = bestTuning(nominalLoad);
    const h = 0.01;
    const f = (shunt: number, series: number) =>
      reflectedShare({ shuntPct: best.shuntPct + shunt, seriesPct: best.seriesPct + series }, nominalLoad);
    const [a, c] = [(f(h, 0) + f(-h, 0)) / h ** 2, (f(0, h) + f(0, -h)) / h ** 2];
    const b = (f(h, h) - f(h, -h) - f(-h, h) + f(-h, -h)) / (4 * h ** 2);
    const [middle, reach] = [(a + c) / 2, Math.hypot((a - c) / 2, b)];
    expect((middle + reach) / (middle - reach)).toBeGreaterThan(100);
    // Coupled: the valley does not run along either capacitor.
    expect(b / Math.sqrt(a * c)).toBeGreaterThan(0.9);
  });
});
