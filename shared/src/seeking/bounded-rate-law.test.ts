import { describe, expect, it } from 'vitest';
import { boundedRateLaw } from './bounded-rate-law.js';
import { settled } from './law.fixture.js';
import { decayRate, meansOf, simulateSeeking } from './simulate-seeking.fixture.js';

/** The workspace compiles without the types of any platform; the runner of the tests has it. */
declare const console: { info(text: string): void };

// Loss θ²/2, α = 0.5, k = 2: gain g = kα/2 = 0.5, amplitude a = √(α/ω).
const alpha = 0.5;

function course(omega: number) {
  const periodS = (2 * Math.PI) / omega;
  const parameters = settled(boundedRateLaw, [{ periodS, amplitude: Math.sqrt(alpha / omega), gain: 0.5 }]);
  let last = NaN;
  let fastest = 0;
  let ripple = 0;
  const perPeriod = 100;
  const periods = Math.round(24 / periodS);
  const means = simulateSeeking({
    law: boundedRateLaw,
    parameters,
    start: [1],
    map: ([x = NaN]) => -(x * x) / 2,
    periodS,
    stepsPerPeriod: perPeriod,
    periods,
    watch: ({ estimate, dither }, tS) => {
      const applied = (estimate[0] ?? NaN) + (dither[0] ?? NaN);
      if (!Number.isNaN(last)) fastest = Math.max(fastest, (Math.abs(applied - last) * perPeriod) / periodS);
      if (tS > 23) ripple = Math.max(ripple, Math.abs(applied));
      last = applied;
    },
  });
  return { rate: decayRate(meansOf(means), 0, periodS, periods / 24, (5 * periods) / 24), fastest, ripple };
}

describe('bounded update rate', () => {
  it.each([
    // How far an independent integration of the same equation by Runge and Kutta was off √(α/ω).
    [200, 0.08],
    [800, 0.04],
    [3200, 0.02],
  ])('has the averaged rate kα/2, the speed √(αω) and the ripple √(α/ω) at %d rad/s', (omega, tolerance) => {
    const { rate, fastest, ripple } = course(omega);
    console.info(`bounded rate at ${omega} rad/s: rate ${rate.toFixed(5)}, ripple ${ripple.toFixed(4)}`);
    expect(Math.abs(rate / 0.5 - 1)).toBeLessThan(0.03);
    expect(fastest).toBeLessThanOrEqual(Math.sqrt(alpha * omega) * (1 + 1e-9));
    expect(fastest).toBeGreaterThan(0.99 * Math.sqrt(alpha * omega));
    expect(Math.abs(ripple / Math.sqrt(alpha / omega) - 1)).toBeLessThan(tolerance);
  });

  it('never moves faster, whatever the objective does, in a retreat neither', () => {
    const parameters = settled(boundedRateLaw, [{ periodS: 1, gain: 5 }]);
    const state = boundedRateLaw.init(parameters, [0]);
    let last = 0;
    for (let i = 0; i < 4000; i += 1) {
      const isValid = i % 700 < 600;
      boundedRateLaw.step(state, { objective: Math.sin(i * i) * 1e6, isValid }, 0.01);
      const applied = (state.estimate[0] ?? NaN) + (state.dither[0] ?? NaN);
      expect(Math.abs(applied - last)).toBeLessThanOrEqual(0.1 * 2 * Math.PI * 0.01 * (1 + 1e-9));
      last = applied;
    }
  });
});
