import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { platinumResistance, platinumTemperature } from './platinum-resistance.js';

describe('platinum resistance', () => {
  // IEC 60751:2008, table 1.
  it.each([
    [-200, 18.5201],
    [-100, 60.2558],
    [-50, 80.3063],
    [0, 100],
    [25, 109.7347],
    [100, 138.5055],
    [200, 175.856],
    [400, 247.092],
    [850, 390.4811],
  ])('is at %f °C %f ohm, and back', (celsius, ohm) => {
    expect(platinumResistance(celsius, 100)).toBeCloseTo(ohm, 4);
    expect(platinumTemperature(ohm, 100)).toBeCloseTo(celsius, 3);
  });

  it('reads 108.5 ohm as 21.8189 °C', () => {
    expect(platinumTemperature(108.5, 100)).toBeCloseTo(21.8189, 4);
  });

  it('comes back from every temperature of the range, for any resistance at 0 °C', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -200, max: 850, noNaN: true }),
        fc.constantFrom(100, 500, 1000),
        (celsius, r0Ohm) => {
          const back = platinumTemperature(platinumResistance(celsius, r0Ohm), r0Ohm);
          expect(Math.abs(back - celsius)).toBeLessThan(1e-6);
        },
      ),
    );
  });

  it('has no value outside the range: a broken wire is no temperature', () => {
    expect(platinumTemperature(500, 100)).toBeNaN();
    expect(platinumTemperature(0, 100)).toBeNaN();
    expect(platinumTemperature(NaN, 100)).toBeNaN();
    expect(platinumResistance(851, 100)).toBeNaN();
  });
});
