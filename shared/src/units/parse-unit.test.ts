import fc from 'fast-check';
import { create, unitDependencies, createUnitDependencies, type Unit as ReferenceUnit } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { parseUnit } from './parse-unit.js';
import { findUnit, unitNames } from './unit-table.js';
import { hasSameDimension, isPure, isSameUnit, unitText } from './unit.js';

const size = (text: string) => parseUnit(text).scale;

describe('a unit', () => {
  it.each([
    ['1/s', 'Hz'],
    ['m³/h', 'm^3/h'],
    ['m3/h', 'm³ / h'],
    ['N·m', 'Nm'],
    ['N m', 'J'],
    ['J/(kg·K)', 'J/kg/K'],
    ['kJ/s', 'kW'],
    ['µA', 'uA'],
    ['μA', 'µA'],
    ['Ohm', 'V/A'],
    ['kWh', 'kW·h'],
    ['mbar', 'hPa'],
    ['W/m²', 'W·m⁻²'],
    ['rev/min', 'rpm'],
    ['counts', 'counts'],
    ['Nm³/h', 'Nm3/h'],
  ])('%s is %s', (a, b) => expect(isSameUnit(parseUnit(a), parseUnit(b))).toBe(true));

  it.each([
    ['°C', 'ppm'],
    ['%', 'ppm'],
    ['%', ''],
    ['mV', 'V'],
    ['°', 'rad'],
    ['pH', 'H'],
    ['Nm³/h', 'm³/h'],
    ['counts', 'ticks'],
    ['counts', ''],
    ['bar', 'bar/s'],
  ])('%s is not %s', (a, b) => expect(isSameUnit(parseUnit(a), parseUnit(b))).toBe(false));

  // Factors of NIST SP 811 (2008), appendix B.8.
  it.each([
    ['m³/h', 2.777778e-4],
    ['L/min', 1.666667e-5],
    ['mmHg', 133.3224],
    ['psi', 6894.757],
    ['ft', 0.3048],
    ['kWh', 3.6e6],
    ['rpm', 0.1047198],
    ['atm', 101_325],
  ])('one %s is %d in base units', (text, expected) => {
    expect(Math.abs((size(text) ?? NaN) / expected - 1)).toBeLessThan(1e-6);
  });

  it.each([
    ['m^3 / h', 'm³/h'],
    ['J/kg/K', 'J/(kg·K)'],
    ['s-1', '1/s'],
    ['', ''],
  ])('%s is written %s', (text, written) => expect(unitText(parseUnit(text))).toBe(written));

  it('is a quantity of its own where it cannot be read', () => {
    for (const text of ['m//s', '(m', '/', 'm·', '3', 'a b c 7']) {
      const unit = parseUnit(text);
      expect(unitText(unit)).toBe(text);
      expect(isSameUnit(unit, parseUnit(text))).toBe(true);
      expect(isPure(unit)).toBe(false);
    }
  });

  it('reads back what it writes', () => {
    // The third power of Nm is the norm cubic metre.
    const known = unitNames.filter((name) => name !== 'Nm');
    const atom = fc.tuple(fc.constantFrom(...known, 'counts', 'mV', 'kPa'), fc.integer({ min: -3, max: 3 }));
    fc.assert(
      fc.property(fc.array(atom, { maxLength: 4 }), (atoms) => {
        const text = atoms.map(([name, power]) => `${name}^${power}`).join('·');
        const unit = parseUnit(text);
        expect(isSameUnit(unit, parseUnit(unitText(unit)))).toBe(true);
      }),
      { numRuns: 1000 },
    );
  });

  it('is read from any text without a throw', () => {
    fc.assert(
      fc.property(fc.string({ maxLength: 16, unit: 'grapheme' }), (text) => void parseUnit(text)),
      {
        numRuns: 1000,
      },
    );
  });
});

describe('the table of units', () => {
  const { Unit } = create({ ...unitDependencies, ...createUnitDependencies }) as unknown as {
    Unit: { new (value: number, name: string): ReferenceUnit; isValuelessUnit(name: string): boolean };
  };
  const bases = ['kg', 'm', 's', 'A', 'K', 'cd', 'mol'];
  // Means something else there, or an angle, which is a quantity of its own there.
  const others = new Set(['rad', 'sr', '°', 'deg', 'rev', 'rpm', 'lm', 'lx', 'VA']);
  const nameThere: Record<string, string> = { Ω: 'ohm', '°C': 'degC', '°F': 'degF' };
  const comparable = unitNames.filter(
    (name) => !others.has(name) && Unit.isValuelessUnit(nameThere[name] ?? name),
  );

  it('is compared with the table of mathjs where both know a unit', () =>
    expect(comparable.length).toBeGreaterThan(35));

  it.each(comparable)('%s has the size and dimension that mathjs gives it', (name) => {
    const [component] = (new Unit(1, nameThere[name] ?? name) as unknown as { units: Component[] }).units;
    const entry = findUnit(name);
    const dimension = Object.fromEntries(
      bases
        .map((base, i) => [base, component?.unit.dimensions[order[i] as number] ?? 0] as const)
        .filter(([, p]) => p !== 0),
    );
    expect(entry?.dimension).toEqual(dimension);
    const theirs = (component?.unit.value ?? NaN) * (component?.prefix.value ?? NaN);
    expect(Math.abs((entry?.scale ?? NaN) / theirs - 1)).toBeLessThan(1e-5);
  });
  interface Component {
    prefix: { value: number };
    unit: { value: number; dimensions: number[] };
  }
  // Order of the dimensions there: mass, length, time, current, temperature, luminous intensity, amount.
  const order = [0, 1, 2, 3, 4, 5, 6];

  it('knows two spellings of one unit as one', () => {
    expect(hasSameDimension(parseUnit('Ohm'), parseUnit('Ω'))).toBe(true);
  });
});
