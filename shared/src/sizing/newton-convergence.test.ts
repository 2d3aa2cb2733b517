import { describe, expect, it } from 'vitest';
import { newtonConvergence } from './newton-convergence.js';

const quick = { hessianRadPerS: 300, lowPassRadPerS: 300, settleS: 0 };

describe('convergence of the Newton law', () => {
  // Γ⁻¹ = λ + (1 − λ)·e^{−ωr·t} and x' = −κ·λ·x·Γ give x = (λ·e^{ωr·t} + 1 − λ)^{−κ/ωr}; a tenth of it, solved for t.
  it.each([
    [1, 1],
    [0.3, 1],
    [0.3, 0.5],
    [4, 2],
  ])('has the closed form of the Riccati filter (λ = %d, ωr/κ = %d)', (curvature, ratio) => {
    const t = Math.log((10 ** ratio - 1 + curvature) / curvature) / ratio;
    const found = newtonConvergence({ curvature, rate: 1, inverseRate: ratio, ...quick });
    expect(Math.abs(found / t - 1)).toBeLessThan(0.02);
  });

  it('is not to be had where the curvature has the wrong sign', () => {
    expect(newtonConvergence({ curvature: -1, rate: 1, inverseRate: 1, ...quick })).toBeNaN();
  });
});
