/** Powers of base quantities or of written units; entries of power 0 are left out. */
export type Powers = ReadonlyMap<string, number>;

/** The unit of a number. */
export interface Unit {
  /** Written units and their powers, for messages. */
  readonly factors: Powers;
  /** Powers of the base quantities `m kg s A K mol cd`; what is unknown is a quantity of its own. */
  readonly dimension: Powers;
  /**
   * Size of one in base units; null where a plain number has been multiplied with, which may have converted
   * it: `mV / 1000` may be added to V.
   */
  readonly scale: number | null;
  /** Counted from a zero of its own (°C): two such give a difference in K, and products lose the zero. */
  readonly hasOwnZero: boolean;
}

/** Two sizes of units that differ by rounding only. */
const scaleTolerance = 1e-9;

export const pureUnit: Unit = { factors: new Map(), dimension: new Map(), scale: 1, hasOwnZero: false };

export function productOfPowers(a: Powers, b: Powers, sign: 1 | -1): Powers {
  const sum = new Map(a);
  for (const [name, power] of b) {
    const total = (sum.get(name) ?? 0) + sign * power;
    if (Math.abs(total) < 1e-12) sum.delete(name);
    else sum.set(name, total);
  }
  return sum;
}

/** @param sign 1 for the product, −1 for the quotient */
export function productOf(a: Unit, b: Unit, sign: 1 | -1): Unit {
  const isKnown = a.scale !== null && b.scale !== null;
  return {
    factors: productOfPowers(a.factors, b.factors, sign),
    dimension: productOfPowers(a.dimension, b.dimension, sign),
    scale: isKnown ? a.scale * b.scale ** sign : null,
    hasOwnZero: false,
  };
}

export function powerOf(unit: Unit, exponent: number): Unit {
  if (exponent === 1) return unit;
  const raised = (powers: Powers): Powers =>
    new Map(exponent === 0 ? [] : [...powers].map(([name, power]) => [name, power * exponent]));
  return {
    factors: raised(unit.factors),
    dimension: raised(unit.dimension),
    scale: unit.scale === null ? null : unit.scale ** exponent,
    hasOwnZero: false,
  };
}

export function isPure(unit: Unit): boolean {
  return unit.dimension.size === 0 && (unit.scale === null || isSameScale(unit.scale, 1));
}

export function hasSameDimension(a: Unit, b: Unit): boolean {
  return (
    a.dimension.size === b.dimension.size &&
    [...a.dimension].every(([name, power]) => Math.abs((b.dimension.get(name) ?? 0) - power) < 1e-9)
  );
}

/** @returns true where numbers in these units can be added or compared as they stand */
export function isSameUnit(a: Unit, b: Unit): boolean {
  return hasSameDimension(a, b) && (a.scale === null || b.scale === null || isSameScale(a.scale, b.scale));
}

function isSameScale(a: number, b: number): boolean {
  return Math.abs(a - b) <= scaleTolerance * Math.max(Math.abs(a), Math.abs(b));
}

/**
 * How a unit is written.
 *
 * @returns e.g. `m³/h`; empty for a pure number
 */
export function unitText(unit: Unit): string {
  const part = (sign: 1 | -1) =>
    [...unit.factors]
      .filter(([, power]) => power * sign > 0)
      .map(([name, power]) => `${name}${superscript(power * sign)}`);
  const [above, below] = [part(1), part(-1)];
  if (below.length === 0) return above.join('·');
  const divisor = below.length === 1 ? below.join('') : `(${below.join('·')})`;
  return `${above.length === 0 ? '1' : above.join('·')}/${divisor}`;
}

const raisedDigits = '⁰¹²³⁴⁵⁶⁷⁸⁹';

function superscript(power: number): string {
  if (power === 1) return '';
  if (!Number.isInteger(power)) return `^${Number(power.toPrecision(4))}`;
  return [...String(power)].map((digit) => raisedDigits[Number(digit)] ?? digit).join('');
}
