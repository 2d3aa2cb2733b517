import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { StayWithin } from './stay-within.js';

describe('staying within a band', () => {
  it.each([0.001, 0.0034, 0.005, 0.0071, 0.02, 0.5, 1, 3])('is noticed at %d s a scan', (dtS) => {
    const watch = new StayWithin(1);
    let elapsedS = 0;
    while (!watch.hasStayed(0.1, dtS / 2)) {
      watch.add(7, dtS);
      elapsedS += dtS;
      expect(elapsedS).toBeLessThan(1 + dtS);
    }
    expect(elapsedS).toBeGreaterThanOrEqual(1 - dtS / 2 - 1e-9);
    expect(watch.mean).toBeCloseTo(7, 9);
  });

  it('never says so while the last values are further apart than the band', () => {
    const values = fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1, maxLength: 600 });
    fc.assert(
      fc.property(
        values,
        fc.integer({ min: 1, max: 400 }),
        fc.double({ min: 0.1, max: 1, noNaN: true }),
        (all, n, band) => {
          const watch = new StayWithin(n);
          all.forEach((value, i) => {
            watch.add(value, 1);
            if (!watch.hasStayed(band, 0)) return;
            const last = all.slice(Math.max(0, i + 1 - n), i + 1);
            expect(last.length).toBe(n);
            expect(Math.max(...last) - Math.min(...last)).toBeLessThanOrEqual(band);
          });
        },
      ),
    );
  });

  it('says so at most one bucket after the last value that was outside', () => {
    const watch = new StayWithin(400);
    watch.add(100, 1);
    let scans = 0;
    while (!watch.hasStayed(0.5, 0)) {
      watch.add(0, 1);
      scans += 1;
    }
    expect(scans).toBeGreaterThanOrEqual(400);
    expect(scans).toBeLessThanOrEqual(402);
  });
});
