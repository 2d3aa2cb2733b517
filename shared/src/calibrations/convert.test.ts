import { describe, expect, it } from 'vitest';
import { type Conversion, conversionSchema } from './calibration.schema.js';
import { compileConversion } from './convert.js';

const convert = (conversion: Conversion, raw: number, coldJunctionC = NaN) =>
  compileConversion(conversionSchema.parse(conversion))(raw, coldJunctionC);

describe('conversions', () => {
  it('follows a straight line', () => {
    expect(convert({ kind: 'linear', gain: 2, offset: 1 }, 3)).toBe(7);
  });

  it('follows a polynomial inside the range of its fit, and has no value outside', () => {
    const square: Conversion = { kind: 'polynomial', coefficients: [1, 0, 2], from: -1, to: 3 };
    expect(convert(square, 3)).toBe(19);
    expect(convert(square, 3.001)).toBeNaN();
    expect(convert(square, NaN)).toBeNaN();
  });

  it('draws straight lines between the points of a table, and has no value outside', () => {
    const points = [
      { raw: 0, value: 10 },
      { raw: 1, value: 20 },
      { raw: 4, value: -10 },
    ];
    const expected = [10, 15, 20, 10, -10];
    [0, 0.5, 1, 2, 4].forEach((raw, index) => {
      expect(convert({ kind: 'table', points }, raw)).toBeCloseTo(expected[index] ?? NaN, 12);
    });
    expect(convert({ kind: 'table', points }, -0.001)).toBeNaN();
    expect(convert({ kind: 'table', points }, 4.001)).toBeNaN();
  });

  it('adds the cold junction to a thermocouple', () => {
    const celsius = { celsius: 25 };
    const typeK: Conversion = { kind: 'thermocouple', type: 'K', coldJunction: celsius };
    // NIST ITS-90: 500 °C is 20.6443 mV and 25 °C is 1.0002 mV against 0 °C.
    expect(convert(typeK, 20.6443 - 1.0002, 25)).toBeCloseTo(500, 2);
    expect(convert(typeK, 19.6, NaN)).toBeNaN();
  });

  it('reads a platinum sensor', () => {
    expect(convert({ kind: 'platinum', r0Ohm: 1000 }, 1385.055)).toBeCloseTo(100, 3);
  });

  it.each([
    [{ kind: 'linear', gain: 0, offset: 1 }, 'gain'],
    [{ kind: 'polynomial', coefficients: [1], from: 0, to: 1 }, 'coefficients'],
    [{ kind: 'polynomial', coefficients: [1, 2], from: 1, to: 1 }, 'from'],
    [{ kind: 'table', points: [{ raw: 1, value: 1 }] }, 'points'],
    [
      {
        kind: 'table',
        points: [
          { raw: 1, value: 1 },
          { raw: 1, value: 2 },
        ],
      },
      'points.1.raw',
    ],
    [{ kind: 'thermocouple', type: 'X', coldJunction: { celsius: 0 } }, 'type'],
    [{ kind: 'platinum', r0Ohm: -100 }, 'r0Ohm'],
  ])('refuses %j at %s', (conversion, field) => {
    const outcome = conversionSchema.safeParse(conversion);
    expect(outcome.error?.issues.map((issue) => issue.path.join('.'))).toEqual([field]);
  });
});
