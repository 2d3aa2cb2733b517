import { describe, expect, it } from 'vitest';
import { gradientLaw } from './gradient-law.js';
import { leastSquaresLaw } from './least-squares-law.js';
import { settled } from './law.fixture.js';
import { meansOf, simulateSeeking } from './simulate-seeking.fixture.js';

/**
 * Share of a slope of 1 that the gradient law shows behind a plant given as a step of its state. The gain is so
 * small that the estimate stands; the map is linear and the washout's corner far down.
 */
function shownShare(plant: (u: number, dtS: number) => number, phaseRad = 0): number {
  const parameters = settled(gradientLaw, [{ periodS: 1, gain: 1e-12, phaseRad }], {
    washoutRatio: 1e-6,
    lowPassRatio: 0.02,
  });
  let sum = 0;
  let count = 0;
  simulateSeeking({
    law: gradientLaw,
    parameters,
    start: [0],
    map: ([u = NaN]) => plant(u, 0.001),
    periodS: 1,
    stepsPerPeriod: 1000,
    periods: 60,
    watch: (state, tS) => {
      if (tS < 50) return;
      sum += state.signals[3] ?? NaN;
      count += 1;
    },
  });
  return sum / count;
}

const lag = (tauS: number) => {
  let y = 0;
  return (u: number, dtS: number) => (y += (1 - Math.exp(-dtS / tauS)) * (u - y));
};

const twoLags = (firstS: number, secondS: number) => {
  const first = lag(firstS);
  const second = lag(secondS);
  return (u: number, dtS: number) => second(first(u, dtS), dtS);
};

const deadTime = (scans: number) => {
  const line = new Array<number>(scans).fill(0);
  return (u: number) => {
    line.push(u);
    return line.shift() ?? NaN;
  };
};

const omega = 2 * Math.PI;

describe('the share of the slope that shows behind a lag', () => {
  // F = 1/(1 + jωτ): uncompensated Re F = 1/(1 + ω²τ²), compensated |F| = 1/√(1 + ω²τ²).
  it.each([
    [0.1, 0.99, 0.995, 5.71],
    [0.2, 0.962, 0.981, 11.31],
    [1 / 3, 0.9, 0.949, 18.43],
    [0.5, 0.8, 0.894, 26.57],
    [1, 0.5, 0.707, 45],
  ])('is that of the closed form at ωτ = %d', (omegaTau, uncompensated, compensated, lagDeg) => {
    expect((Math.atan(omegaTau) * 180) / Math.PI).toBeCloseTo(lagDeg, 2);
    const tauS = omegaTau / omega;
    expect(Math.abs(shownShare(lag(tauS)) / uncompensated - 1)).toBeLessThan(0.01);
    expect(Math.abs(shownShare(lag(tauS), Math.atan(omegaTau)) / compensated - 1)).toBeLessThan(0.01);
  });

  it('never turns its sign behind one lag, however slow', () => {
    expect(shownShare(lag(100 / omega))).toBeGreaterThan(0);
  });

  it('turns its sign behind two lags at ω = 1/√(τ₁τ₂)', () => {
    const at = (product: number) => shownShare(twoLags(0.5 / omega, (2 * product) / omega));
    expect(at(0.9)).toBeGreaterThan(0.005);
    expect(at(1.1)).toBeLessThan(-0.005);
  });

  it('turns its sign behind a dead time of a quarter period', () => {
    expect(shownShare(deadTime(240))).toBeGreaterThan(0.02);
    expect(shownShare(deadTime(260))).toBeLessThan(-0.02);
  });
});

/**
 * Means of the estimate per dither period around a quadratic peak, with everything that the law is told late by a
 * dead time of 50 dither periods, whose phase is whole turns. The law's average is θ̃' = −κ·θ̃(t − D).
 */
function delayed(rateTimesDelay: number, lifetimes: number): number[] {
  const periodS = 0.02;
  const perPeriod = 40;
  const line = new Array<number>(50 * perPeriod).fill(0);
  const parameters = settled(leastSquaresLaw, [{ periodS, amplitude: 0.1, gain: rateTimesDelay / 2 }]);
  return meansOf(
    simulateSeeking({
      law: leastSquaresLaw,
      parameters,
      start: [0],
      map: ([u = NaN]) => {
        line.push(-((u - 1) ** 2));
        return line.shift() ?? NaN;
      },
      periodS,
      stepsPerPeriod: perPeriod,
      periods: 50 * lifetimes,
    }),
  ).map((mean) => mean - 1);
}

/** Greatest size in each of the last turns of the oscillation, whose period is about 4 dead times. */
const peak = (errors: number[], fromDelay: number) =>
  Math.max(...errors.slice(fromDelay * 50, (fromDelay + 4) * 50).map(Math.abs));

describe('seeking behind a dead time', () => {
  // θ̃' = −κ·θ̃(t − D) is stable for κD < π/2 and free of overshoot for κD ≤ 1/e: roots of s + κ·e^{−sD}.
  it('settles below κD = π/2', () => {
    const errors = delayed(1.45, 60);
    expect(peak(errors, 50)).toBeLessThan(0.8 * peak(errors, 20));
  });

  it('grows above κD = π/2', () => {
    const errors = delayed(1.65, 60);
    expect(peak(errors, 50)).toBeGreaterThan(1.2 * peak(errors, 20));
  });

  it('overshoots above κD = 1/e and not below', () => {
    // The memory of the fit, one period, adds 1/50 to the dead time.
    expect(Math.max(...delayed(0.35, 12))).toBeLessThan(1e-3);
    expect(Math.max(...delayed(0.42, 12))).toBeGreaterThan(1e-3);
  });
});
