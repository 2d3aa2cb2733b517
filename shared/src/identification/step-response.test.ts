import { describe, expect, it } from 'vitest';
import { judgeErrors } from '../signals/honest-errors.fixture.js';
import { createFirstOrderLag, stepFirstOrderLag } from '../signals/lags.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { firstOrderAnswer, firstOrderRiseS, firstOrderSettlingS } from './first-order-figures.js';
import { stepBetweenSamples } from './step-at-once.js';
import type { StepRecord } from './step-record.js';
import { fitStepResponse } from './step-response.js';
import { twoPointStepResponse } from './two-point-step-response.js';

/**
 * Gain 2, τ = 12 s, dead time 3 s, from 5 at t = 0 with a step of `size`, on a grid of `dt` from −`before` to
 * 100 s.
 */
function record(dt: number, size = 1, scatter: (i: number) => number = () => 0, before = 20): StepRecord {
  const count = Math.round((before + 100) / dt) + 1;
  const timesS = Array.from({ length: count }, (_, i) => i * dt - before);
  const values = timesS.map((t, i) => 5 - 2 * size * Math.expm1(-Math.max(t - 3, 0) / 12) + scatter(i));
  return { timesS, values, stepAtS: 0, stepSize: size };
}

describe('step response', () => {
  // K = 2, τ = 12, θ = 3: t28.3 = 7, t63.2 = 15, so τ = 1.5·(15 − 7) = 12 and θ = 15 − 12 = 3 (closed form).
  // The final value read from the record's end is short of the true one, which is what the tolerance is for.
  it('from two points has the closed form', () => {
    const found = twoPointStepResponse(record(0.5));
    expect(Math.abs(found.timeConstantS - 12)).toBeLessThan(0.05);
    expect(Math.abs(found.deadTimeS - 3)).toBeLessThan(0.05);
    expect(found.gain).toBeCloseTo(2, 2);
  });

  // With the literal .283 and .632 instead: τ +0.049 %, dead time −0.00082 τ.
  it('from two points uses the exact fractions: t28 = 7 and t63 = 15 are hit', () => {
    const values = [
      ...Array.from({ length: 7 }, () => 0),
      -Math.expm1(-1 / 3),
      ...Array.from({ length: 7 }, (_, i) => -Math.expm1(-(5 + i) / 12)),
      -Math.expm1(-1),
      ...Array.from({ length: 200 }, () => 1),
    ];
    const found = twoPointStepResponse({ timesS: values.map((_, i) => i), values, stepAtS: 0, stepSize: 1 });
    expect(found.timeConstantS).toBeCloseTo(12, 9);
    expect(found.deadTimeS).toBeCloseTo(3, 9);
  });

  it.each([1, -0.25])('by least squares is exact without noise (step %d)', (size) => {
    const found = fitStepResponse(record(0.7, size));
    expect(found.gain.value).toBeCloseTo(2, 8);
    expect(found.timeConstantS.value).toBeCloseTo(12, 7);
    expect(found.deadTimeS.value).toBeCloseTo(3, 7);
    expect(found.start.value).toBeCloseTo(5, 8);
  });

  it('finds a simulated lag with a held input', () => {
    const lag = createFirstOrderLag();
    const values = Array.from({ length: 400 }, (_, i) => stepFirstOrderLag(lag, i >= 50 ? 3 : 0, 4, 0.2));
    const found = fitStepResponse({
      timesS: values.map((_, i) => (i + 1) * 0.2),
      values,
      stepAtS: 10,
      stepSize: 3,
    });
    expect(found.timeConstantS.value).toBeCloseTo(4, 6);
    expect(found.deadTimeS.value).toBeCloseTo(0, 6);
    expect(found.gain.value).toBeCloseTo(1, 6);
  });

  // 300 seeded records with noise of 5 % of the change: scores have mean 0 ± 0.06 and size 1 ± 0.04 where all
  // is right.
  it('gives standard errors that are right', () => {
    const truths = { gain: 2, timeConstantS: 12, deadTimeS: 3, start: 5 };
    const records = judgeErrors(300, truths, (noise) =>
      fitStepResponse(record(0.5, 1, () => 0.1 * noise.normal())),
    );
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.25);
      expect(Math.abs(size - 1)).toBeLessThan(0.13);
    }
  });

  it('says how alike neighbouring residuals are, and names the noise', () => {
    const white = new SeededNoise(3).normals(300);
    const red = new SeededNoise(3).autoregressive(300, 0.8);
    const independent = fitStepResponse(record(0.5, 1, (i) => 0.1 * white[i]!));
    expect(Math.abs(independent.residualAutocorrelation)).toBeLessThan(0.2);
    expect(Math.abs(independent.noise / 0.1 - 1)).toBeLessThan(0.15);
    const dependent = fitStepResponse(record(0.5, 1, (i) => 0.1 * red[i]!));
    expect(dependent.residualAutocorrelation).toBeGreaterThan(0.6);
  });

  it('says so where there is no answer, or no record', () => {
    const flat = { ...record(1), values: new Float64Array(121).fill(1) };
    expect(() => fitStepResponse(flat)).toThrow(/do not determine/);
    expect(() => fitStepResponse({ ...record(1), stepSize: 0 })).toThrow(/stepSize/);
    expect(() => fitStepResponse({ ...record(1), values: [1, 2] })).toThrow(/at least 8/);
  });
});

describe('a plant that answers between two samples', () => {
  it.each([0, 0.02])('has no time constant, and the dead time that it waited (noise %d)', (noise) => {
    const random = new SeededNoise(4);
    const timesS = Array.from({ length: 60 }, (_, i) => i * 0.5);
    for (const waited of [0, 3]) {
      const values = timesS.map((t) => (t > 10 + waited * 0.5 ? 7 : 5) + noise * random.normal());
      const fit = fitStepResponse({ timesS, values, stepAtS: 10, stepSize: 4 });
      expect(fit.gain.value).toBeCloseTo(0.5, 2);
      expect(fit.timeConstantS.value).toBeLessThan(0.25);
      expect(Math.abs(fit.deadTimeS.value - 0.5 * waited)).toBeLessThan(0.51);
    }
  });

  it('is not made out of noise', () => {
    const random = new SeededNoise(4);
    const timesS = Array.from({ length: 60 }, (_, i) => i * 0.5);
    expect(() =>
      stepBetweenSamples({ timesS, values: random.normals(60), stepAtS: 10, stepSize: 4 }),
    ).toThrow(/do not determine/);
  });
});

describe('figures of a first-order lag (closed form)', () => {
  it('settles within 2, 5 and 1 % and rises', () => {
    expect(firstOrderSettlingS(1, 0.02)).toBeCloseTo(3.912023, 6);
    expect(firstOrderSettlingS(1, 0.05)).toBeCloseTo(2.995732, 6);
    expect(firstOrderSettlingS(2, 0.01)).toBeCloseTo(2 * 4.60517, 5);
    expect(firstOrderRiseS(1)).toBeCloseTo(2.197225, 6);
    expect(firstOrderSettlingS(1, Math.exp(-4))).toBeCloseTo(4, 12);
    expect(1 - Math.exp(-4)).toBeCloseTo(0.98168, 5);
  });

  // Bode figures; Octave's bode gives the same at ωτ = 1.
  it.each([
    [1, -3.0103, -45],
    [0.5, -0.9691, -26.565],
    [2, -6.9897, -63.435],
    [10, -20.0432, -84.289],
  ])('answers a sine at ωτ = %d', (ratio, db, deg) => {
    const { gain, phaseRad } = firstOrderAnswer(ratio / (2 * Math.PI), 1);
    expect(20 * Math.log10(gain)).toBeCloseTo(db, 4);
    expect((phaseRad * 180) / Math.PI).toBeCloseTo(deg, 3);
  });
});
