import fc from 'fast-check';
import { expect, it } from 'vitest';
import { fuzzCases, live } from './engine-fuzz.fixture.js';
import { type LawCounts, WriteLaws } from './engine-laws.fixture.js';

it('writes nothing outside the envelope, whatever people, wires and experiments do', () => {
  const counts: LawCounts = { scans: 0, writes: 0, trips: 0, jumps: 0 };
  fc.assert(
    fc.property(fuzzCases, (fuzzCase) => {
      const laws = new WriteLaws(fuzzCase, counts);
      live(fuzzCase, (scan) => laws.check(scan));
    }),
    { numRuns: 150 },
  );
  /** The laws were really put to the test. */
  expect(counts.writes).toBeGreaterThan(2000);
  expect(counts.trips).toBeGreaterThan(30);
  expect(counts.jumps).toBeGreaterThan(5);
});
