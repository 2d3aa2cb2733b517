import { describe, expect, it } from 'vitest';
import { BandPowerMeter } from './band-power-meter.js';
import {
  createFirstOrderFilter,
  prewarpedCornerRadPerS,
  stepLowPass,
  stepWashout,
} from './first-order-filter.js';
import { createFirstOrderLag, createSecondOrderLag, stepFirstOrderLag, stepSecondOrderLag } from './lags.js';
import {
  createSecondOrderFilter,
  secondOrderKinds,
  stepSecondOrderFilter,
  type SecondOrderKind,
} from './second-order-filter.js';
import { SeededNoise } from './seeded-noise.fixture.js';

/** Gain and phase by projection on whole periods, after the start has died out. */
function response(step: (input: number) => number, perPeriod: number): { gain: number; phaseDeg: number } {
  let [inPhase, quadrature] = [0, 0];
  for (let i = 0; i < 60 * perPeriod; i += 1) {
    const angle = (2 * Math.PI * i) / perPeriod;
    const output = step(Math.sin(angle));
    if (i < 50 * perPeriod) continue;
    inPhase += (output * Math.sin(angle)) / (5 * perPeriod);
    quadrature += (output * Math.cos(angle)) / (5 * perPeriod);
  }
  return {
    gain: Math.hypot(inPhase, quadrature),
    phaseDeg: (Math.atan2(quadrature, inPhase) * 180) / Math.PI,
  };
}

describe('first-order filter with a pre-warped corner', () => {
  it('is exact at its corner however few steps a period has: −3.0103 dB, −45° (closed form)', () => {
    const state = createFirstOrderFilter();
    const corner = prewarpedCornerRadPerS(2 * Math.PI, 1 / 6);
    const measured = response((input) => stepLowPass(state, input, corner, 1 / 6), 6);
    expect(20 * Math.log10(measured.gain)).toBeCloseTo(-3.0103, 4);
    expect(measured.phaseDeg).toBeCloseTo(-45, 6);
  });

  it.each([NaN, Infinity])('lets no %d into its state', (bad) => {
    const state = createFirstOrderFilter();
    stepLowPass(state, 4, 1, 0.1);
    expect(stepLowPass(state, bad, 1, 0.1)).toBeNaN();
    expect(stepWashout(state, bad, 1, 0.1)).toBeNaN();
    expect(state).toEqual({ low: 4, lastInput: 4 });
  });
});

describe('second-order filter', () => {
  // SciPy 1.17.1 signal.butter(2, 0.2): bilinear with pre-warping.
  it('has the coefficients of an independent Butterworth design', () => {
    const state = createSecondOrderFilter({
      kind: 'low-pass',
      frequencyHz: 0.1,
      quality: Math.SQRT1_2,
      periodS: 1,
    });
    [0.06745527, 0.13491055, 0.06745527].forEach((b, i) => expect(state.b[i]).toBeCloseTo(b, 8));
    [-1.1429805, 0.4128016].forEach((a, i) => expect(state.a[i]).toBeCloseTo(a, 7));
  });

  // H(jω₀) of the continuous filters (closed form): low-pass −jQ, high-pass jQ, band-pass 1, notch 0.
  it.each<[SecondOrderKind, number, number]>([
    ['low-pass', 3, -90],
    ['high-pass', 3, 90],
    ['band-pass', 1, 0],
  ])('%s is exact at its natural frequency', (kind, gain, phaseDeg) => {
    const state = createSecondOrderFilter({ kind, frequencyHz: 1, quality: 3, periodS: 1 / 10 });
    const measured = response((input) => stepSecondOrderFilter(state, input), 10);
    expect(measured.gain).toBeCloseTo(gain, 6);
    expect(measured.phaseDeg).toBeCloseTo(phaseDeg, 5);
  });

  it('notch lets nothing through at its centre', () => {
    const state = createSecondOrderFilter({ kind: 'notch', frequencyHz: 1, quality: 3, periodS: 1 / 10 });
    expect(response((input) => stepSecondOrderFilter(state, input), 10).gain).toBeLessThan(1e-6);
  });

  it('begins in the steady state of its first input: 5, 0, 0, 5', () => {
    secondOrderKinds.forEach((kind, i) => {
      const state = createSecondOrderFilter({ kind, frequencyHz: 1, quality: 1, periodS: 0.01 });
      for (let n = 0; n < 20; n += 1)
        expect(stepSecondOrderFilter(state, 5)).toBeCloseTo([5, 0, 0, 5][i]!, 9);
    });
  });

  it('refuses a corner above half the step rate, a quality of 0, and says both', () => {
    const wrong = { kind: 'notch', frequencyHz: 6, quality: 0, periodS: 0.1 } as const;
    expect(() => createSecondOrderFilter(wrong)).toThrow(/frequencyHz.*quality/);
  });
});

describe('lags with a held input', () => {
  // 1 − e^(−t/τ): 98.168 % at 4τ, 98 % at 3.912023τ, 10–90 % in 2.197225τ (closed form).
  it.each([0.01, 0.7, 4])('first order is exact with steps of %d τ', (dt) => {
    const state = createFirstOrderLag();
    let t = 0;
    for (; t < 3.9; t += dt) stepFirstOrderLag(state, 1, 2, dt * 2);
    expect(state.output).toBeCloseTo(1 - Math.exp(-t), 12);
  });

  // Step answers of second order, e.g. Ogata, "Modern Control Engineering" (2010), section 5-3.
  it.each([
    [
      0.5,
      1 - Math.exp(-1.5) * (Math.cos(3 * Math.sqrt(0.75)) + Math.sqrt(1 / 3) * Math.sin(3 * Math.sqrt(0.75))),
    ],
    [1, 1 - Math.exp(-3) * (1 + 3)],
    [1.25, 1 - (4 / 3) * Math.exp(-1.5) + (1 / 3) * Math.exp(-6)],
    [0, 1 - Math.cos(3)],
  ])(
    'second order with damping %d has the closed form at ωt = 3, in 1 step and in 30',
    (damping, expected) => {
      for (const steps of [1, 30]) {
        const state = createSecondOrderLag();
        for (let i = 0; i < steps; i += 1) stepSecondOrderLag(state, 1, 2, damping, 1.5 / steps);
        expect(state.output).toBeCloseTo(expected, 12);
      }
    },
  );

  it('overshoots by exp(−πζ/√(1 − ζ²)): 16.30 % at ζ = 0.5 (closed form)', () => {
    const state = createSecondOrderLag();
    const peak = Math.max(...Array.from({ length: 2000 }, () => stepSecondOrderLag(state, 1, 1, 0.5, 0.005)));
    expect(peak - 1).toBeCloseTo(Math.exp((-Math.PI * 0.5) / Math.sqrt(0.75)), 5);
  });

  it('lets no NaN in', () => {
    const [first, second] = [createFirstOrderLag(3), createSecondOrderLag(3)];
    expect(stepFirstOrderLag(first, NaN, 1, 1)).toBe(3);
    expect(stepSecondOrderLag(second, Infinity, 1, 1, 1)).toBe(3);
  });
});

describe('band power meter', () => {
  const settings = { centreHz: 5, widthHz: 0.5, periodS: 0.01, windowLength: 4000 };

  it('reads half the square of an amplitude at its centre, and little beside it', () => {
    const [centre, beside] = [new BandPowerMeter(settings), new BandPowerMeter(settings)];
    for (let i = 0; i < 8000; i += 1) {
      centre.add(3 * Math.sin(2 * Math.PI * 5 * i * 0.01));
      beside.add(3 * Math.sin(2 * Math.PI * 10 * i * 0.01));
      centre.add(NaN);
    }
    expect(centre.power).toBeCloseTo(4.5, 6);
    expect(beside.power).toBeLessThan(0.05);
    centre.clear();
    expect(centre.power).toBeNaN();
  });

  // Noise bandwidth (π/2)·width (closed form of a resonator); white noise of variance 1 at 100 Hz: density 0.02/Hz.
  it('reads density times noise bandwidth of white noise', () => {
    const noise = new SeededNoise(3);
    const meter = new BandPowerMeter({ ...settings, windowLength: 200_000 });
    for (let i = 0; i < 201_000; i += 1) meter.add(noise.normal());
    // Relative standard error about 1/√(2000 s · π/2 · 0.5 Hz) = 2.5 %.
    expect(Math.abs(meter.power / (0.02 * (Math.PI / 2) * 0.5) - 1)).toBeLessThan(0.08);
  });
});
