import { describe, expect, it } from 'vitest';
import { seededRandom } from '../kit/seeded-random.js';
import { brokenCloud, ramps, rampTests, rampTestS } from './irradiance.js';

describe('the ramps of EN 50530', () => {
  it.each([
    // Totals of annex B (from memory): 04:25:39 and 01:56:27.
    ['low-to-medium', 15_939],
    ['medium-to-high', 6987],
  ] as const)('%s last as long as their table says', (test, totalS) => {
    expect(Math.round(rampTestS(rampTests[test]))).toBe(totalS);
  });

  it('rise and fall with the slope of the row between their levels', () => {
    const light = ramps(rampTests['medium-to-high']);
    expect(light(100)).toBe(300);
    // The first row: 10 W/m² per s from 300 s on, 70 s up, 10 s there, 70 s down.
    expect(light(310)).toBeCloseTo(400, 9);
    expect(light(375)).toBeCloseTo(1000, 9);
    expect(light(390)).toBeCloseTo(900, 9);
    expect(light(455)).toBeCloseTo(300, 9);
    expect(light(7000)).toBe(300);
  });
});

describe('broken cloud', () => {
  const course = (seed: number) => {
    const light = brokenCloud(seededRandom(seed));
    return Array.from({ length: 6000 }, (_, i) => light(i / 10));
  };

  it('is the same for the same seed and another for another', () => {
    expect(course(4)).toEqual(course(4));
    expect(course(4)).not.toEqual(course(5));
  });

  it.each([1, 2, 3])('goes from clear to covered again and again, with seed %i', (seed) => {
    const light = course(seed);
    expect(Math.min(...light)).toBeGreaterThanOrEqual(120);
    expect(Math.max(...light)).toBeLessThanOrEqual(1050);
    const falls = light.filter((here, i) => here < 600 && (light[i - 1] ?? 0) >= 600).length;
    expect(falls).toBeGreaterThan(8);
    const steepest = Math.max(...light.map((here, i) => Math.abs(here - (light[i - 1] ?? here)) * 10));
    expect(steepest).toBeGreaterThan(150);
  });
});
