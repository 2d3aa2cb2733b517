import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bandPower } from './band-power.js';
import { FourierPlan } from './fourier-plan.js';
import { percentile } from './percentile.js';
import { SeededNoise } from './seeded-noise.fixture.js';
import { traceArea, traceEnd, traceEnergy } from './trace-area.js';
import { TraceBandPower } from './trace-band-power.js';
import { TracePercentile } from './trace-percentile.js';
import { traceValueAt } from './trace-place.js';
import { rmsDifference, traceCentroid, traceWidthAt } from './trace-shape.js';
import type { Trace } from './trace.types.js';

const sampled = (from: number, step: number, count: number, f: (x: number) => number): Trace => ({
  points: Float64Array.from({ length: count }, (_, i) => f(from + i * step)),
  from,
  step,
});
/** Height 4, at 50, standard deviation 3. */
const bell = sampled(0, 0.1, 1001, (x) => 4 * Math.exp(-((x - 50) ** 2) / 18));

describe('measures of a trace, against closed forms', () => {
  it('find full width at half maximum 2·√(2 ln 2)·σ of a normal curve', () => {
    expect(traceWidthAt(bell, 2)).toBeCloseTo(2 * Math.sqrt(2 * Math.log(2)) * 3, 3);
  });

  it('find its area √(2π)·σ·h, its energy √π·σ·h² and its centre', () => {
    expect(traceArea(bell, 0, 100)).toBeCloseTo(Math.sqrt(2 * Math.PI) * 3 * 4, 6);
    // The square of a straight line lies below that of the curve by about step²/6·∫y′², here 0.01/6·4.7.
    expect(traceEnergy(bell, 0, 100)).toBeCloseTo(Math.sqrt(Math.PI) * 3 * 16, 1);
    expect(traceCentroid(bell)).toBeCloseTo(50, 9);
  });

  it('integrate a straight line and its square exactly, in any window', () => {
    const line = sampled(-1, 0.25, 9, (x) => 2 * x);
    expect(traceArea(line, -0.9, 0.6)).toBeCloseTo(0.6 ** 2 - 0.9 ** 2, 12);
    expect(traceEnergy(line, -0.9, 0.6)).toBeCloseTo((4 / 3) * (0.6 ** 3 + 0.9 ** 3), 12);
    expect(traceArea(line, 0.1, 0.1)).toBe(0);
    expect(traceArea(line, -1, traceEnd(line))).toBe(0);
  });

  it('read values on the line between two points, and none beyond the ends', () => {
    const trace = { points: [1, 2, 4], from: 100, step: 0.1 };
    expect(traceValueAt(trace, 100.15)).toBeCloseTo(3, 9);
    // 100 + 2 · 0.1 is not quite 100.2 in binary.
    expect(traceValueAt(trace, 100.2)).toBe(4);
    expect(traceValueAt(trace, 100.21)).toBeNaN();
    expect(traceValueAt(trace, 99.99)).toBeNaN();
    expect(traceArea(trace, 99, 100.1)).toBeNaN();
    expect(traceArea(trace, 100.1, 100)).toBeNaN();
  });

  it('give no width where the peak is below the level, or the trace ends above it', () => {
    expect(traceWidthAt({ points: [0, 3, 0], from: 0, step: 1 }, 4)).toBeNaN();
    expect(traceWidthAt({ points: [0, 3, 2], from: 0, step: 1 }, 1)).toBeNaN();
    expect(traceWidthAt({ points: [0, 3, 0], from: 0, step: 1 }, 3)).toBe(0);
  });

  it('give no centre where there is nothing above zero', () => {
    expect(traceCentroid({ points: [1, -1], from: 0, step: 1 })).toBeNaN();
    expect(traceCentroid({ points: [0], from: 5, step: 1 })).toBeNaN();
    expect(traceCentroid({ points: [2], from: 5, step: 1 })).toBe(5);
  });

  it('hold two traces against each other on one axis only', () => {
    const a = { points: [1, 2, 3], from: 0, step: 1 };
    expect(rmsDifference(a, { ...a, points: [1, 5, 7] })).toBeCloseTo(5 / Math.sqrt(3), 12);
    expect(rmsDifference(a, { ...a, points: [1, 5] })).toBeNaN();
    expect(rmsDifference(a, { ...a, step: 2 })).toBeNaN();
  });

  it('say in their examples what they do', () => {
    const ramp = { points: [1, 2, 4], from: 0, step: 10 };
    expect(traceValueAt(ramp, 15)).toBe(3);
    expect(traceArea(ramp, 5, 20)).toBe(38.75);
    expect(traceEnergy({ points: [0, 3], from: 0, step: 1 }, 0, 1)).toBe(3);
    expect(traceWidthAt({ points: [0, 2, 4, 2, 0], from: 0, step: 10 }, 1)).toBe(30);
    expect(traceCentroid({ points: [0, 1, 3, 0], from: 100, step: 10 })).toBe(117.5);
    const [one, other] = [
      { points: [1, 2], from: 0, step: 1 },
      { points: [4, -2], from: 0, step: 1 },
    ];
    expect(rmsDifference(one, other)).toBe(3.5355339059327378);
  });
});

describe('measures with memory of their own', () => {
  const lengths = [2, 3, 5, 8, 31, 64, 100, 512];

  it('give the percentiles and band powers of the plain functions, however the length changes', () => {
    const noise = new SeededNoise(7);
    const [percentiles, power] = [new TracePercentile(), new TraceBandPower()];
    for (const length of [...lengths, ...lengths.toReversed()]) {
      const points = Float32Array.from(noise.normals(length));
      expect(percentiles.measure(points, 37)).toBeCloseTo(percentile(points, 37), 12);
      const trace = { points, from: 3, step: 0.02 };
      expect(power.measure(trace, 4, 18)).toBeCloseTo(bandPower(points, 50, 4, 18), 9);
    }
  });

  it('find a sine of amplitude 2 with power 2 in its band, and none beside it', () => {
    const sine = sampled(0, 0.001, 500, (x) => 7 + 2 * Math.sin(2 * Math.PI * 60 * x));
    const power = new TraceBandPower();
    expect(power.measure(sine, 50, 70)).toBeCloseTo(2, 6);
    expect(power.measure(sine, 80, 500)).toBeCloseTo(0, 6);
  });

  it('refuse what is no band and no percentage', () => {
    const power = new TraceBandPower();
    expect(power.measure({ points: [1], from: 0, step: 1 }, 0, 1)).toBeNaN();
    expect(power.measure({ points: [1, 2], from: 0, step: 1 }, 1, 0)).toBeNaN();
    expect(power.measure({ points: [1, 2], from: 0, step: 1 }, -1, 0)).toBeNaN();
    expect(new TracePercentile().measure([1, 2], 101)).toBeNaN();
    expect(new TracePercentile().measure([], 50)).toBeNaN();
  });
});

describe('a Fourier plan', () => {
  it.each([1, 2, 3, 7, 16, 45])('of length %d gives the sum it is defined by, again and again', (n) => {
    const plan = new FourierPlan(n);
    const noise = new SeededNoise(n);
    for (let round = 0; round < 3; round += 1) {
      const [re, im] = [Float64Array.from(noise.normals(n)), Float64Array.from(noise.normals(n))];
      const [sumRe, sumIm] = [new Float64Array(n), new Float64Array(n)];
      for (let k = 0; k < n; k += 1) {
        for (let i = 0; i < n; i += 1) {
          const angle = (-2 * Math.PI * k * i) / n;
          sumRe[k] = sumRe[k]! + re[i]! * Math.cos(angle) - im[i]! * Math.sin(angle);
          sumIm[k] = sumIm[k]! + re[i]! * Math.sin(angle) + im[i]! * Math.cos(angle);
        }
      }
      plan.transform(re, im);
      re.forEach((value, k) => expect(value).toBeCloseTo(sumRe[k]!, 10));
      im.forEach((value, k) => expect(value).toBeCloseTo(sumIm[k]!, 10));
    }
  });
});

describe('any trace', () => {
  const points = fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 60 });

  it('has an area that is the sum of those of its parts', () => {
    fc.assert(
      fc.property(points, fc.double({ min: 0, max: 1, noNaN: true }), (list, share) => {
        const trace = { points: list, from: -3, step: 0.5 };
        const end = traceEnd(trace);
        const middle = -3 + share * (end + 3);
        const parts = traceArea(trace, -3, middle) + traceArea(trace, middle, end);
        expect(Math.abs(parts - traceArea(trace, -3, end))).toBeLessThan(1e-4);
        expect(traceEnergy(trace, -3, end)).toBeGreaterThanOrEqual(0);
      }),
    );
  });

  it('has the mean square about its mean as the power of the whole band, weighted by the window', () => {
    const power = new TraceBandPower();
    fc.assert(
      fc.property(points, (list) => {
        const whole = power.measure({ points: list, from: 0, step: 1 }, 0, 0.5);
        const two = power.measure({ points: list, from: 0, step: 1 }, 0, 0.2);
        if (list.length < 2) return void expect(whole).toBeNaN();
        expect(two).toBeLessThanOrEqual(whole * (1 + 1e-9));
        expect(whole).toBeGreaterThanOrEqual(0);
      }),
    );
  });
});
