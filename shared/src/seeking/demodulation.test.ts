import { describe, expect, it } from 'vitest';
import {
  createAxisDither,
  demodulator,
  laggedDither,
  writeNextDithers,
  type AxisDither,
} from './axis-dither.js';
import { createHessianEstimator, stepHessianEstimator } from './hessian-estimator.js';
import type { PeriodicAxis } from './law-parameters.js';
import { createRecursiveSlope, stepRecursiveSlope } from './recursive-slope.js';
import { createSeededUniform, nextUniform } from './seeded-uniform.js';
import { recoveredShare } from './washout-share.js';

/** The workspace compiles without the types of any platform; the runner of the tests has it. */
declare const console: { info(text: string): void };

const nextDither = (dither: AxisDither, scale: number, dtS: number): number => {
  const next = new Float64Array(1);
  writeNextDithers([dither], { scale }, next, dtS);
  return next[0] ?? NaN;
};

const axisWith = (change: Partial<PeriodicAxis> = {}): PeriodicAxis => ({
  min: -10,
  max: 10,
  amplitude: 0.1,
  periodS: 1,
  phaseRad: 0,
  dither: 'sine',
  ...change,
});

/** Means over whole periods of `look(dither of actuator 1)` while the map answers at once. */
function meansOver<T extends string>(
  axis: PeriodicAxis,
  at: number,
  map: (x: number) => number,
  look: (dither: AxisDither, y: number) => Record<T, number>,
  steps = 400,
): Record<T, number> {
  const dither = createAxisDither(axis);
  const sums: Partial<Record<T, number>> = {};
  for (let i = 0; i < steps; i += 1) {
    const y = map(at + nextDither(dither, 1, axis.periodS / steps));
    for (const [name, value] of Object.entries<number>(look(dither, y))) {
      sums[name as T] = (sums[name as T] ?? 0) + value / steps;
    }
  }
  return sums as Record<T, number>;
}

const demodulated = (axis: PeriodicAxis, at: number, map: (x: number) => number) =>
  meansOver(axis, at, map, (dither, y) => ({ slope: demodulator(dither) * y })).slope;

describe('demodulation by a sine', () => {
  it('shows the slope of a quadratic exactly', () => {
    // ⟨y·sin⟩ = a·f''·(θ̂ − θ*)/2 = 0.1·3·0.7/2 = 0.105, times 2/a the slope 2.1: the product of sines.
    const slope = demodulated(axisWith(), 2.7, (x) => 10 + 1.5 * (x - 2) ** 2);
    expect(slope).toBeCloseTo(2.1, 10);
    expect((slope * 0.1) / 2).toBeCloseTo(0.105, 11);
  });

  it.each([
    [0.1, 1.0012505],
    [0.5, 1.0315772],
  ])('shows (2/a)·I₁(a) for e^x at 0 with amplitude %d', (amplitude, expected) => {
    // The modified Bessel function is the first Fourier coefficient of e^{a·sin}: Abramowitz & Stegun (1964), 9.6.
    expect(demodulated(axisWith({ amplitude }), 0, Math.exp)).toBeCloseTo(expected, 7);
  });

  it.each([
    [0.2, 0.03],
    [0.5, 0.1875],
  ])('costs f″a²/4 at the optimum: amplitude %d', (amplitude, expected) => {
    const mean = meansOver(
      axisWith({ amplitude }),
      2,
      (x) => 1.5 * (x - 2) ** 2,
      (_, y) => ({ y }),
    ).y;
    expect(mean).toBeCloseTo(expected, 12);
  });
});

describe('demodulation by a square', () => {
  it('shows the secant over the dither exactly', () => {
    // The square only ever visits θ̂ ± a, so the mean is [f(θ̂ + a) − f(θ̂ − a)]/(2a): for x³ at 1, 3 + a².
    const slope = demodulated(axisWith({ dither: 'square', amplitude: 0.2 }), 1, (x) => x ** 3);
    expect(slope).toBeCloseTo(3.04, 10);
  });

  it('loses behind the washout what its harmonics lose', () => {
    // A square of half a period through s/(s + r·ω) decays by e^{−πr} from each edge: in the steady state the
    // mean of square times answer is (2/(πr))·tanh(πr/2), derived by integrating one half period.
    for (const ratio of [0.1, 0.3, 1]) {
      const expected = (2 / (Math.PI * ratio)) * Math.tanh((Math.PI * ratio) / 2);
      expect(recoveredShare('square', ratio, 0)).toBeCloseTo(expected, 4);
    }
    expect(recoveredShare('square', 1e-9, Math.PI / 4)).toBeCloseTo(0.5, 6);
  });
});

describe('demodulation for the Hessian', () => {
  it('has the mean of the Hessian, exactly, while the frequencies keep apart', () => {
    // H = [[100, 30], [30, 20]], θ − θ* = (0.5, 1), ω = (7, 5): gradient H·(θ − θ*) = (80, 35).
    const dithers = [7, 5].map((omega) => createAxisDither(axisWith({ periodS: (2 * Math.PI) / omega })));
    const lag = { timeConstantS: 0, deadTimeS: 0 };
    const estimator = createHessianEstimator(dithers, lag, 0, 1e12);
    const steps = 4000;
    const dtS = (2 * Math.PI) / steps;
    const hessian = [0, 0, 0, 0];
    const gradient = [0, 0];
    for (let i = 0; i < steps; i += 1) {
      const [u = NaN, v = NaN] = dithers.map((d, k) => (k === 0 ? 0.5 : 1) + nextDither(d, 1, dtS));
      const y = 50 * u * u + 30 * u * v + 10 * v * v;
      stepHessianEstimator(estimator, dithers, Float64Array.of(y), dtS);
      estimator.hessian.forEach((h, k) => (hessian[k] = (hessian[k] ?? NaN) + h / steps));
      dithers.forEach((d, k) => (gradient[k] = (gradient[k] ?? NaN) + (demodulator(d) * y) / steps));
    }
    [80, 35].forEach((value, k) => expect(gradient[k]).toBeCloseTo(value, 6));
    [100, 30, 30, 20].forEach((value, k) => expect(hessian[k]).toBeCloseTo(value, 2));
  });

  it('makes up for the lag of the plant at the frequencies where the Hessian shows', () => {
    const omega = 2 * Math.PI;
    const tau = 0.1;
    const dither = createAxisDither(axisWith());
    const estimator = createHessianEstimator([dither], { timeConstantS: tau, deadTimeS: 0 }, 0, 0.02);
    const steps = 500;
    let y = 0;
    let mean = 0;
    for (let i = 0; i < 60 * steps; i += 1) {
      const u = nextDither(dither, 1, 1 / steps);
      y += (1 - Math.exp(-1 / steps / tau)) * (-2 * u * u - y);
      stepHessianEstimator(estimator, [dither], Float64Array.of(y), 1 / steps);
      if (i >= 50 * steps) mean += (estimator.hessian[0] ?? NaN) / (10 * steps);
    }
    // −2u² has second derivative −4; uncompensated 1/(1 + (2ωτ)²) = 0.39 of it would show.
    expect(1 / (1 + (2 * omega * tau) ** 2)).toBeCloseTo(0.3877, 3);
    expect(Math.abs(mean / -4 - 1)).toBeLessThan(0.03);
  });
});

/** Slope by recursive least squares without forgetting over one period of noisy samples. */
function leastSquaresSlope(amplitude: number, samples: number, y: (x: number) => number): number[] {
  const dither = createAxisDither(axisWith({ amplitude }));
  const slope = createRecursiveSlope(1);
  let product = 0;
  for (let i = 0; i < samples; i += 1) {
    const value = y(nextDither(dither, 1, 1 / samples));
    slope.regressors[1] = laggedDither(dither) / amplitude;
    slope.told[0] = value;
    stepRecursiveSlope(slope);
    product += (demodulator(dither) * value) / samples;
  }
  return [(slope.weights[1] ?? NaN) / amplitude, product];
}

describe('least squares over a whole period', () => {
  it('equals the demodulated slope', () => {
    const [fitted, product = NaN] = leastSquaresSlope(0.2, 64, (x) => 3 + 1.7 * x + 0.4 * x ** 3);
    // They would be equal but for the small certainty with which the fit begins: 2/(N·10⁶).
    expect(fitted).toBeCloseTo(product, 6);
  });

  it('has the variance 2σ²/(N·a²)', () => {
    const random = createSeededUniform(7);
    const normal = () =>
      Math.sqrt(-2 * Math.log(1 - nextUniform(random))) * Math.cos(2 * Math.PI * nextUniform(random));
    const trials = 8000;
    let square = 0;
    for (let i = 0; i < trials; i += 1) {
      const [fitted = NaN] = leastSquaresSlope(0.2, 64, () => 0.3 * normal());
      square += fitted ** 2 / trials;
    }
    console.info(`variance of the slope: ${square.toFixed(5)}, closed form 0.0703125`);
    // The relative standard error of a variance from n trials is √(2/n) = 1.6 %.
    expect(Math.abs(square / 0.0703125 - 1)).toBeLessThan(0.05);
  });

  it('with forgetting is worth (1 + λ)/(1 − λ) samples', () => {
    // For x = sin and weights λ^k: cov = σ²·Σλ^{2k}x²/(Σλ^k x²)², and Σλ^k = 1/(1 − λ), Σλ^{2k} = 1/(1 − λ²).
    const random = createSeededUniform(11);
    const dither = createAxisDither(axisWith());
    const slope = createRecursiveSlope(1);
    const kept = 0.995;
    let square = 0;
    let count = 0;
    for (let i = 0; i < 400_000; i += 1) {
      nextDither(dither, 1, 1 / 40);
      slope.regressors[1] = laggedDither(dither) / 0.1;
      slope.told[0] = nextUniform(random) - 0.5;
      slope.told[1] = kept;
      stepRecursiveSlope(slope);
      if (i < 4000) continue;
      square += (slope.weights[1] ?? NaN) ** 2;
      count += 1;
    }
    const expected = (2 / 12) * ((1 - kept) / (1 + kept));
    console.info(
      `variance with forgetting: ${(square / count).toExponential(3)}, ${expected.toExponential(3)}`,
    );
    expect(Math.abs(square / count / expected - 1)).toBeLessThan(0.1);
  });
});
