import { describe, expect, it } from 'vitest';
import { judgeErrors } from '../signals/honest-errors.fixture.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { fitPeak } from './fit-peak.js';
import { fitSurfacePeak } from './fit-surface-peak.js';
import { smoothCurve } from './smooth-curve.js';

const line = (count: number, from: number, to: number) =>
  Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));

describe('smooth curve', () => {
  it('is exact on a parabola at any width, between and at the data', () => {
    const xs = [0, 0.5, 1.1, 2, 2.2, 3, 4.7, 6];
    const ys = xs.map((x) => 3 - 2 * (x - 2.5) ** 2);
    for (const width of [0.1, 1.5, 50]) {
      const { value, slope, curvature } = smoothCurve(xs, ys, { width }).at(1.7);
      expect(value.value).toBeCloseTo(1.72, 9);
      expect(slope.value).toBeCloseTo(3.2, 8);
      expect(curvature.value).toBeCloseTo(-4, 7);
    }
  });

  it('takes left-out errors by the short cut that really leaving out gives', () => {
    const noise = new SeededNoise(3);
    const xs = line(15, 0, 3);
    const ys = xs.map((x) => Math.sin(x) + 0.1 * noise.normal());
    const width = 1.2;
    const errors = xs.map((x, i) => {
      const without = (list: number[]) => list.filter((_, j) => j !== i);
      return ys[i]! - smoothCurve(without(xs), without(ys), { width }).at(x).value.value;
    });
    const direct = Math.sqrt(errors.reduce((sum, error) => sum + error * error, 0) / errors.length);
    expect(smoothCurve(xs, ys, { width }).predictionError).toBeCloseTo(direct, 9);
  });

  it('knows the noise without bias, also where a narrow width follows it (400 seeded curves)', () => {
    const xs = line(30, 0, 1);
    const variances = Array.from({ length: 400 }, (_, seed) => {
      const noise = new SeededNoise(seed);
      return smoothCurve(xs, noise.normals(30, 0.1), { width: 0.15 }).noise ** 2;
    });
    // Standard error of the mean of 400: 1.7 %.
    expect(Math.abs(variances.reduce((a, b) => a + b) / 400 / 0.01 - 1)).toBeLessThan(0.06);
  });

  it('chooses a wide width for a parabola, a narrow one for a wiggle', () => {
    const noise = new SeededNoise(5);
    const xs = line(60, 0, 6);
    const scatter = noise.normals(60, 0.1);
    const wide = smoothCurve(
      xs,
      xs.map((x, i) => (x - 3) ** 2 + scatter[i]!),
    );
    const narrow = smoothCurve(
      xs,
      xs.map((x, i) => Math.sin(6 * x) + scatter[i]!),
    );
    expect(wide.width).toBeGreaterThan(4);
    expect(narrow.width).toBeLessThan(1.2);
    expect(Math.abs(wide.noise / 0.1 - 1)).toBeLessThan(0.25);
  });

  it('gives standard errors that are right, with the width chosen by cross-validation (200 seeded curves)', () => {
    const xs = line(40, -1, 1);
    const truths = { value: 1 - 2 * 0.09, slope: -1.2, curvature: -4 };
    const records = judgeErrors(200, truths, (noise) =>
      smoothCurve(
        xs,
        xs.map((x) => 1 - 2 * x * x + 0.2 * noise.normal()),
      ).at(0.3),
    );
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.25);
      // Choosing the width by the same data costs a little honesty.
      expect(size).toBeGreaterThan(0.85);
      expect(size).toBeLessThan(1.25);
    }
  });

  it('refuses too few places', () => {
    expect(() => smoothCurve([1, 1, 1, 2, 2, 2], [1, 2, 3, 4, 5, 6])).toThrow(/at least 6/);
    expect(() => smoothCurve([1, 2, 3, 4, 5, 6], [1, 2, 3, 4, 5, 6], { width: 0 })).toThrow(/width/);
  });
});

describe('peak by a parabola', () => {
  it('is exact on a parabola off the middle of its window', () => {
    const xs = line(9, 0, 4);
    const peak = fitPeak(
      xs,
      xs.map((x) => 7 - 1.5 * (x - 2.3) ** 2),
      { near: 2, halfWidth: 2 },
    );
    expect(peak.position.value).toBeCloseTo(2.3, 10);
    expect(peak.height.value).toBeCloseTo(7, 10);
    expect(peak.curvature.value).toBeCloseTo(-3, 10);
    expect(peak.points).toBe(9);
  });

  // −f'''·w²/(10 f'') with f'' = −2, f''' = 0.6, w = 0.5: +0.0075; f''''·w²/14 with f'''' = 2.4: 0.042857
  // (derived in fit-peak.ts).
  it('is off by the derived amounts where the map is no parabola', () => {
    const xs = line(2001, -0.5, 0.5);
    const window = { near: 0, halfWidth: 0.5 };
    const skewed = fitPeak(
      xs,
      xs.map((x) => -(x ** 2) + 0.1 * x ** 3),
      window,
    );
    expect(Math.abs(skewed.position.value / 0.0075 - 1)).toBeLessThan(0.01);
    const blunt = fitPeak(
      xs,
      xs.map((x) => -(x ** 2) + 0.1 * x ** 4),
      window,
    );
    expect(Math.abs((blunt.curvature.value + 2) / ((2.4 * 0.25) / 14) - 1)).toBeLessThan(0.01);
  });

  it('gives standard errors that are right, from scatter and from known errors (1000 seeded peaks each)', () => {
    const xs = line(25, -1, 1);
    const truths = { position: 0.2, height: 1, curvature: -4 };
    for (const known of [undefined, xs.map(() => 0.1)]) {
      const records = judgeErrors(1000, truths, (noise) =>
        fitPeak(
          xs,
          xs.map((x) => 1 - 2 * (x - 0.2) ** 2 + 0.1 * noise.normal()),
          { near: 0, halfWidth: 1 },
          known,
        ),
      );
      for (const { bias, size } of Object.values(records)) {
        expect(Math.abs(bias)).toBeLessThan(0.12);
        expect(Math.abs(size - 1)).toBeLessThan(0.1);
      }
    }
  });

  it('says so where data are straight, few, or flat outside the window', () => {
    const xs = line(9, 0, 4);
    const window = { near: 2, halfWidth: 2 };
    expect(() =>
      fitPeak(
        xs,
        xs.map((x) => x * x),
        { near: 3, halfWidth: 1 },
      ),
    ).toThrow(/do not determine/);
    expect(() => fitPeak(xs, xs, { near: 0, halfWidth: 1 })).toThrow(/more data/);
    expect(() => fitPeak(xs, xs, window)).toThrow(/do not determine/);
  });
});

describe('peak over two actuators', () => {
  const places = line(7, -1.5, 1.5).flatMap((y) => line(7, -1.5, 1.5).map((x) => ({ x, y })));
  // H = [[100, 30], [30, 20]] has the eigenvalues 110 and 10 (by hand).
  const map = ({ x, y }: { x: number; y: number }) => {
    const [u, v] = [x - 0.2, y + 0.1];
    return 5 - (100 * u * u + 60 * u * v + 20 * v * v) / 2;
  };
  const window = { near: [0, 0], halfWidths: [1.6, 1.6] } as const;

  it('is exact on a paraboloid: place, height, second derivatives, principal curvatures', () => {
    const peak = fitSurfacePeak(
      places.map((place) => ({ ...place, objective: map(place) })),
      window,
    );
    expect(peak.position.map(({ value }) => value)).toEqual([
      expect.closeTo(0.2, 9),
      expect.closeTo(-0.1, 9),
    ]);
    expect(peak.height.value).toBeCloseTo(5, 8);
    expect([peak.hessian.xx.value, peak.hessian.xy.value, peak.hessian.yy.value]).toEqual([
      expect.closeTo(-100, 7),
      expect.closeTo(-30, 7),
      expect.closeTo(-20, 7),
    ]);
    expect(peak.principal.map(({ value }) => value)).toEqual([
      expect.closeTo(-110, 6),
      expect.closeTo(-10, 6),
    ]);
  });

  it('gives standard errors that are right (500 seeded peaks)', () => {
    const truths = { x: 0.2, y: -0.1, height: 5, xx: -100, xy: -30, yy: -20, first: -110, second: -10 };
    const records = judgeErrors(500, truths, (noise) => {
      const peak = fitSurfacePeak(
        places.map((place) => ({ ...place, objective: map(place) + noise.normal() })),
        window,
      );
      const [x, y] = peak.position;
      return {
        x,
        y,
        height: peak.height,
        ...peak.hessian,
        first: peak.principal[0],
        second: peak.principal[1],
      };
    });
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.2);
      expect(Math.abs(size - 1)).toBeLessThan(0.12);
    }
  });
});
