import { describe, expect, it } from 'vitest';
import { judgeErrors } from '../signals/honest-errors.fixture.js';
import { createFirstOrderLag, stepFirstOrderLag } from '../signals/lags.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { firstOrderAnswer } from './first-order-figures.js';
import { frequencyResponse } from './frequency-response.js';
import { goertzel } from './goertzel.js';
import { LockIn } from './lock-in.js';

describe('one bin by Goertzel', () => {
  it('of 1, 2, 3, 4 is 10, −2+2i, −2, −2−2i; powers 100, 8, 4, 8 (by hand)', () => {
    [
      [10, 0],
      [-2, 2],
      [-2, 0],
      [-2, -2],
    ].forEach(([re, im], k) => {
      const bin = goertzel([1, 2, 3, 4], k);
      expect(bin.re).toBeCloseTo(re!, 12);
      expect(bin.im).toBeCloseTo(im!, 12);
    });
  });

  // The eight tones of telephone dialling (ITU-T Q.23) with 205 samples at 8000 Hz: the bins of the usual tables.
  it.each([
    [697, 18],
    [770, 20],
    [852, 22],
    [941, 24],
    [1209, 31],
    [1336, 34],
    [1477, 38],
    [1633, 42],
  ])('hears %d Hz loudest in bin %d', (toneHz, expected) => {
    const tone = Array.from({ length: 205 }, (_, i) => Math.sin((2 * Math.PI * toneHz * i) / 8000));
    const power = (k: number) => Math.hypot(goertzel(tone, k).re, goertzel(tone, k).im);
    const bins = Array.from({ length: 60 }, (_, k) => k + 5);
    expect(bins.reduce((a, b) => (power(b) > power(a) ? b : a))).toBe(expected);
  });

  it('agrees with the sum that defines it, between bins as well', () => {
    const values = new SeededNoise(2).normals(50);
    const sum = (part: (x: number) => number) =>
      values.reduce((s, v, n) => s + v * part((-2 * Math.PI * 7.3 * n) / 50), 0);
    expect(goertzel(values, 7.3).re).toBeCloseTo(sum(Math.cos), 10);
    expect(goertzel(values, 7.3).im).toBeCloseTo(sum(Math.sin), 10);
  });
});

const wave = (i: number) => 5 + 0.8 * Math.sin((2 * Math.PI * i) / 40 + 0.6);

describe('lock-in', () => {
  // 5 whole cycles in 200 samples of 5 + 0.8·sin(· + 0.6): X = 0.8·cos 0.6 = 0.660268, Y = 0.8·sin 0.6 = 0.451714.
  it('has the closed form over whole periods', () => {
    const lockIn = new LockIn(40, 5);
    const ready = Array.from({ length: 200 }, (_, i) => lockIn.add(wave(i)));
    expect(ready.indexOf(true)).toBe(199);
    const reading = lockIn.reading!;
    expect(reading.inPhase.value).toBeCloseTo(0.660268, 6);
    expect(reading.quadrature.value).toBeCloseTo(0.451714, 6);
    expect(reading.amplitude.value).toBeCloseTo(0.8, 12);
    expect(reading.phaseRad.value).toBeCloseTo(0.6, 12);
    expect(reading.offset.value).toBeCloseTo(5, 12);
    expect(reading.noise).toBeLessThan(1e-7);
  });

  it('begins a reading anew after a bad sample', () => {
    const lockIn = new LockIn(40, 1);
    for (let i = 0; i < 17; i += 1) lockIn.add(99);
    lockIn.add(NaN);
    expect(lockIn.reading).toBeNull();
    for (let i = 0; i < 40; i += 1) lockIn.add(wave(i));
    expect(lockIn.reading?.amplitude.value).toBeCloseTo(0.8, 12);
  });

  it('keeps its digits on an offset of 1e9', () => {
    const lockIn = new LockIn(40, 5);
    for (let i = 0; i < 200; i += 1) lockIn.add(1e9 + wave(i));
    expect(lockIn.reading?.amplitude.value).toBeCloseTo(0.8, 6);
  });

  it('gives standard errors that are right (1000 seeded readings)', () => {
    const truths = { amplitude: 0.8, phaseRad: 0.6, offset: 5 };
    const records = judgeErrors(1000, truths, (noise) => {
      const lockIn = new LockIn(40, 3);
      for (let i = 0; i < 120; i += 1) lockIn.add(wave(i) + 0.3 * noise.normal());
      return lockIn.reading!;
    });
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.15);
      expect(Math.abs(size - 1)).toBeLessThan(0.08);
    }
  });
});

// Slope of a map by lock-in at the dither: variance 2σ²/(N·a²); σ = 0.3, N = 64, a = 0.2 → 0.0703125 (closed
// form of least squares).
it('a slope from lock-in at a dither of amplitude a scatters with variance 2σ²/(N·a²)', () => {
  const slopes = Array.from({ length: 4000 }, (_, seed) => {
    const noise = new SeededNoise(seed);
    const lockIn = new LockIn(16, 4);
    for (let i = 0; i < 64; i += 1)
      lockIn.add(2.1 * 0.2 * Math.sin((2 * Math.PI * i) / 16) + 0.3 * noise.normal());
    return lockIn.reading!.inPhase.value / 0.2;
  });
  const mean = slopes.reduce((a, b) => a + b) / slopes.length;
  const variance = slopes.reduce((sum, slope) => sum + (slope - mean) ** 2, 0) / (slopes.length - 1);
  expect(Math.abs(mean - 2.1)).toBeLessThan(0.02);
  expect(Math.abs(variance / 0.0703125 - 1)).toBeLessThan(0.08);
});

/** A lag of 0.5 s behind a sine of 50 samples of 0.02 s, with noise on its output, the start left out. */
function sineTest(scatter: () => number, periods: number) {
  const lag = createFirstOrderLag();
  const inputs: number[] = [];
  const outputs: number[] = [];
  for (let i = 0; i < 50 * (periods + 20); i += 1) {
    // Each sample of 0.02 s in 20 held steps, so that the held input is a sine.
    for (let k = 0; k < 20; k += 1)
      stepFirstOrderLag(lag, Math.sin((2 * Math.PI * (i + (k + 0.5) / 20)) / 50), 0.5, 0.001);
    if (i < 50 * 20) continue;
    inputs.push(2 * Math.sin((2 * Math.PI * (i + 1)) / 50));
    outputs.push(2 * 3 * lag.output + scatter());
  }
  return { inputs, outputs, samplesPerPeriod: 50 };
}

describe('frequency response', () => {
  const answer = firstOrderAnswer(1, 0.5);

  it('of a lag is that of the closed form', () => {
    const found = frequencyResponse(sineTest(() => 0, 4));
    expect(found.gain.value).toBeCloseTo(3 * answer.gain, 4);
    expect(found.phaseRad.value).toBeCloseTo(answer.phaseRad, 4);
    expect(found.coherence).toBeCloseTo(1, 9);
  });

  it('gives standard errors that are right, and a coherence between 0 and 1 (400 seeded tests of 20 periods)', () => {
    const clean = sineTest(() => 0, 20);
    const truths = { gain: 3 * answer.gain, phaseRad: answer.phaseRad };
    const records = judgeErrors(400, truths, (noise) => {
      const outputs = clean.outputs.map((value) => value + 4 * noise.normal());
      const found = frequencyResponse({ ...clean, outputs });
      expect(found.coherence).toBeGreaterThan(0.5);
      expect(found.coherence).toBeLessThan(0.99);
      return found;
    });
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.25);
      expect(Math.abs(size - 1)).toBeLessThan(0.12);
    }
  });

  // Without any answer the expected coherence of n blocks is 1/n (Bendat and Piersol).
  it('shows no coherence where there is no answer', () => {
    const { inputs } = sineTest(() => 0, 200);
    const outputs = new SeededNoise(8).normals(inputs.length);
    expect(frequencyResponse({ inputs, outputs, samplesPerPeriod: 50 }).coherence).toBeLessThan(0.03);
  });

  it('refuses inputs that stand still and fewer than two blocks', () => {
    const still = { inputs: new Float64Array(100), outputs: new Float64Array(100), samplesPerPeriod: 50 };
    expect(() => frequencyResponse(still)).toThrow(/inputs: must move/);
    expect(() => frequencyResponse({ ...still, periodsPerBlock: 2 })).toThrow(/at least 200/);
  });
});
