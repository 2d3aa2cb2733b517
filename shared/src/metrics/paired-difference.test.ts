import { describe, expect, it } from 'vitest';
import { coverage } from './coverage.fixture.js';
import { pairedDifference, trialOrder, type TrialLeg } from './paired-difference.js';

const gain = 0.37;
/** Legs in the given order with a drift of their number, and with the gain where seeking. */
const legs = (blocks: number, drift: (k: number) => number): TrialLeg[] =>
  trialOrder(blocks).map((arm, k) => ({ arm, mean: drift(k) + (arm === 'seeking' ? gain : 0) }));

describe('paired difference', () => {
  it('is free of a drift in a straight line, exactly, in every block', () => {
    const found = pairedDifference(legs(4, (k) => 5 + 3 * k));
    for (const block of found.blocks) expect(block).toBeCloseTo(gain, 12);
    expect(found.mean).toBeCloseTo(gain, 12);
  });

  // k²: in ABBA the inner two less the outer two make −2c per block; BAAB has the other sign (closed form).
  it('is off by ∓2c per block under a bent drift, which cancels over two', () => {
    const found = pairedDifference(legs(4, (k) => 0.1 * k * k));
    expect(found.blocks[0]).toBeCloseTo(gain - 0.2, 12);
    expect(found.blocks[1]).toBeCloseTo(gain + 0.2, 12);
    expect(found.mean).toBeCloseTo(gain, 12);
  });

  it('beats comparing the two halves of a drifting trial', () => {
    const found = pairedDifference(legs(6, (k) => Math.sin(k / 20)));
    expect(Math.abs(found.mean - gain)).toBeLessThan(0.001);
    expect(found.low).toBeLessThan(gain);
    expect(found.high).toBeGreaterThan(gain);
  });

  // Samples of a first-order autoregression (φ = 0.9, 20 samples a leg) on a drift; 1500 trials, binomial
  // scatter 0.6 %.
  it.each([6, 12, 30])(
    'of %d blocks holds the truth as often as it says, with correlated samples on a drift',
    (blocks) => {
      const share = coverage(1500, (noise) => {
        const samples = noise.autoregressive(blocks * 80, 0.9);
        const drifting = trialOrder(blocks).map((arm, k) => ({
          arm,
          mean: 0.2 * k + samples.slice(k * 20, k * 20 + 20).reduce((a, b) => a + b) / 20,
        }));
        return pairedDifference(drifting);
      });
      expect(share).toBeGreaterThan(0.925);
      expect(share).toBeLessThan(0.985);
    },
    60_000,
  );

  it('leaves an unfinished block out and refuses another order', () => {
    const list = legs(3, () => 0);
    expect(pairedDifference(list.slice(0, 11))).toMatchObject({ unusedLegs: 3 });
    expect(() => pairedDifference(list.slice(1))).toThrow(/legs\[0\]: must begin a block/);
    expect(() => pairedDifference(list.slice(0, 7))).toThrow(/more data/);
  });
});
