import { describe, expect, it } from 'vitest';
import { createSecondOrderLag, stepSecondOrderLag } from '../signals/lags.js';
import { SeededNoise } from '../signals/seeded-noise.fixture.js';
import { ditherLoss, measuredLoss } from './ripple-loss.js';
import { dynamicEfficiency, staticWeightings, weightedEfficiency } from './tracker-efficiency.js';
import { TrackingMeter } from './tracking-meter.js';
import { overshootShare, timeToBandS } from './transient.js';

describe('tracking meter', () => {
  it('gives efficiency and regret by hand: 9 of 10 for 1 s, 6 of 10 for 3 s', () => {
    const meter = new TrackingMeter('maximise');
    meter.add(9, 10, 1);
    meter.add(6, 10, 3);
    expect(meter.efficiency).toBeCloseTo(27 / 40, 14);
    expect(meter.regret).toBeCloseTo(13, 12);
    expect(meter.meanRegret).toBeCloseTo(3.25, 14);
  });

  it('turns both round where the objective is to be made small', () => {
    const meter = new TrackingMeter('minimise');
    meter.add(12, 10, 2);
    expect(meter.efficiency).toBeCloseTo(10 / 12, 14);
    expect(meter.regret).toBeCloseTo(4, 14);
  });

  it('has no efficiency of an objective below 0, but a regret', () => {
    const meter = new TrackingMeter('maximise');
    expect([meter.efficiency, meter.meanRegret]).toEqual([NaN, NaN]);
    meter.add(-3, -2, 1);
    expect(meter.efficiency).toBeNaN();
    expect(meter.regret).toBeCloseTo(1, 14);
  });
});

describe('transient', () => {
  // Second order, ζ = 0.5: overshoot exp(−πζ/√(1 − ζ²)) = 16.30 % (Ogata 2010, section 5-3; closed form).
  it('measures the overshoot of a second-order step', () => {
    const lag = createSecondOrderLag();
    const values = [0, ...Array.from({ length: 4000 }, () => stepSecondOrderLag(lag, 2, 1, 0.5, 0.005))];
    expect(overshootShare(values, 2)).toBeCloseTo(0.16303, 4);
    expect(
      overshootShare(
        values.map((value) => 7 - value),
        5,
      ),
    ).toBeCloseTo(0.16303, 4);
  });

  // First order: within 2 % for good after τ·ln 50 = 3.912 τ.
  it('measures the time to a band', () => {
    const timesS = Array.from({ length: 1001 }, (_, i) => 3 + i * 0.01);
    const values = timesS.map((t) => 4 - 4 * Math.exp(-(t - 3) / 1.5));
    expect(timeToBandS(timesS, values, 4, 0.08)).toBeCloseTo(3.912023 * 1.5, 1);
  });

  it('counts only a stay to the end, and no overshoot below 0', () => {
    expect(timeToBandS([0, 1, 2, 3], [10, 10, 0, 10], 10, 1)).toBe(3);
    expect(timeToBandS([0, 1], [10, 0], 10, 1)).toBeNull();
    expect(overshootShare([0, 5, 9], 10)).toBe(0);
    expect(() => overshootShare([3, 4], 3)).toThrow(/target/);
    expect(() => timeToBandS([0], [1], 1, -1)).toThrow(/band/);
  });
});

describe('ripple loss', () => {
  // f'' = 3: a = 0.2 → 0.0300, a = 0.5 → 0.1875 (closed form f''a²/4); a square costs twice that.
  it('has the closed form', () => {
    expect(ditherLoss(0.2, 3, 'sine')).toBeCloseTo(0.03, 14);
    expect(ditherLoss(0.5, -3, 'sine')).toBeCloseTo(0.1875, 14);
    expect(ditherLoss(0.2, 3, 'square')).toBeCloseTo(0.06, 14);
  });

  it('is what a dithered quadratic loses, and its interval says so', () => {
    const noise = new SeededNoise(12);
    const objectives = Array.from(
      { length: 2000 },
      (_, i) => 10 - 1.5 * (0.2 * Math.sin((2 * Math.PI * i) / 20)) ** 2 + 0.02 * noise.normal(),
    );
    const found = measuredLoss(objectives, 10, 'maximise');
    expect(found.low).toBeLessThan(0.03);
    expect(found.high).toBeGreaterThan(0.03);
    expect(
      measuredLoss(
        objectives.map((y) => -y),
        -10,
        'minimise',
      ).mean,
    ).toBeCloseTo(found.mean, 12);
  });
});

describe('efficiency of a tracker', () => {
  it('is energy taken over energy to be had, by hand, with unequal times', () => {
    const record = { voltages: [30, 20], currents: [5, 4], availablePowers: [160, 100], durationsS: [2, 1] };
    expect(dynamicEfficiency(record)).toBeCloseTo(380 / 420, 14);
  });

  // Weights of EN 50530, from memory: 0.03, 0.06, 0.13, 0.10, 0.48, 0.20 and 0.04, 0.05, 0.12, 0.21, 0.53,
  // 0.05; each sums up to 1.
  it.each(['european', 'californian'] as const)('%s weights sum up to 1 and weight as they say', (name) => {
    const weighting = staticWeightings[name];
    expect(weighting.reduce((sum, [, weight]) => sum + weight, 0)).toBeCloseTo(1, 14);
    const same = new Map(weighting.map(([load]) => [load, 0.97]));
    expect(weightedEfficiency(same, name)).toBeCloseTo(0.97, 14);
    same.set(0.5, 0.87);
    expect(weightedEfficiency(same, name)).toBeCloseTo(0.97 - 0.1 * (name === 'european' ? 0.48 : 0.21), 14);
  });

  it('refuses missing loads and series that do not match', () => {
    expect(() => weightedEfficiency(new Map([[0.5, 1]]), 'european')).toThrow(/efficiencyAt\[0.05\]/);
    const record = { voltages: [1, 2], currents: [1], availablePowers: [1, 1], durationsS: [1, 1] };
    expect(() => dynamicEfficiency(record)).toThrow(/currents/);
    expect(() => dynamicEfficiency({ ...record, currents: [1, 1], durationsS: [1, 0] })).toThrow(
      /durationsS\[1\]/,
    );
  });
});
