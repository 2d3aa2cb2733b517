import { describe, expect, it } from 'vitest';
import { settled } from './law.fixture.js';
import { perturbObserveLaw } from './perturb-observe-law.js';
import { simulateSeeking } from './simulate-seeking.fixture.js';
import { spsaAmplitude, spsaGain, spsaLaw } from './spsa-law.js';

describe('simultaneous perturbation', () => {
  it.each([
    [0, 0.00994302, 0.1],
    [9, 0.00944499, 0.0792501],
    [99, 0.00659022, 0.0628058],
    [999, 0.00236157, 0.0497737],
  ])('has the gains of J. C. Spall (1998) in trial %d', (trial, gain, amplitude) => {
    // a_k = a/(k + 1 + A)^0.602, c_k = c/(k + 1)^0.101 with a = 0.16, c = 0.1, A = 100.
    expect(spsaGain(0.16, 100, 0.602, trial)).toBeCloseTo(gain, 8);
    expect(spsaAmplitude(0.1, 0.101, trial)).toBeCloseTo(amplitude, 7);
  });

  it('shrinks the error on a quadratic by ∏(1 − a_k·|f″|), exactly', () => {
    // (y₊ − y₋)/(2c) is the slope of a quadratic exactly, whatever c is.
    const parameters = settled(spsaLaw, [{ gain: 0.1 }], { dwellS: 1, settleS: 0, stability: 5 });
    const trials = 30;
    const state = spsaLaw.init(parameters, [1]);
    let applied = 1;
    while (state.own.trial < trials) {
      spsaLaw.step(state, { objective: -(applied ** 2), isValid: true }, 0.25);
      applied = (state.estimate[0] ?? NaN) + (state.dither[0] ?? NaN);
    }
    let expected = 1;
    for (let k = 0; k < trials; k += 1) expected *= 1 - 0.1 * (6 / (k + 6)) ** 0.602 * 2;
    expect(state.estimate[0]).toBeCloseTo(expected, 10);
  });

  it('climbs twenty actuators at once with two points a trial', () => {
    const axes = Array.from({ length: 20 }, () => ({ gain: 0.02 }));
    const parameters = settled(spsaLaw, axes, { dwellS: 0.1, gainExponent: 0, amplitudeExponent: 0 });
    const means = simulateSeeking({
      law: spsaLaw,
      parameters,
      start: axes.map(() => 1),
      map: (x) => -x.reduce((sum, value, i) => sum + (value - i / 20) ** 2, 0),
      periodS: 0.2,
      stepsPerPeriod: 2,
      periods: 1000,
    });
    const last = means.at(-1) ?? [];
    const error = Math.hypot(...last.map((value, i) => value - i / 20));
    expect(error).toBeLessThan(0.05);
  });
});

describe('perturb and observe', () => {
  // Three points −Δ, 0, +Δ about the grid point next to the peak, the middle one twice as often: mean loss
  // c·(e² + Δ²/2) for the grid off by e.
  it.each([
    [0, 0.5],
    [0.2, 0.54],
    [0.4, 0.66],
  ])('loses c(e² + Δ²/2) on average: grid off by %d', (offset, expected) => {
    const parameters = settled(perturbObserveLaw, [{ amplitude: 1 }], { dwellS: 1 });
    let loss = 0;
    let count = 0;
    simulateSeeking({
      law: perturbObserveLaw,
      parameters,
      start: [-5 + offset],
      map: ([x = NaN]) => -(x * x),
      periodS: 1,
      stepsPerPeriod: 1,
      periods: 420,
      watch: ({ estimate }, tS) => {
        if (tS < 20.5) return;
        loss += (estimate[0] ?? NaN) ** 2;
        count += 1;
      },
    });
    expect(count).toBe(400);
    expect(loss / count).toBeCloseTo(expected, 9);
  });

  it('looks the other way at its edge, and turns back where the objective is not valid', () => {
    const parameters = settled(perturbObserveLaw, [{ min: 0, max: 3, amplitude: 1 }], { dwellS: 1 });
    const seen = new Set<number>();
    simulateSeeking({
      law: perturbObserveLaw,
      parameters,
      start: [1],
      map: ([x = NaN]) => x,
      periodS: 1,
      stepsPerPeriod: 2,
      periods: 40,
      tell: (input, [x = NaN]) => (input.isValid = x < 2.5),
      watch: ({ estimate }) => seen.add(estimate[0] ?? NaN),
    });
    expect(Math.max(...seen)).toBeLessThanOrEqual(3);
    expect(Math.min(...seen)).toBeGreaterThanOrEqual(0);
  });
});
