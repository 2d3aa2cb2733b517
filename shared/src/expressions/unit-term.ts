import { hasSameDimension, isSameUnit, pureUnit, unitText, type Unit } from '../units/unit.js';
import { ExpressionFault } from './expression-fault.js';

/** A plain number of the text, with its value where that is a matter of arithmetic. */
export interface Plain {
  readonly kind: 'plain';
  readonly value: number | null;
}
/** A number that takes any unit: `weight(…)`, or a symbol whose unit is not known. */
export interface Fitting {
  readonly kind: 'fitting';
}
export interface Measured {
  readonly kind: 'measured';
  readonly unit: Unit;
}
export type Term = Plain | Fitting | Measured;

export const fitting: Fitting = { kind: 'fitting' };
export const plain = (value: number | null = null): Plain => ({ kind: 'plain', value });
export const measured = (unit: Unit): Measured => ({ kind: 'measured', unit });
export const truthValue = measured(pureUnit);

export interface Joining {
  readonly verb: string;
  readonly culprit: string | null;
}
export const comparing: Joining = { verb: 'compared with', culprit: null };

/** @returns the one unit of both; the first where both are known */
export function alike(a: Term, b: Term, { verb, culprit }: Joining): Term {
  if (a.kind === 'plain' && b.kind === 'plain') return plain();
  if (a.kind !== 'measured') return b.kind === 'plain' ? a : b;
  if (b.kind !== 'measured') return a;
  if (!isSameUnit(a.unit, b.unit)) throw unlike(a.unit, b.unit, verb, culprit);
  if (a.unit.hasOwnZero !== b.unit.hasOwnZero && a.unit.scale !== null && b.unit.scale !== null) {
    throw unlike(a.unit, b.unit, verb, culprit);
  }
  return a.unit.scale === null ? b : a;
}

export function unlike(a: Unit, b: Unit, verb: string, culprit: string | null): ExpressionFault {
  const hint = hasSameDimension(a, b)
    ? 'convert one of them first'
    : 'give the factor between them a unit with weight(…)';
  return new ExpressionFault(`${named(b)} cannot be ${verb} ${named(a)}: ${hint}.`, culprit);
}

export function named(unit: Unit): string {
  return unitText(unit) || 'a pure number';
}

/** The unit of a difference: K for temperatures on a scale with a zero of its own. */
export function differenceOf(unit: Unit): Unit {
  if (!unit.hasOwnZero) return unit;
  const step = unit.scale === 1 ? 'K' : 'Δ°F';
  return { ...unit, hasOwnZero: false, factors: new Map([[step, 1]]) };
}
