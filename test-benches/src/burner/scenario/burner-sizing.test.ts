import { sizeSeeking } from '@cresthold/shared';
import { describe, expect, it } from 'vitest';
import { burnerSeeking } from './burner-experiment.js';

/** The plant as the comment above `burnerSeeking` describes it, sized by hand there. */
const size = sizeSeeking({
  scanS: 0.05,
  timeConstantsS: [0.2],
  noise: 0.008,
  curvature: 0.039,
  driftPerS: 0.05,
  lossAllowed: 0.014,
  resolution: 0.01,
});
const ratio = (value: number, byHand: number) => value / byHand;

describe('the burner, sized by the code', () => {
  it('comes out as it was sized by hand', () => {
    expect(ratio(size.periodS, burnerSeeking.ditherPeriodS)).toBeCloseTo(1, 1);
    expect(ratio(size.amplitude, burnerSeeking.ditherAmplitude)).toBeCloseTo(1, 1);
    expect(size.washoutRatio).toBe(burnerSeeking.washoutRatio);
    expect(size.lowPassRatio).toBe(burnerSeeking.lowPassRatio);
    expect(Math.abs((size.phaseRad * 180) / Math.PI - burnerSeeking.phaseDeg)).toBeLessThan(5);
    // The hand kept 6.3 times below the corner of the low-pass, the code 8 times.
    expect(ratio(size.gain, burnerSeeking.gain)).toBeGreaterThan(0.6);
    expect(ratio(size.gain, burnerSeeking.gain)).toBeLessThan(1.1);
  });

  it('predicts a trail behind the drift that costs as little as the hand found', () => {
    expect(size.predicted.driftLag).toBeGreaterThan(0.2);
    expect(size.predicted.driftLag).toBeLessThan(0.4);
    expect(size.predicted.driftLoss).toBeLessThan(0.003);
    expect(size.warnings).toEqual([]);
  });
});
