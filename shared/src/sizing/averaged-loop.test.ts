import { describe, expect, it } from 'vitest';
import { lagAtDither, recoveredSlope, slowRate, type AveragedLoop } from './averaged-loop.js';

const loop = (change: Partial<AveragedLoop> = {}): AveragedLoop => ({
  plant: { timeConstantsS: [], deadTimeS: 0 },
  scanS: 1e-4,
  omegaRadPerS: 10,
  washoutRadPerS: 1,
  lowPassRadPerS: 1,
  phaseRad: 0,
  loopRate: 0.04,
  ...change,
});

// Closed forms after Krstić and Wang (2000): Re[e^{jφ}F(jω)H(jω)], and s² + ωl·s + ωl·κ = 0 with the low-pass.
describe('the averaged loop', () => {
  it.each([
    [1, 0.99009901],
    [3, 0.91743119],
    [10, 0.5],
  ])('recovers ω²/(ω² + ωh²) of the slope behind a washout at %d rad/s', (washoutRadPerS, share) => {
    expect(recoveredSlope(loop({ washoutRadPerS }))).toBeCloseTo(share, 5);
  });

  it.each([
    [0.2, 0, 0.54455],
    [0.2, 0.6857, 0.7036],
    [0.5, 0, 0.17071],
    [0.5, 1.0906, 0.36955],
  ])('recovers, behind a lag of %d s and with φ = %d, the share %d', (tau, phaseRad, share) => {
    const plant = { timeConstantsS: [tau], deadTimeS: 0 };
    const lagging = loop({ plant, omegaRadPerS: 5, washoutRadPerS: 0.5, phaseRad });
    expect(recoveredSlope(lagging)).toBeCloseTo(share, 3);
    if (phaseRad > 0) expect(lagAtDither(lagging)).toBeCloseTo(phaseRad, 3);
  });

  it('decays with the slow root of the loop with low-pass', () => {
    // κ = 0.039604, ωl = 1: (1 − √(1 − 4κ))/2 = 0.0413105; a simulation of the whole loop gave 0.0413340.
    expect(slowRate(loop())).toBeCloseTo(0.04133, 4);
    expect(slowRate(loop({ loopRate: 0.3 }))).toBeNaN();
  });

  it('counts dead time as lag', () => {
    const plant = { timeConstantsS: [], deadTimeS: 0.1 };
    expect(lagAtDither(loop({ plant, washoutRadPerS: 0 }))).toBeCloseTo(1, 9);
  });

  it('knows a sampled lag exactly', () => {
    // y_k = y_(k−1) + α(u_k − y_(k−1)): for α = 1 there is none.
    const plant = { timeConstantsS: [1e-9], deadTimeS: 0 };
    expect(lagAtDither(loop({ plant, washoutRadPerS: 0, scanS: 0.1 }))).toBeCloseTo(0, 9);
  });
});
