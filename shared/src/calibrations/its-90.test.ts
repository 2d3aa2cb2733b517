import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { emfOf, rangeOf, temperatureOf } from './its-90.js';
import { thermocoupleTypes } from './thermocouples.js';

describe('reference functions of thermocouples', () => {
  // Type K: NIST ITS-90 Thermocouple Database, to the digits printed there.
  it.each([
    [-200, -5.8914],
    [-100, -3.5536],
    [25, 1.0002],
    [100, 4.0962],
    [200, 8.1385],
    [300, 12.2086],
    [500, 20.6443],
    [1000, 41.2756],
    [1372, 54.8864],
  ])('type K gives at %f °C %f mV', (celsius, emfMv) => {
    expect(emfOf('K', celsius)).toBeCloseTo(emfMv, 4);
  });

  // NIST Monograph 175 tables, three digits, from memory.
  it.each([
    ['J', 100, 5.269],
    ['J', 1000, 57.953],
    ['T', -200, -5.603],
    ['T', 100, 4.279],
    ['E', 100, 6.319],
    ['E', 1000, 76.373],
    ['N', 100, 2.774],
    ['N', 1000, 36.256],
    ['R', 1000, 10.506],
    ['S', 1000, 9.587],
    ['B', 1000, 4.834],
    ['B', 1800, 13.591],
  ] as const)('type %s gives at %f °C %f mV', (type, celsius, emfMv) => {
    expect(emfOf(type, celsius)).toBeCloseTo(emfMv, 3);
  });

  it('has no value outside its range', () => {
    expect(emfOf('K', 1373)).toBeNaN();
    expect(emfOf('K', NaN)).toBeNaN();
    expect(temperatureOf('K', 60)).toBeNaN();
    expect(temperatureOf('K', -7)).toBeNaN();
    expect(temperatureOf('K', NaN)).toBeNaN();
  });

  it('inverts the reference function itself, with no error of an inverse polynomial', () => {
    // 4.096 mV is 100 °C in the table of whole degrees; the slope there is 0.0414 mV/°C.
    expect(temperatureOf('K', 4.096)).toBeCloseTo(99.995, 2);
  });

  it.each([...thermocoupleTypes])('type %s comes back from every temperature of its range', (type) => {
    const { from, to } = rangeOf(type);
    fc.assert(
      fc.property(fc.double({ min: from, max: to, noNaN: true }), (celsius) => {
        const back = temperatureOf(type, emfOf(type, celsius));
        // Near −270 °C the functions are almost flat; where pieces join they miss each other by microvolts.
        const tolerance = celsius < -250 ? 0.5 : 0.02;
        expect(Math.abs(back - celsius)).toBeLessThan(tolerance);
      }),
    );
  });

  it.each([...thermocoupleTypes])('type %s rises with the voltage all through its range', (type) => {
    const { from, to } = rangeOf(type);
    const low = emfOf(type, from);
    const high = emfOf(type, to);
    let before = -Infinity;
    for (let share = 0; share <= 1; share += 1 / 2000) {
      const t = temperatureOf(type, low + share * (high - low));
      if (Number.isNaN(t) && share > 0.999) continue;
      expect(t).toBeGreaterThanOrEqual(before);
      before = t;
    }
  });
});
