import { findUnit } from './unit-table.js';
import { powerOf, productOf, pureUnit, type Unit } from './unit.js';

const raised = '⁰¹²³⁴⁵⁶⁷⁸⁹⁻';
const plainOf = '0123456789-';
const wordPattern = /^([\p{L}%‰°Ωµ'"$€#_]+)(?:\^?(-?\d+(?:\.\d+)?))?$/u;

/**
 * The unit that a text of the trade stands for: units of the International System with prefixes, those used
 * beside it (bar, h, L, rpm …), `%`, `ppm`, `°C`; joined by `·`, `*`, a space or `/`, raised by `²`, `^2` or a
 * digit behind; a bracket after `/` takes several: `J/(kg·K)`. Without it `J/kg·K` is read from left to right.
 *
 * What the table does not know (`counts`, `pH`, `Nm³`) is a quantity of its own, alike only to itself.
 *
 * @param text empty or `1` for a pure number
 * @example
 * unitText(parseUnit('m^3 / h')) // 'm³/h'
 */
export function parseUnit(text: string): Unit {
  const written = text
    .normalize('NFC')
    .replace(/μ/g, 'µ')
    .replace(/\u2126/g, 'Ω')
    .trim();
  if (written === '') return pureUnit;
  const plain = written
    .replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+/g, (power) => `^${[...power].map((c) => plainOf[raised.indexOf(c)]).join('')}`)
    .replace(/[−]/g, '-')
    .replace(/\s*([*·⋅×/()])\s*/g, '$1')
    .replace(/[*⋅×\s]+/g, '·');
  return productOfParts(plain) ?? ownUnit(written);
}

/** A quantity of its own. */
function ownUnit(name: string): Unit {
  const powers = new Map([[name, 1]]);
  return { factors: powers, dimension: powers, scale: 1, hasOwnZero: false };
}

/** @returns null where the text is no product of units */
function productOfParts(text: string): Unit | null {
  const parts = text.match(/[·/]|\([^()]*\)|[^·/()]+/g) ?? [];
  if (parts.join('') !== text) return null;
  let unit: Unit | null = null;
  let sign: 1 | -1 = 1;
  let isAfterUnit = false;
  for (const part of parts) {
    if (part === '·' || part === '/') {
      if (!isAfterUnit) return null;
      sign = part === '/' ? -1 : 1;
      isAfterUnit = false;
      continue;
    }
    const next: Unit | null = part.startsWith('(') ? productOfParts(part.slice(1, -1)) : unitOfWord(part);
    if (!next || isAfterUnit) return null;
    unit = unit || sign === -1 ? productOf(unit ?? pureUnit, next, sign) : next;
    isAfterUnit = true;
  }
  return isAfterUnit ? unit : null;
}

function unitOfWord(word: string): Unit | null {
  if (word === '1') return pureUnit;
  const match = wordPattern.exec(word);
  const name = match?.[1];
  if (name === undefined) return null;
  const power = Number(match?.[2] ?? 1);
  // Norm cubic metres, not the third power of a torque.
  if (name === 'Nm' && Math.abs(power) === 3) return powerOf(ownUnit('Nm³'), power / 3);
  const entry = findUnit(name);
  if (!entry) return powerOf(ownUnit(name), power);
  const { scale, dimension, hasOwnZero } = entry;
  const unit = {
    factors: new Map([[name, 1]]),
    dimension: new Map(Object.entries(dimension)),
    scale,
    hasOwnZero,
  };
  return powerOf(unit, power);
}
