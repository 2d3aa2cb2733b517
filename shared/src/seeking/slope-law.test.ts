import { describe, expect, it } from 'vitest';
import { settled } from './law.fixture.js';
import { meansOf, simulateSeeking } from './simulate-seeking.fixture.js';
import { slopeLaw } from './slope-law.js';

/** Where the law rests on −(θ − 2)² with the wanted slope +1: −2(θ − 2) = 1 at θ = 1.5. */
function rest(dither: string, others: Record<string, number> = {}): number {
  const periodS = (2 * Math.PI) / 50;
  const parameters = settled(slopeLaw, [{ periodS, dither, slope: 1, gain: 0.1, ...others }], {
    washoutRatio: 2 / 50,
  });
  const means = simulateSeeking({
    law: slopeLaw,
    parameters,
    start: [1],
    map: ([x = NaN]) => -((x - 2) ** 2),
    periodS,
    stepsPerPeriod: 100,
    periods: 400,
  });
  return meansOf(means).at(-1) ?? NaN;
}

describe('slope seeking', () => {
  // K. B. Ariyur and M. Krstić (2004): rests where f' = f'ref; f = (θ − 2)² with f'ref = −1, here as its negative
  // with +1; a = 0.1, ω = 50 rad/s, ωh = 2 rad/s.
  it('rests where the slope is the wanted one', () => {
    expect(rest('sine')).toBeCloseTo(1.5, 3);
  });

  it('does so with a square', () => {
    expect(rest('square')).toBeCloseTo(1.5, 3);
  });

  it('rests at the peak for slope 0', () => {
    expect(rest('sine', { slope: 0 })).toBeCloseTo(2, 2);
  });

  it('takes a share of the slope that is given', () => {
    // Twice the share makes twice the reference: the slope it rests at is 2.
    expect(rest('sine', { slope: 2, slopeShare: 0.5 })).toBeCloseTo(1.5, 2);
  });
});
