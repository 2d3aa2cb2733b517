import { describe, expect, it } from 'vitest';
import { constrainedLaw } from './constrained-law.js';
import { filterDirection, relaxedBarrier } from './constraint-filter.js';
import { settled } from './law.fixture.js';
import { meansOf, simulateSeeking } from './simulate-seeking.fixture.js';

describe('the gradient filter', () => {
  it('is the closed form of the quadratic programme with one constraint', () => {
    // u = (1, 0), ∇h = (−1, −1), h = 0.1, c = 2: ∇h·u + c·h = −0.8, so u + ∇h·0.8/2 = (0.6, −0.4).
    const u = Float64Array.of(1, 0);
    expect(filterDirection(u, Float64Array.of(-1, -1), Float64Array.of(0.1), { approachRate: 2 })).toBe(true);
    expect(u[0]).toBeCloseTo(0.6, 12);
    expect(u[1]).toBeCloseTo(-0.4, 12);
  });

  it('changes nothing in the interior, nor where the slope is not known', () => {
    const u = Float64Array.of(1, 0);
    expect(filterDirection(u, Float64Array.of(-1, -1), Float64Array.of(1), { approachRate: 2 })).toBe(false);
    expect(filterDirection(u, Float64Array.of(0, 0), Float64Array.of(-1), { approachRate: 2 })).toBe(false);
    expect([...u]).toEqual([1, 0]);
  });

  it('leads back at the approach rate from beyond the bound', () => {
    const u = Float64Array.of(0, 0);
    const slope = Float64Array.of(3, 4);
    filterDirection(u, slope, Float64Array.of(-0.5), { approachRate: 2 });
    // ∇h·u = −c·h: the margin grows with 1 a second.
    expect(3 * (u[0] ?? NaN) + 4 * (u[1] ?? NaN)).toBeCloseTo(1, 12);
  });
});

describe('the relaxed barrier', () => {
  it('is a logarithm that goes over into a parabola with the same value, slope and curvature', () => {
    const knee = 0.3;
    const h = 1e-5;
    const slope = (x: number) => (relaxedBarrier(x + h, knee) - relaxedBarrier(x - h, knee)) / (2 * h);
    expect(relaxedBarrier(0.3 * Math.E, knee)).toBeCloseTo(1, 12);
    expect(relaxedBarrier(knee, knee)).toBeCloseTo(0, 12);
    expect(slope(knee - 2 * h)).toBeCloseTo(slope(knee + 2 * h), 2);
    expect(slope(knee)).toBeCloseTo(1 / knee, 6);
    expect(Number.isFinite(relaxedBarrier(-1e6, knee))).toBe(true);
  });
});

/** Loss (x − 3)² + (y − 2)² with x + y ≤ 4. */
const seekOnPlane = (others: Record<string, unknown>, start = [0, 0]) => {
  let worst = -Infinity;
  const parameters = settled(
    constrainedLaw,
    [
      { periodS: 1, amplitude: 0.05, gain: 0.1, speedMax: 1 },
      { periodS: 0.7, amplitude: 0.05, gain: 0.1, speedMax: 1 },
    ],
    { side: 'below', approachRate: 0.2, ...others },
  );
  const means = simulateSeeking({
    law: constrainedLaw,
    parameters,
    start,
    map: ([x = NaN, y = NaN]) => -((x - 3) ** 2) - (y - 2) ** 2,
    periodS: 7,
    stepsPerPeriod: 350,
    periods: 40,
    tell: (input, [x = NaN, y = NaN]) => {
      input.constraint = x + y;
      input.bound = 4;
    },
    watch: ({ estimate }, tS) => {
      if (tS > 100) worst = Math.max(worst, (estimate[0] ?? NaN) + (estimate[1] ?? NaN));
    },
  });
  const [x = NaN, y = NaN] = means.at(-1) ?? [];
  return { x, y, worst };
};

describe('constrained seeking', () => {
  // Lagrange: 2(x − 3) + λ = 2(y − 2) + λ = 0 on x + y = 4 gives (2.5, 1.5) and λ = 1.
  it('comes to the constrained optimum by the filter', () => {
    const { x, y, worst } = seekOnPlane({});
    expect(x).toBeCloseTo(2.5, 1);
    expect(y).toBeCloseTo(1.5, 1);
    expect(x + y).toBeCloseTo(4, 2);
    expect(worst).toBeLessThan(4.05);
    // The multiplier is the slope of the loss along each axis there.
    expect(-2 * (x - 3)).toBeCloseTo(1, 1);
  });

  it('comes back from the forbidden side', () => {
    const { x, y } = seekOnPlane({}, [5, 5]);
    expect(x + y).toBeCloseTo(4, 2);
    expect(x).toBeCloseTo(2.5, 1);
  });

  it('keeps a reserve', () => {
    const { x, y } = seekOnPlane({ reserve: 0.2 });
    expect(x + y).toBeCloseTo(3.8, 2);
  });

  it('takes no notice of a bound that is far away', () => {
    const { x, y } = seekOnPlane({ reserve: -0 });
    expect(x).toBeLessThan(2.7);
    const parameters = settled(constrainedLaw, [{ periodS: 1, gain: 0.1 }], { side: 'above' });
    const means = simulateSeeking({
      law: constrainedLaw,
      parameters,
      start: [0],
      map: ([u = NaN]) => -((u - 1) ** 2),
      periodS: 1,
      stepsPerPeriod: 50,
      periods: 100,
      tell: (input, [u = NaN]) => {
        input.constraint = u;
        input.bound = -50;
      },
    });
    expect(meansOf(means).at(-1)).toBeCloseTo(1, 2);
    expect(y).toBeLessThan(1.7);
  });

  it('keeps off the bound by the closed form of the barrier', () => {
    // Maximise −(x − 3)² + μ·ln(2 − x): −2(x − 3) = μ/(2 − x); with μ = 0.5 the root below 2 is
    // (5 − √(25 − 4·(6 − μ/2)))/2 = (5 − √2)/2 = 1.7929.
    const parameters = settled(constrainedLaw, [{ periodS: 1, amplitude: 0.02, gain: 0.05 }], {
      side: 'below',
      method: 'barrier',
      barrierWeight: 0.5,
      barrierKnee: 0.05,
    });
    const means = simulateSeeking({
      law: constrainedLaw,
      parameters,
      start: [0],
      map: ([x = NaN]) => -((x - 3) ** 2),
      periodS: 1,
      stepsPerPeriod: 50,
      periods: 400,
      tell: (input, [x = NaN]) => {
        input.constraint = x;
        input.bound = 2;
      },
    });
    expect(Math.abs((meansOf(means).at(-1) ?? NaN) - (5 - Math.SQRT2) / 2)).toBeLessThan(0.006);
  });

  it('retreats where the constrained quantity is no number', () => {
    const parameters = settled(constrainedLaw, [{ periodS: 1, gain: 0.1 }], { side: 'below' });
    const state = constrainedLaw.init(parameters, [0]);
    constrainedLaw.step(state, { objective: 1, isValid: true, constraint: 1, bound: 2 }, 0.1);
    expect(state.isRetreated).toBe(false);
    constrainedLaw.step(state, { objective: 1, isValid: true, constraint: NaN, bound: 2 }, 0.1);
    expect(state.isRetreated).toBe(true);
    constrainedLaw.step(state, { objective: 1, isValid: true }, 0.1);
    expect(state.isRetreated).toBe(true);
  });
});
