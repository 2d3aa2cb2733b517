import { describe, expect, it } from 'vitest';
import { ditherConflicts, ditherLines } from '../dither/dither-lines.js';
import { DomainError } from '../errors/domain-error.js';
import { seekingLaws } from '../seeking/seeking-laws.js';
import { rippleLaws, sizeLaw } from './size-law.js';
import { lawIds } from './sized-laws.cases.fixture.js';
import { sizeSeeking } from './size-seeking.js';
import type { SizingPlant } from './sizing-plant.schema.js';

/** n actuators that each look to their neighbours: eigenvalues of the curvature lie between 1 and 3. */
function plantWith(n: number, change: Partial<SizingPlant> = {}): SizingPlant {
  const row = (i: number) =>
    Array.from({ length: n }, (_, j) => (i === j ? 2 : Math.abs(i - j) === 1 ? 0.5 : 0));
  return {
    scanS: 0.1,
    timeConstantsS: [1.5],
    noise: { sigma: 0.01 },
    curvature: Array.from({ length: n }, (_, i) => row(i)),
    actuators: Array.from({ length: n }, () => ({ min: -10, max: 10 })),
    ...change,
  };
}

const demands = { lossAllowed: 0.02 };

function faultOf(act: () => unknown): DomainError {
  try {
    act();
  } catch (error) {
    if (error instanceof DomainError) return error;
    throw error;
  }
  throw new Error('It was not refused.');
}

describe('sizing of any law', () => {
  it('agrees with the sizing of the gradient law alone', () => {
    const one = sizeSeeking({
      scanS: 0.1,
      timeConstantsS: [1.5],
      noise: 0.01,
      curvature: 2,
      lossAllowed: 0.02,
    });
    const { parameters, predicted } = sizeLaw('gradient', plantWith(1), demands);
    const [axis] = parameters.axes;
    expect(axis).toMatchObject({
      amplitude: expect.closeTo(one.amplitude, 12) as number,
      periodS: expect.closeTo(one.periodS, 9) as number,
      gain: expect.closeTo(one.gain, 9) as number,
      phaseRad: expect.closeTo(one.phaseRad, 9) as number,
      speedMax: expect.closeTo(one.speedMax, 9) as number,
    });
    expect(predicted.convergenceS).toBeCloseTo(one.predicted.convergenceS, 9);
    expect(predicted.noiseLoss).toBeCloseTo(one.predicted.noiseLoss, 12);
  });

  it.each(lawIds)('gives %s complete parameters for as many actuators as it steers, 16 at most', (lawId) => {
    const most = Math.min(16, seekingLaws[lawId].actuatorsMax);
    for (const n of [1, 2, 3, 5, most]) {
      const size = sizeLaw(lawId, plantWith(n), demands);
      expect(size.parameters).toEqual(seekingLaws[lawId].parametersSchema.parse(size.parameters));
      expect(size.parameters.axes).toHaveLength(n);
      const ripple = size.predicted.rippleLoss;
      expect(ripple).toBeLessThan(0.02 * (1 + 1e-9));
      expect(ripple).toBeGreaterThan(0.0199);
    }
  });

  it.each(['gradient', 'newton'] as const)('keeps the dithers of %s apart as the law needs it', (lawId) => {
    const { ditherPeriodsS, margins } = sizeLaw(lawId, plantWith(6), demands);
    const slowest = Math.max(...ditherPeriodsS);
    const lines = ditherLines(
      ditherPeriodsS.map((periodS) => slowest / periodS),
      lawId,
    );
    // A quarter of the distance is the fastest that the law adapts.
    const rate = (sizeLaw(lawId, plantWith(6), demands).ratePerS ?? NaN) * (slowest / (2 * Math.PI));
    expect(ditherConflicts(lines, 4 * rate * (1 - 1e-9))).toEqual([]);
    expect(margins.linesOverAdaptation).toBeGreaterThan(4 * (1 - 1e-9));
  });

  it('keeps dithers out of forbidden bands', () => {
    const free = sizeLaw('gradient', plantWith(1), demands).ditherPeriodsS[0]!;
    const forbidden = [{ fromHz: 0.9 / free, toHz: 1.2 / free }];
    const kept = sizeLaw('gradient', plantWith(1), { ...demands, forbidden }).ditherPeriodsS[0]!;
    expect(1 / kept).toBeLessThan(0.9 / free);
  });

  it('slows down for noise, for noise that is dense at the dither, and for a curvature badly known', () => {
    const rate = (change: Partial<SizingPlant>) =>
      sizeLaw('gradient', plantWith(1, change), demands).ratePerS!;
    const quick = rate({});
    expect(rate({ noise: { sigma: 1 } })).toBeLessThan(quick / 2);
    expect(rate({ noise: { sigma: 0.2, slope: 2, referenceHz: 1 } })).toBeLessThan(
      rate({ noise: { sigma: 0.2 } }) / 2,
    );
    expect(rate({ curvatureErrors: [1] })).toBeCloseTo(quick / 2, 9);
    expect(sizeLaw('gradient', plantWith(1, { curvatureErrors: [1] }), demands).remarks[0]).toMatch(/50 %/);
  });

  it('sizes simultaneous perturbation by the guidelines of its author, without fading where there is drift', () => {
    const still = sizeLaw('spsa', plantWith(1), { ...demands, seekS: 2000 }).parameters;
    expect([still.gainExponent, still.amplitudeExponent]).toEqual([0.602, 0.101]);
    const trials = 2000 / (2 * still.dwellS);
    expect(Math.abs(still.stability / (trials / 10) - 1)).toBeLessThan(0.05);
    const actuators = [{ min: -10, max: 10, driftPerS: 0.001 }];
    const drifting = sizeLaw('spsa', plantWith(1, { actuators }), demands).parameters;
    expect([drifting.gainExponent, drifting.amplitudeExponent]).toEqual([0, 0]);
  });

  it('waits for the plant, and for the noise, before perturb-and-observe decides', () => {
    const { dwellS, settleS, axes } = sizeLaw('perturb-observe', plantWith(1), demands).parameters;
    expect(settleS).toBeGreaterThanOrEqual(4 * 1.5);
    const noisy = sizeLaw('perturb-observe', plantWith(1, { noise: { sigma: 0.2 } }), demands).parameters;
    // 72·σ²/(f''Δ²)² scans.
    const scans = (72 * 0.04) / (2 * axes[0]!.amplitude ** 2) ** 2;
    expect((noisy.dwellS - noisy.settleS) / 0.1).toBeCloseTo(Math.ceil(scans), 6);
    expect(noisy.dwellS).toBeGreaterThan(dwellS);
  });

  it('lets Newton begin at the whole curvature that the survey found', () => {
    const { parameters } = sizeLaw('newton', plantWith(3), demands);
    expect(parameters.axes.map(({ curvature }) => curvature)).toEqual([2, 2, 2]);
    expect(parameters.crossCurvatures).toEqual([[0.5], [0, 0.5]]);
    expect(parameters.inverseRate).toBeLessThan(parameters.rate / 3);
  });

  it('says why it cannot predict what has no closed form', () => {
    for (const lawId of lawIds) {
      const { predicted, unpredicted } = sizeLaw(lawId, plantWith(2), demands);
      const missing = Object.entries(predicted).flatMap(([name, value]) => (value === null ? [name] : []));
      expect(Object.keys(unpredicted).sort()).toEqual(missing.sort());
    }
  });

  it('remarks that a ridge needs Newton, and a drift that is too fast', () => {
    const ridge = plantWith(2, {
      curvature: [
        [1, 0.98],
        [0.98, 1],
      ],
    });
    expect(sizeLaw('gradient', ridge, demands).remarks.join()).toMatch(/Newton/);
    expect(sizeLaw('newton', ridge, demands).remarks.join()).not.toMatch(/Newton/);
    const actuators = [{ min: -10, max: 10, driftPerS: 1 }];
    expect(sizeLaw('gradient', plantWith(1, { actuators }), demands).remarks.join()).toMatch(/drifts/);
  });

  it('refuses by field what it cannot size', () => {
    const field = (act: () => unknown) => faultOf(act).details[0]?.field;
    expect(field(() => sizeLaw('newton', plantWith(9), demands))).toBe('actuators');
    expect(field(() => sizeLaw('gradient', plantWith(1, { curvature: [[-1]] }), demands))).toBe('curvature');
    expect(field(() => sizeLaw('gradient', plantWith(1), { lossAllowed: 0 }))).toBe('lossAllowed');
    expect(field(() => sizeLaw('newton', plantWith(1), { ...demands, dither: 'measured' }))).toBe('dither');
    expect(field(() => sizeLaw('slope', plantWith(1), { ...demands, dither: 'measured' }))).toBe(
      'actuators.0.ripple',
    );
    const coarse = plantWith(1, { actuators: [{ min: -10, max: 10, resolution: 1 }] });
    for (const lawId of lawIds) expect(field(() => sizeLaw(lawId, coarse, demands))).toBe('amplitude');
    expect(rippleLaws).toEqual(['gradient', 'slope', 'constrained', 'least-squares']);
  });
});
