import type { NumericField, NumericParameter } from '../numeric-parameter.schema.js';

/** A value of parameters with every expression in it replaced by a number. */
export type Evaluated<T> = T extends readonly (infer E)[]
  ? Evaluated<E>[]
  : T extends object
    ? IsExpression<T> extends true
      ? number
      : { [K in keyof T]: Evaluated<T[K]> }
    : T;

type IsExpression<T> = T extends { expression: string }
  ? keyof T extends 'expression'
    ? true
    : false
  : false;

/** All numbers and expressions within a value of parameters, each with its place. */
export function numericLeaves(value: unknown, field: string): NumericField[] {
  if (typeof value === 'number' || isExpression(value)) return [{ field, parameter: value }];
  return entriesOf(value).flatMap(([key, inner]) => numericLeaves(inner, placeOf(value, field, key)));
}

/** Turns each expression within a value of parameters into something else, e.g. its number. */
export function replaceExpressions<T>(
  value: T,
  field: string,
  replace: (parameter: { expression: string }, field: string) => number,
): Evaluated<T> {
  return replaced(value, field, replace) as Evaluated<T>;
}

function replaced(
  value: unknown,
  field: string,
  replace: (parameter: { expression: string }, field: string) => number,
): unknown {
  if (isExpression(value)) return replace(value, field);
  if (typeof value !== 'object' || value === null) return value;
  if (Array.isArray(value)) {
    return value.map((inner: unknown, i) => replaced(inner, `${field}[${i}]`, replace));
  }
  return Object.fromEntries(
    Object.entries(value).map(([key, inner]) => [key, replaced(inner, `${field}.${key}`, replace)]),
  );
}

function isExpression(value: unknown): value is Exclude<NumericParameter, number> {
  return (
    typeof value === 'object' && value !== null && 'expression' in value && Object.keys(value).length === 1
  );
}

function entriesOf(value: unknown): [string, unknown][] {
  return typeof value === 'object' && value !== null ? Object.entries(value) : [];
}

function placeOf(parent: unknown, field: string, key: string): string {
  return Array.isArray(parent) ? `${field}[${key}]` : `${field}.${key}`;
}
