import { describe, expect, it } from 'vitest';
import { simulateSized, type Simulated } from './simulate-sized.fixture.js';
import { sizeSeeking, type SizingRequest } from './size-seeking.js';

declare const console: { log(text: string): void };

const request = (change: Partial<SizingRequest> = {}): SizingRequest => ({
  scanS: 0.1,
  timeConstantsS: [2],
  noise: 0.05,
  curvature: 0.5,
  lossAllowed: 0.02,
  ...change,
});

describe('a sized gradient law', () => {
  it('dithers where the plant lags by ωτ = ½, with the amplitude that costs what is allowed', () => {
    const size = sizeSeeking(request());
    expect((2 * Math.PI * 2) / size.periodS).toBeCloseTo(0.5, 9);
    expect((0.5 * size.amplitude ** 2) / 4).toBeCloseTo(0.02, 12);
    expect(size.predicted.rippleLoss).toBeCloseTo(0.02, 12);
    expect(size.margins.plantOverDither).toBeCloseTo(2, 9);
    expect(size.margins.lowPassOverSwing).toBeGreaterThan(1.9);
    expect(size.warnings).toEqual([]);
  });

  it('takes further lags and dead time for lag as well', () => {
    const size = sizeSeeking(request({ timeConstantsS: [2, 1], deadTimeS: 0.5 }));
    const omega = (2 * Math.PI) / size.periodS;
    expect(Math.atan(2 * omega) + Math.atan(omega) + 0.5 * omega).toBeCloseTo(Math.atan(0.5), 9);
    expect(size.margins.delayMargin).toBeGreaterThan(5);
  });

  it('never takes fewer than twelve scans for a period, and says when that is what holds it', () => {
    for (const timeConstantsS of [[], [0.01]]) {
      expect(sizeSeeking(request({ timeConstantsS })).margins.scansPerPeriod).toBeCloseTo(12, 9);
    }
    expect(sizeSeeking(request({ timeConstantsS: [0.01] })).warnings[0]).toContain('scan faster');
  });

  it('warns where the drift outruns what the noise allows', () => {
    const size = sizeSeeking(request({ noise: 5, driftPerS: 0.05 }));
    expect(size.gainLimitedBy).toBe('noise');
    expect(size.warnings[0]).toContain('drifts faster');
  });

  it('names the fields at fault', () => {
    expect(() => sizeSeeking(request({ curvature: 0 }))).toThrow(
      expect.objectContaining({
        code: 'analysis.invalid-input',
        details: [expect.objectContaining({ field: 'curvature' })],
      }),
    );
  });
});

describe('what sizing predicts, against simulation on first-order plants', () => {
  const cases = [0.5, 5, 50].flatMap((timeConstantS) =>
    [0.03, 0.3, 3].map((noise) => ({ timeConstantS, noise, scanS: timeConstantS > 10 ? 0.5 : 0.1 })),
  );
  const rows: string[] = [];

  it.each(cases)(
    'time constant $timeConstantS s, noise $noise: convergence and loss within 15 %',
    (setting) => {
      const simulated = simulateSized({ ...setting, curvature: 0.5, lossAllowed: 0.02 });
      rows.push(rowOf(setting, simulated));
      const { predicted } = simulated.size;
      expect(Math.abs(predicted.convergenceS / simulated.convergenceS - 1)).toBeLessThan(0.15);
      const loss = predicted.rippleLoss + predicted.noiseLoss;
      expect(Math.abs(loss / simulated.loss - 1)).toBeLessThan(0.15);
      // With little noise the slope has a ripple of its own beside it.
      if (setting.noise < 3) return;
      expect(Math.abs(predicted.gradientNoise / simulated.gradientNoise - 1)).toBeLessThan(0.15);
      expect(Math.abs(predicted.estimateNoise / simulated.estimateNoise - 1)).toBeLessThan(0.15);
    },
    120_000,
  );

  it('is printed as a table', () => {
    const head =
      'τ s | noise | gain limited by | converged s: predicted, simulated | loss: predicted, simulated';
    console.log([head, ...rows].join('\n'));
    expect(rows).toHaveLength(cases.length);
  });

  it('trails a drifting best point by v/κ', () => {
    const plant = {
      scanS: 0.1,
      timeConstantS: 1,
      noise: 0,
      curvature: 0.5,
      lossAllowed: 0.02,
      driftPerS: 0.002,
    };
    const { size, lag } = simulateSized(plant);
    expect(Math.abs(size.predicted.driftLag / lag - 1)).toBeLessThan(0.15);
    expect(lag).toBeGreaterThan(0.05);
  });
});

function rowOf(
  { timeConstantS, noise }: { timeConstantS: number; noise: number },
  { size, convergenceS, loss }: Simulated,
) {
  const { predicted, gainLimitedBy } = size;
  const total = predicted.rippleLoss + predicted.noiseLoss;
  const pair = (a: number, b: number) =>
    `${a.toPrecision(4)}, ${b.toPrecision(4)} (${((a / b - 1) * 100).toFixed(1)} %)`;
  return `${timeConstantS} | ${noise} | ${gainLimitedBy} | ${pair(predicted.convergenceS, convergenceS)} | ${pair(total, loss)}`;
}
