import { describe, expect, it } from 'vitest';
import { judgeErrors } from '../signals/honest-errors.fixture.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { backlashWidth } from './backlash.js';
import { sweep } from './backlash.fixture.js';
import { findHills, gridNeighbours, lineNeighbours } from './hills.js';
import { readSurveyCurve, type SurveyCurveSample } from './survey-curve.js';
import { readSurveySurface } from './survey-surface.js';

const line = (count: number, from: number, to: number) =>
  Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
const samples = (
  values: readonly number[],
  objectives: readonly number[],
  standardError = 0.01,
): SurveyCurveSample[] =>
  values.map((value, i) => ({ value, objective: objectives[i]!, standardError, isValid: true }));

describe('hills', () => {
  it('have their prominence above the highest pass to higher ground (by hand)', () => {
    const heights = [0, 3, 1, 2, 0.5, 5, 4];
    expect(findHills(heights, lineNeighbours(7))).toEqual([
      { index: 5, height: 5, prominence: 5 },
      { index: 1, height: 3, prominence: 2.5 },
      { index: 3, height: 2, prominence: 1 },
    ]);
  });

  it('pass over a ridge of a grid, round a hole in it', () => {
    const heights = [9, 1, 7, 2, NaN, 2, 3, 3, 8];
    expect(
      findHills(heights, gridNeighbours(3, 3)).map(({ index, prominence }) => [index, prominence]),
    ).toEqual([
      [0, 8],
      [8, 6],
      [2, 5],
    ]);
  });

  it('are one on flat ground and on a plateau', () => {
    expect(findHills([2, 2, 2], lineNeighbours(3))).toHaveLength(1);
    expect(findHills([0, 5, 5, 5, 0], lineNeighbours(5))).toHaveLength(1);
    expect(findHills([], lineNeighbours(0))).toEqual([]);
  });
});

describe('backlash', () => {
  // Closed form with the play model: on a parabola up − down = −b·f'(u) exactly, so the width comes out exactly.
  it.each([0.02, 0.3])('of width %d is found exactly on a parabola', (width) => {
    const sweeps = sweep(line(21, -1, 1.5), width, (x) => 4 - 3 * x * x);
    const found = backlashWidth([sweeps]);
    expect(found.value).toBeCloseTo(width, 9);
    expect(found.standardError).toBeLessThan(1e-9);
  });

  it('is 0 where there is none and unknown on flat ground', () => {
    expect(backlashWidth([sweep(line(11, 0, 1), 0, (x) => -x * x)]).value).toBeCloseTo(0, 10);
    expect(backlashWidth([sweep(line(11, 0, 1), 0.2, () => 3)]).value).toBeNaN();
  });

  it('gives standard errors that are right (200 seeded sweeps of a hill that is no parabola)', () => {
    const sweeps = sweep(line(31, -2, 2), 0.1, (x) => Math.exp(-x * x));
    const records = judgeErrors(200, { width: 0.1 }, (noise) => {
      const noisy = (list: readonly number[]) => list.map((value) => value + 0.03 * noise.normal());
      return { width: backlashWidth([{ ...sweeps, up: noisy(sweeps.up), down: noisy(sweeps.down) }]) };
    });
    expect(Math.abs(records.width.bias)).toBeLessThan(0.3);
    expect(Math.abs(records.width.size - 1)).toBeLessThan(0.15);
  }, 30_000);
});

// The scatter of the slope must not make it small, nor the bluntness of the smoothed curve large.
it('backlash is found without bias where noise is strong (150 seeded sweeps)', () => {
  const sweeps = sweep(line(31, -2, 2), 0.3, (x) => Math.exp(-x * x));
  const widths = Array.from({ length: 150 }, (_, seed) => {
    const noise = new SeededNoise(seed);
    const noisy = (list: readonly number[]) => list.map((value) => value + 0.08 * noise.normal());
    return backlashWidth([{ ...sweeps, up: noisy(sweeps.up), down: noisy(sweeps.down) }]).value;
  });
  // Standard error of the mean of 150: 1.5 %.
  const mean = widths.reduce((a, b) => a + b) / widths.length;
  expect(Math.abs(mean / 0.3 - 1)).toBeLessThan(0.05);
}, 30_000);

/** Two hills: h(−u) of h(u) = u⁴ + u³ − 2u² − 3u, turned over: maxima at u = −1 (3) and 1 (−1), saddle at 0.75. */
const twoHills = (u: number) => -(u ** 4 - u ** 3 - 2 * u ** 2 + 3 * u);

describe('survey over one actuator', () => {
  const values = line(41, -1.6, 1.4);

  // min h(1) = −3, local min h(−1) = 1, local max h(−0.75) = 1.0195 of u⁴ + u³ − 2u² − 3u (roots of its
  // derivative).
  it('lists the hills of a two-hill map with place, prominence and curvature', () => {
    const found = readSurveyCurve(samples(values, values.map(twoHills), 1e-4), [], 'maximise');
    expect(found.hills).toHaveLength(2);
    const [first, second] = found.hills;
    expect(Math.abs(first!.value + 1)).toBeLessThan(0.05);
    expect(first!.objective).toBeCloseTo(3, 1);
    expect(Math.abs(second!.value - 1)).toBeLessThan(0.05);
    expect(second!.prominence).toBeCloseTo(0.0195, 2);
    expect(second!.isDistinct).toBe(true);
    // f''(−1) = −(12 + 6 − 4) = −14; the window takes a little off.
    expect(Math.abs(first!.peak!.position.value + 1)).toBeLessThan(0.03);
    expect(Math.abs(first!.peak!.curvature.value / -14 - 1)).toBeLessThan(0.12);
    expect(found.greatestGap.value).toBeNaN();
  });

  it('turns a map over where the objective is to be made small', () => {
    const up = readSurveyCurve(samples(values, values.map(twoHills)), [], 'maximise');
    const down = readSurveyCurve(
      samples(
        values,
        values.map((u) => -twoHills(u)),
      ),
      [],
      'minimise',
    );
    expect(down.hills.map(({ index, prominence }) => [index, prominence])).toEqual(
      up.hills.map(({ index, prominence }) => [index, prominence]),
    );
    expect(down.hills[0]!.peak!.curvature.value).toBeCloseTo(-up.hills[0]!.peak!.curvature.value, 9);
  });

  it('does not take noise for hills', () => {
    const noise = new SeededNoise(9);
    const objectives = values.map((u) => -u * u + 0.05 * noise.normal());
    const found = readSurveyCurve(samples(values, objectives, 0.05), [], 'maximise');
    expect(found.hills.length).toBeGreaterThan(3);
    expect(found.hills.filter((hill) => hill.isDistinct)).toHaveLength(1);
    expect(Math.abs(found.curve!.noise / 0.05 - 1)).toBeLessThan(0.4);
  });

  it('reports gap and backlash of the two ways, and leaves out what was not valid on each visit', () => {
    const sweeps = sweep(values, 0.1, (x) => 5 - x * x);
    const up = samples(values, sweeps.up);
    up[3] = { ...up[3]!, isValid: false };
    const found = readSurveyCurve(up, samples(values, sweeps.down), 'maximise');
    expect(found.samples).toHaveLength(40);
    expect(found.backlash.value).toBeCloseTo(0.1, 8);
    // −b·f'(u) is greatest at u = −1.6: −0.1·3.2.
    expect(found.greatestGap.value).toBeCloseTo(-0.32, 8);
    expect(found.greatestGap.standardError).toBeCloseTo(0.01 * Math.SQRT2, 10);
    expect(found.hills[0]!.peak!.position.value).toBeCloseTo(0, 6);
  });

  it('refuses ways that do not match and maps without a valid place', () => {
    const up = samples([0, 1], [1, 2]);
    expect(() => readSurveyCurve(up, up.slice(1), 'maximise')).toThrow(/down/);
    expect(() => readSurveyCurve(samples([1, 0], [1, 2]), [], 'maximise')).toThrow(/rising/);
    expect(() =>
      readSurveyCurve(
        up.map((s) => ({ ...s, isValid: false })),
        [],
        'maximise',
      ),
    ).toThrow(/more data/);
    expect(readSurveyCurve(up, [], 'maximise').hills[0]).toMatchObject({ value: 1, peak: null });
  });
});

describe('survey over two actuators', () => {
  const xs = line(13, -3, 3);
  const ys = line(11, -2.5, 2.5);
  const hill = (x: number, y: number, x0: number, y0: number) => Math.exp(-((x - x0) ** 2) - (y - y0) ** 2);
  const map = (x: number, y: number) => 3 * hill(x, y, 1.5, 1) + 2 * hill(x, y, -1.5, -1);
  const grid = (of: (x: number, y: number) => number, standardError = 0.01) =>
    ys.flatMap((y) => xs.map((x) => ({ objective: of(x, y), standardError, isValid: true })));

  it('lists both hills; the place of the best is found', () => {
    const found = readSurveySurface({ xs, ys, up: grid(map), down: [] }, 'maximise');
    const distinct = found.hills.filter((h) => h.isDistinct);
    expect(distinct.map(({ x, y }) => [x, y])).toEqual([
      [1.5, 1],
      [-1.5, -1],
    ]);
    // Prominence of the lower hill: its height less that of the pass between, near (−0.3, −0.2).
    expect(distinct[1]!.prominence).toBeGreaterThan(1.5);
    const [x, y] = distinct[0]!.peak!.position;
    expect(Math.abs(x.value - 1.5)).toBeLessThan(0.03);
    expect(Math.abs(y.value - 1)).toBeLessThan(0.03);
    expect(found.backlash.value).toBeNaN();
  });

  it('finds the backlash of the first actuator from all rows', () => {
    const cup = (x: number, y: number) => 2 * x * x + y * y + x * y;
    const rows = ys.map((y) => sweep(xs, 0.25, (x) => cup(x, y)));
    const of = (way: 'up' | 'down') =>
      rows.flatMap((row) => row[way].map((objective) => ({ objective, standardError: 0.01, isValid: true })));
    const found = readSurveySurface({ xs, ys, up: of('up'), down: of('down') }, 'minimise');
    expect(found.backlash.value).toBeCloseTo(0.25, 8);
    expect(found.sampleError).toBeCloseTo(0.01 / Math.SQRT2, 12);
    expect(found.hills[0]!.peak!.position[0].value).toBeCloseTo(0, 1);
  });

  it('keeps invalid places off the map and refuses a grid that is not full', () => {
    const up = grid(map);
    const best = up.reduce((a, s, i) => (s.objective > up[a]!.objective ? i : a), 0);
    up[best] = { ...up[best]!, isValid: false };
    const found = readSurveySurface({ xs, ys, up, down: [] }, 'maximise');
    expect(found.objectives[best]).toBeNaN();
    expect(found.hills[0]!.index).not.toBe(best);
    expect(() => readSurveySurface({ xs, ys, up: up.slice(1), down: [] }, 'maximise')).toThrow(
      /one sample per place/,
    );
  });
});
