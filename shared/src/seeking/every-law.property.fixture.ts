import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkRecovery, checkWildCase, wildCases, type LawTally } from './every-law.fixture.js';
import { checkMirror, checkNewtonScale, mirrorCases, scaleCases } from './law-symmetry.fixture.js';

/** The invariants of every law, with so many cases each. */
export function describeEveryLaw(numRuns: number): void {
  describe('every law', () => {
    it('asks for nothing outside its box, and no NaN enters its state, whatever it is told', () => {
      const tally: LawTally = { steps: 0, atEdge: 0, retreats: 0, moved: 0 };
      fc.assert(
        fc.property(wildCases, (wild) => checkWildCase(wild, tally)),
        { numRuns },
      );
      // The laws were really put to the test.
      expect(tally.steps).toBeGreaterThan(20 * numRuns);
      expect(tally.atEdge).toBeGreaterThan(numRuns);
      expect(tally.retreats).toBeGreaterThan(numRuns);
      expect(tally.moved).toBeGreaterThan(0.1 * numRuns);
    }, 600_000);

    it('is at work again after anything', () => {
      fc.assert(fc.property(wildCases, checkRecovery), { numRuns });
    }, 600_000);

    it('climbs as it descends', () => {
      let moved = 0;
      fc.assert(
        fc.property(mirrorCases, (mirror) => {
          if (checkMirror(mirror)) moved += 1;
        }),
        { numRuns },
      );
      expect(moved).toBeGreaterThan(0.2 * numRuns);
    }, 600_000);

    it('if it is Newton’s, goes the same way whatever the objective is scaled by', () => {
      fc.assert(fc.property(scaleCases, checkNewtonScale), { numRuns });
    }, 600_000);
  });
}
