import { describe, expect, it } from 'vitest';
import { gradientLaw } from './gradient-law.js';
import { settled } from './law.fixture.js';
import { newtonLaw } from './newton-law.js';
import { decayRate, simulateSeeking } from './simulate-seeking.fixture.js';

/** The workspace compiles without the types of any platform; the runner of the tests has it. */
declare const console: { info(text: string): void };

/** Loss 100 + ½·eᵀHe with H = [[100, 30], [30, 20]], e = θ − (2, 4), fed as its negative. */
const ridge = ([u = NaN, v = NaN]: readonly number[]) => {
  const [x, y] = [u - 2, v - 4];
  return -(100 + 50 * x * x + 30 * x * y + 10 * y * y);
};

/** Eigenvectors of H for its eigenvalues 110 and 10: (3, 1)/√10 and (1, −3)/√10. */
const modes = [
  { eigenvalue: 110, vector: [3 / Math.sqrt(10), 1 / Math.sqrt(10)] },
  { eigenvalue: 10, vector: [1 / Math.sqrt(10), -3 / Math.sqrt(10)] },
];

const alongMode = (means: number[][], vector: number[]) =>
  means.map(([u = NaN, v = NaN]) => (u - 2) * (vector[0] ?? NaN) + (v - 4) * (vector[1] ?? NaN));

const periods = [(2 * Math.PI) / 70, (2 * Math.PI) / 50];

describe('Newton seeking on a ridge', () => {
  it('comes to the peak along all directions at the set rate', () => {
    // A. Ghaffari, M. Krstić and D. Nešić (2012), example in section 6, from memory: frequencies 70 and 50 rad/s,
    // amplitude 0.1, K = ωr = 0.1, from (2.5, 5) with Γ₀ = I/400, 150 s.
    const parameters = settled(
      newtonLaw,
      periods.map((periodS) => ({ periodS, curvature: 400 })),
      { rate: 0.1, inverseRate: 0.1, washoutRatio: 8 / 60, lowPassRatio: 1 / 60, hessianRatio: 1 / 50 },
    );
    const common = Math.PI / 5;
    const means = simulateSeeking({
      law: newtonLaw,
      parameters,
      start: [2.5, 5],
      map: ridge,
      periodS: common,
      stepsPerPeriod: 300,
      periods: Math.round(150 / common),
    });
    const [u = NaN, v = NaN] = means.at(-1) ?? [];
    console.info(`Newton on the ridge after 150 s: (${u.toFixed(5)}, ${v.toFixed(5)})`);
    expect(u).toBeCloseTo(2, 3);
    expect(v).toBeCloseTo(4, 3);
    // Once Γ has come to H⁻¹ both modes decay with the set rate of 0.1.
    for (const { vector } of modes) {
      const rate = decayRate(alongMode(means, vector), 0, common, 110, 150);
      expect(Math.abs(rate / 0.1 - 1)).toBeLessThan(0.15);
    }
  });
});

describe('gradient seeking on a ridge', () => {
  it('decays along each eigenvector with gain times eigenvalue, 11 to 1', () => {
    const gain = 0.004;
    const parameters = settled(
      gradientLaw,
      periods.map((periodS) => ({ periodS, gain })),
      { washoutRatio: 0.01, lowPassRatio: 10 },
    );
    const common = Math.PI / 5;
    const means = simulateSeeking({
      law: gradientLaw,
      parameters,
      start: [2.5, 5],
      map: ridge,
      periodS: common,
      stepsPerPeriod: 300,
      periods: 60,
    });
    const rates = modes.map(({ vector }, i) =>
      decayRate(alongMode(means, vector), 0, common, i === 0 ? 2 : 5, i === 0 ? 10 : 55),
    );
    console.info(`gradient on the ridge: rates ${rates.map((rate) => rate.toFixed(4)).join(', ')} 1/s`);
    modes.forEach(({ eigenvalue }, i) => {
      expect(Math.abs((rates[i] ?? NaN) / (gain * eigenvalue) - 1)).toBeLessThan(0.05);
    });
  });
});
