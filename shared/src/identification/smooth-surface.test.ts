import { describe, expect, it } from 'vitest';
import { judgeErrors } from '../signals/honest-errors.fixture.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { fitSurfacePeak } from './fit-surface-peak.js';
import { smoothCurve } from './smooth-curve.js';
import { smoothSurface } from './smooth-surface.js';

const line = (count: number, from: number, to: number) =>
  Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
const grid = (count: number) => line(count, -1, 1).flatMap((y) => line(count, -1, 1).map((x) => ({ x, y })));
const over = (count: number, map: (x: number, y: number) => number) =>
  grid(count).map(({ x, y }) => ({ x, y, objective: map(x, y) }));

const bowl = (x: number, y: number) => 3 - x + 0.5 * y - 2 * x * x + 0.7 * x * y - y * y;

describe('smooth surface', () => {
  it('is exact on a paraboloid at any width, between the data and at them', () => {
    for (const width of [0.01, 0.6, 20]) {
      const { value, slope, hessian } = smoothSurface(over(6, bowl), { width }).at(0.13, -0.31);
      expect(value.value).toBeCloseTo(bowl(0.13, -0.31), 9);
      expect(slope.map((s) => s.value)).toEqual([
        expect.closeTo(-1 - 4 * 0.13 + 0.7 * -0.31, 8),
        expect.closeTo(0.5 + 0.7 * 0.13 + 2 * 0.31, 8),
      ]);
      expect([hessian.xx.value, hessian.xy.value, hessian.yy.value]).toEqual([
        expect.closeTo(-4, 7),
        expect.closeTo(0.7, 7),
        expect.closeTo(-2, 7),
      ]);
    }
  });

  it('takes left-out errors by the short cut that really leaving out gives', () => {
    const noise = new SeededNoise(3);
    const points = over(5, (x, y) => Math.sin(2 * x + y) + 0.1 * noise.normal());
    const width = 0.9;
    const errors = points.map(({ x, y, objective }, i) => {
      const others = points.filter((_, j) => j !== i);
      return objective - smoothSurface(others, { width }).at(x, y).value.value;
    });
    const direct = Math.sqrt(errors.reduce((sum, error) => sum + error * error, 0) / errors.length);
    expect(smoothSurface(points, { width }).predictionError).toBeCloseTo(direct, 9);
  });

  it('is the fit of one paraboloid where it is very wide, standard errors included', () => {
    const noise = new SeededNoise(8);
    const points = over(7, (x, y) => 1 - 2 * x * x - x * y - y * y + 0.05 * noise.normal());
    const standardErrors = points.map(() => 0.05);
    const fit = fitSurfacePeak(points, { near: [0, 0], halfWidths: [9, 9] }, standardErrors);
    const { hessian } = smoothSurface(points, { width: 1e4, standardErrors }).at(0.2, 0.1);
    for (const name of ['xx', 'xy', 'yy'] as const) {
      expect(hessian[name].value).toBeCloseTo(fit.hessian[name].value, 6);
      expect(hessian[name].standardError).toBeCloseTo(fit.hessian[name].standardError, 6);
    }
  });

  it('is the smooth curve where nothing depends on the second actuator, very wide', () => {
    // On a full grid the parabola in y is orthogonal to that in x once both are centred.
    const curve = smoothCurve(
      line(9, -1, 1),
      line(9, -1, 1).map((x) => Math.sin(2 * x)),
      { width: 1e4 },
    );
    const surface = smoothSurface(
      over(9, (x) => Math.sin(2 * x)),
      { width: 1e4 },
    );
    for (const x of [-0.8, 0, 0.35]) {
      const [one, two] = [curve.at(x), surface.at(x, 0.4)];
      expect(two.value.value).toBeCloseTo(one.value.value, 6);
      expect(two.slope[0].value).toBeCloseTo(one.slope.value, 6);
      expect(two.hessian.xx.value).toBeCloseTo(one.curvature.value, 6);
    }
  });

  it('chooses a wide width for a paraboloid, a narrow one for waves, and knows the noise', () => {
    const noise = new SeededNoise(5);
    const wide = smoothSurface(over(8, (x, y) => bowl(x, y) + 0.1 * noise.normal()));
    const narrow = smoothSurface(over(9, (x, y) => Math.sin(3 * x) * Math.cos(3 * y) + 0.1 * noise.normal()));
    expect(wide.width).toBeGreaterThan(1);
    expect(narrow.width).toBeLessThan(0.6);
    expect(Math.abs(wide.noise / 0.1 - 1)).toBeLessThan(0.25);
    expect(Math.abs(narrow.noise / 0.1 - 1)).toBeLessThan(0.4);
  });

  it('gives standard errors that are right (100 seeded surfaces)', () => {
    const truths = { value: bowl(0.3, -0.2), slope: -1 - 1.2 - 0.14, xx: -4, xy: 0.7 };
    const records = judgeErrors(100, truths, (noise) => {
      const surface = smoothSurface(
        over(6, (x, y) => bowl(x, y) + 0.2 * noise.normal()),
        { width: 1 },
      );
      const { value, slope, hessian } = surface.at(0.3, -0.2);
      return { value, slope: slope[0], xx: hessian.xx, xy: hessian.xy };
    });
    for (const { bias, size } of Object.values(records)) {
      expect(Math.abs(bias)).toBeLessThan(0.3);
      expect(Math.abs(size - 1)).toBeLessThan(0.2);
    }
  }, 30_000);

  it('refuses too few places, and places on a line', () => {
    expect(() => smoothSurface(over(3, bowl))).toThrow(/at least 10/);
    const onLine = line(12, 0, 1).map((x) => ({ x, y: x, objective: x }));
    expect(() => smoothSurface(onLine)).toThrow(/do not determine/);
    expect(() => smoothSurface(line(12, 0, 1).map((x) => ({ x, y: 0, objective: x })))).toThrow(
      /both actuators/,
    );
  });
});
