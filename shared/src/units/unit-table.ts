/** What one written unit is: size of one in base units, and powers of the base quantities. */
export interface UnitEntry {
  readonly scale: number;
  readonly dimension: Readonly<Record<string, number>>;
  /** Whether k, m, µ … may stand before it. */
  readonly hasPrefixes: boolean;
  /** A scale whose zero is not that of its base unit: values may be compared on it only. */
  readonly hasOwnZero: boolean;
}

const length = { m: 1 };
const mass = { kg: 1 };
const time = { s: 1 };
const current = { A: 1 };
const temperature = { K: 1 };
const volume = { m: 3 };
const frequency = { s: -1 };
const force = { kg: 1, m: 1, s: -2 };
const pressure = { kg: 1, m: -1, s: -2 };
const energy = { kg: 1, m: 2, s: -2 };
const power = { kg: 1, m: 2, s: -3 };
const voltage = { kg: 1, m: 2, s: -3, A: -1 };
const pure = {};

type Row = [names: string, scale: number, dimension: Readonly<Record<string, number>>];

/** International System of Units, 9th edition (2019), tables 2 to 5 and 8; an angle is a pure number there. */
const prefixed: readonly Row[] = [
  ['m', 1, length],
  ['g', 1e-3, mass],
  ['s', 1, time],
  ['A', 1, current],
  ['K', 1, temperature],
  ['mol', 1, { mol: 1 }],
  ['cd', 1, { cd: 1 }],
  ['rad sr', 1, pure],
  ['Hz', 1, frequency],
  ['N', 1, force],
  ['Pa', 1, pressure],
  ['J', 1, energy],
  ['W', 1, power],
  ['C', 1, { A: 1, s: 1 }],
  ['V', 1, voltage],
  ['F', 1, { kg: -1, m: -2, s: 4, A: 2 }],
  ['Ω ohm Ohm', 1, { kg: 1, m: 2, s: -3, A: -2 }],
  ['S', 1, { kg: -1, m: -2, s: 3, A: 2 }],
  ['Wb', 1, { kg: 1, m: 2, s: -2, A: -1 }],
  ['T', 1, { kg: 1, s: -2, A: -1 }],
  ['H', 1, { kg: 1, m: 2, s: -2, A: -2 }],
  ['lm', 1, { cd: 1 }],
  ['lx', 1, { cd: 1, m: -2 }],
  ['L l', 1e-3, volume],
  ['bar', 1e5, pressure],
  ['eV', 1.602176634e-19, energy],
  ['Nm', 1, energy],
  ['Wh', 3600, energy],
  ['Ah', 3600, { A: 1, s: 1 }],
  ['VA', 1, power],
];

/** Percent and parts per million are pure numbers of another size; the rest from NIST SP 811 (2008), appendix B. */
const plain: readonly Row[] = [
  ['min', 60, time],
  ['h', 3600, time],
  ['d', 86_400, time],
  ['t', 1000, mass],
  ['%', 1e-2, pure],
  ['‰', 1e-3, pure],
  ['ppm', 1e-6, pure],
  ['ppb', 1e-9, pure],
  ['° deg', Math.PI / 180, pure],
  ['rev', 2 * Math.PI, pure],
  ['rpm', (2 * Math.PI) / 60, frequency],
  ['in inch', 0.0254, length],
  ['ft', 0.3048, length],
  ['lb', 0.45359237, mass],
  ['psi', 6894.757293168361, pressure],
  ['atm', 101_325, pressure],
  ['mmHg', 133.322387415, pressure],
];

/** Temperatures with a zero of their own. */
const scales: readonly Row[] = [
  ['°C degC', 1, temperature],
  ['°F degF', 5 / 9, temperature],
];

const entriesOf = (rows: readonly Row[], hasPrefixes: boolean, hasOwnZero: boolean) =>
  rows.flatMap(([names, scale, dimension]) =>
    names
      .split(' ')
      .map((name): [string, UnitEntry] => [name, { scale, dimension, hasPrefixes, hasOwnZero }]),
  );

const entries: ReadonlyMap<string, UnitEntry> = new Map([
  ...entriesOf(prefixed, true, false),
  ...entriesOf(plain, false, false),
  ...entriesOf(scales, false, true),
]);

const prefixes: ReadonlyMap<string, number> = new Map([
  ['p', 1e-12],
  ['n', 1e-9],
  ['µ', 1e-6],
  ['u', 1e-6],
  ['m', 1e-3],
  ['c', 1e-2],
  ['d', 1e-1],
  ['h', 1e2],
  ['k', 1e3],
  ['M', 1e6],
  ['G', 1e9],
  ['T', 1e12],
]);

/** Written like a prefix and a unit, and meant otherwise: acidity is no picohenry. */
const neverPrefixed: ReadonlySet<string> = new Set(['pH']);

/** Every name of the table, without prefixes. */
export const unitNames: readonly string[] = [...entries.keys()];

/** @returns what a written unit is, with its prefix; null where the table does not know it */
export function findUnit(name: string): UnitEntry | null {
  const whole = entries.get(name);
  if (whole) return whole;
  const factor = prefixes.get(name.charAt(0));
  const entry = entries.get(name.slice(1));
  if (factor === undefined || !entry?.hasPrefixes || neverPrefixed.has(name)) return null;
  return { ...entry, scale: factor * entry.scale };
}
