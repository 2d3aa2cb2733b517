import { parseUnit } from '../units/parse-unit.js';
import { productOf, pureUnit, type Unit } from '../units/unit.js';
import type { TraceFunction, TraceQuantity } from './trace-functions.js';
import { alike, comparing, differenceOf, fitting, measured, type Term } from './unit-term.js';

const percent = parseUnit('%');

/**
 * The unit of what a function makes of a trace; its numbers must be in the units that they stand for.
 *
 * @param terms of its values: the traces first
 * @param axis unit of the axis
 * @throws ExpressionFault naming both units
 */
export function termOfTraceCall(known: TraceFunction, terms: readonly Term[], axis: Unit): Term {
  const joining = { ...comparing, culprit: known.name };
  const traces = terms.slice(0, known.traces);
  const of = traces.reduce((a, b) => alike(a, b, joining));
  const value = of.kind === 'measured' ? of.unit : null;
  const inUnit = (quantity: TraceQuantity): Term => {
    const unit = unitOfQuantity(quantity, value, axis);
    return unit ? measured(unit) : fitting;
  };
  known.numbers.forEach((quantity, i) => {
    const term = terms[known.traces + i];
    if (term) alike(inUnit(quantity), term, joining);
  });
  return inUnit(known.result);
}

/** @returns null where the unit of the values is not known and counts */
function unitOfQuantity(quantity: TraceQuantity, value: Unit | null, axis: Unit): Unit | null {
  switch (quantity) {
    case 'value':
      return value;
    case 'difference':
      return value && differenceOf(value);
    case 'pure':
      return pureUnit;
    case 'percent':
      return percent;
    case 'place':
      return axis;
    case 'distance':
      return differenceOf(axis);
    case 'frequency':
      return productOf(pureUnit, axis, -1);
    case 'area':
      return value && productOf(value, axis, 1);
    case 'power':
      return value && productOf(value, value, 1);
    case 'energy':
      return value && productOf(productOf(value, value, 1), axis, 1);
  }
}
