import { describe, expect, it } from 'vitest';
import { gradientLaw } from './gradient-law.js';
import { settled } from './law.fixture.js';
import { leastSquaresLaw } from './least-squares-law.js';
import { decayRate, meansOf, simulateSeeking } from './simulate-seeking.fixture.js';
import { recoveredShare } from './washout-share.js';

describe('a square dither', () => {
  it('converges with gain · |f″| · its recovered share', () => {
    const gain = 0.02;
    const washoutRatio = 0.3;
    const parameters = settled(gradientLaw, [{ periodS: 1, gain, dither: 'square' }], {
      washoutRatio,
      lowPassRatio: 10,
    });
    const means = simulateSeeking({
      law: gradientLaw,
      parameters,
      start: [1],
      map: ([x = NaN]) => -2 * x * x,
      periodS: 1,
      stepsPerPeriod: 400,
      periods: 60,
    });
    const expected = gain * 4 * recoveredShare('square', washoutRatio, 0);
    expect(Math.abs(decayRate(meansOf(means), 0, 1, 5, 50) / expected - 1)).toBeLessThan(0.03);
  });

  it('rests off the peak of a cubic by −a²f‴/(6f″)', () => {
    // The mean of square times f is [f(θ + a) − f(θ − a)]/2a = f' + a²f'''/6: zero at −a²f'''/(6f'') to first order.
    const parameters = settled(gradientLaw, [{ periodS: 1, gain: 0.1, amplitude: 0.2, dither: 'square' }]);
    const means = simulateSeeking({
      law: gradientLaw,
      parameters,
      start: [0],
      map: ([x = NaN]) => -(x * x + 0.5 * x ** 3),
      periodS: 1,
      stepsPerPeriod: 200,
      periods: 200,
    });
    const offset = meansOf(means).at(-1) ?? NaN;
    expect(Math.abs(offset / ((-0.04 * 3) / (6 * 2)) - 1)).toBeLessThan(0.03);
  });
});

/** Seeks with the plant's own ripple, which is what reaches the map; nothing is injected. */
function onRipple(ripple: number, change: Record<string, number> = {}, phaseRad = 1.1) {
  const law = gradientLaw;
  const parameters = settled(
    law,
    [{ periodS: 1, amplitude: 0.05, gain: 0.05, dither: 'measured', ...change }],
    {
      lowPassRatio: 10,
    },
  );
  const swing = (tS: number) => ripple * Math.sin(2 * Math.PI * tS + phaseRad);
  let injected = 0;
  const means = simulateSeeking({
    law,
    parameters,
    start: [1],
    map: ([x = NaN], tS) => -2 * (x + swing(tS)) ** 2,
    periodS: 1,
    stepsPerPeriod: 100,
    periods: 120,
    tell: (input, [x = NaN], tS) => (input.measured = [x + swing(tS)]),
    watch: ({ dither }) => (injected = Math.max(injected, Math.abs(dither[0] ?? NaN))),
  });
  return { means: meansOf(means), injected };
}

describe('the plant’s own ripple as the dither', () => {
  it('is followed in amplitude and phase, so that the rate is gain · |f″|, with nothing injected', () => {
    for (const ripple of [0.08, 0.3]) {
      const { means, injected } = onRipple(ripple);
      expect(injected).toBe(0);
      // The washout is made up for by the reference, which goes through the same one.
      expect(Math.abs(decayRate(means, 0, 1, 30, 80) / 0.2 - 1)).toBeLessThan(0.03);
    }
  });

  it('does not depend on the phase of the ripple', () => {
    const ends = [0, 2, 4].map((phase) => onRipple(0.1, {}, phase).means.at(40) ?? NaN);
    for (const end of ends) expect(end).toBeCloseTo(ends[0] ?? NaN, 2);
  });

  it('does not adapt on a ripple that is smaller than what it may work with', () => {
    const { means } = onRipple(0.04);
    expect(means.at(-1)).toBeCloseTo(1, 9);
  });

  it('works for least squares too', () => {
    const parameters = settled(leastSquaresLaw, [
      { periodS: 1, amplitude: 0.05, gain: 0.05, dither: 'measured' },
    ]);
    const swing = (tS: number) => 0.1 * Math.sin(2 * Math.PI * tS + 2);
    const means = simulateSeeking({
      law: leastSquaresLaw,
      parameters,
      start: [1],
      map: ([x = NaN], tS) => -2 * (x + swing(tS)) ** 2,
      periodS: 1,
      stepsPerPeriod: 100,
      periods: 100,
      tell: (input, [x = NaN], tS) => (input.measured = [x + swing(tS)]),
    });
    expect(meansOf(means).at(-1)).toBeCloseTo(0, 2);
  });

  it('retreats where the actuator is not measured', () => {
    const parameters = settled(gradientLaw, [{ periodS: 1, gain: 0.05, dither: 'measured' }]);
    const state = gradientLaw.init(parameters, [0]);
    gradientLaw.step(state, { objective: 1, isValid: true }, 0.1);
    expect(state.isRetreated).toBe(true);
  });
});

describe('the taper', () => {
  it('brings the ripple loss at the peak from f″a²/4 down to f″(floor·a)²/4, and back when the peak moves', () => {
    const parameters = settled(gradientLaw, [{ periodS: 1, gain: 0.2, amplitude: 0.2 }], {
      taper: { band: 0.05, afterPeriods: 3, floor: 0.25 },
    });
    const losses: number[] = [];
    const sizes: number[] = [];
    simulateSeeking({
      law: gradientLaw,
      parameters,
      start: [0],
      map: ([x = NaN], tS) => {
        const loss = 2 * (x - (tS < 200 ? 1 : 1.5)) ** 2;
        losses.push(loss);
        return -loss;
      },
      periodS: 1,
      stepsPerPeriod: 100,
      periods: 400,
      watch: ({ dither }) => sizes.push(Math.abs(dither[0] ?? NaN)),
    });
    const mean = (from: number, to: number) =>
      losses.slice(from * 100, to * 100).reduce((sum, loss) => sum + loss, 0) / ((to - from) * 100);
    const largest = (from: number, to: number) => Math.max(...sizes.slice(from * 100, to * 100));
    expect(largest(1, 5)).toBeCloseTo(0.2, 2);
    expect(Math.abs(mean(150, 200) / ((4 * 0.05 ** 2) / 4) - 1)).toBeLessThan(0.03);
    expect(largest(201, 215)).toBeGreaterThan(0.15);
    expect(mean(380, 400)).toBeLessThan(0.003);
  });
});

describe('a peak that drifts', () => {
  it('is followed with a lag of its speed over the rate of convergence', () => {
    // θ̃' = −κθ̃ − v has the steady state −v/κ; the low-pass and the washout see no ramp of the estimate's slope.
    const speed = 0.005;
    const parameters = settled(leastSquaresLaw, [{ periodS: 1, gain: 0.05 }]);
    const means = simulateSeeking({
      law: leastSquaresLaw,
      parameters,
      start: [0],
      map: ([x = NaN], tS) => -2 * (x - speed * tS) ** 2,
      periodS: 1,
      stepsPerPeriod: 100,
      periods: 100,
    });
    const lag = speed * 99.5 - (means.at(-1)?.[0] ?? NaN);
    expect(Math.abs(lag / (speed / 0.2) - 1)).toBeLessThan(0.05);
  });
});
