import type {
  ConditionalNode,
  ConstantNode,
  FunctionNode,
  MathNode,
  OperatorNode,
  RelationalNode,
} from 'mathjs';
import type { TraceAxis } from '../rigs/rig.schema.js';
import { parseUnit } from '../units/parse-unit.js';
import { isPure, isSameUnit, powerOf, productOf, pureUnit, type Unit } from '../units/unit.js';
import { ExpressionFault } from './expression-fault.js';
import { functionByName } from './expression-functions.js';
import { contentOf, dottedName, functionNameOf, operatorOf, relationNames } from './parsed-nodes.js';
import { traceFunctionByName } from './trace-functions.js';
import { termOfTraceCall } from './unit-of-trace-call.js';
import {
  alike,
  comparing,
  differenceOf,
  fitting,
  type Joining,
  measured,
  type Measured,
  named,
  plain,
  type Plain,
  type Term,
  truthValue,
  unlike,
} from './unit-term.js';

/** The unit of a symbol, null where it fits any, or `plain` for a constant such as `pi`. */
export type SymbolUnit = (name: string) => Unit | null | 'plain';

/**
 * The unit of an expression's result, by these rules:
 * - Sums, differences, comparisons, choices, `min max clamp` need terms in one unit; a plain number takes the
 *   unit of what it stands beside (`co - 100`).
 * - A product has the product of the units. A plain factor may be a conversion, so that afterwards only the
 *   quantity is judged and no longer its size: `mV / 1000` may be added to V, `ppm / 50` to %, bar never.
 * - `weight(…)` takes the unit that its place needs.
 * - The difference of two temperatures in °C is in K, and K may be added to °C.
 * - `exp log log10 sin cos tan` need a pure number or radians; `sqrt` halves the powers; an exponent is a pure
 *   number, and a plain one over anything that has a unit.
 * - Functions over traces give the unit of the values, of the axis, or a product of both; their numbers are in those.
 *
 * @param node of an expression that compiles
 * @param axes of the symbols that are traces
 * @returns null where the result fits any unit: plain numbers only, or a weight
 * @throws ExpressionFault naming both units
 */
export function unitOfExpression(
  node: MathNode,
  unitOf: SymbolUnit,
  axes: TraceAxes = new Map(),
): Unit | null {
  const term = termOf(node, unitOf, axes);
  return term.kind === 'measured' ? term.unit : null;
}

type TraceAxes = ReadonlyMap<string, TraceAxis>;

function termOf(node: MathNode, unitOf: SymbolUnit, axes: TraceAxes): Term {
  const at = (part: MathNode) => termOf(part, unitOf, axes);
  switch (node.type) {
    case 'ParenthesisNode':
      return at(contentOf(node));
    case 'ConstantNode': {
      const value: unknown = (node as ConstantNode).value;
      return typeof value === 'number' ? plain(value) : truthValue;
    }
    case 'OperatorNode':
      return termOfOperator(node as OperatorNode, at);
    case 'RelationalNode': {
      const terms = (node as RelationalNode).params.map(at);
      relationNames(node).forEach((_, i) => alike(terms[i] ?? fitting, terms[i + 1] ?? fitting, comparing));
      return truthValue;
    }
    case 'ConditionalNode': {
      const { condition, trueExpr, falseExpr } = node as ConditionalNode;
      at(condition);
      return alike(at(trueExpr), at(falseExpr), choosing);
    }
    case 'FunctionNode':
      return termOfCall(node as FunctionNode, at, axes);
    default: {
      const unit = unitOf(dottedName(node) ?? '');
      return unit === 'plain' ? plain() : unit === null ? fitting : measured(unit);
    }
  }
}

const choosing: Joining = { verb: 'chosen in place of', culprit: '?' };

function termOfOperator(node: OperatorNode, at: (part: MathNode) => Term): Term {
  const { op, fn, args } = operatorOf(node);
  const [a = fitting, b] = args.map(at);
  if (!b) return fn === 'not' ? truthValue : negated(a, fn);
  switch (fn) {
    case 'add':
      return sum(a, b, { verb: 'added to', culprit: op });
    case 'subtract':
      return difference(a, b, { verb: 'subtracted from', culprit: op });
    case 'multiply':
      return product(a, b, 1);
    case 'divide':
      return product(a, b, -1);
    case 'pow':
      return power(a, b, op);
    case 'and':
    case 'or':
      return truthValue;
    default:
      alike(a, b, { ...comparing, culprit: op });
      return truthValue;
  }
}

function negated(a: Term, fn: string): Term {
  return a.kind === 'plain' && a.value !== null && fn === 'unaryMinus' ? plain(-a.value) : a;
}

/** Temperatures: K may be added to °C. */
function sum(a: Term, b: Term, joining: Joining): Term {
  if (a.kind !== 'measured' || b.kind !== 'measured') return alike(a, b, joining);
  if (!isSameUnit(a.unit, b.unit)) throw unlike(a.unit, b.unit, joining.verb, joining.culprit);
  const isFirst = a.unit.hasOwnZero || (!b.unit.hasOwnZero && a.unit.scale !== null);
  return isFirst ? a : b;
}

/** Temperatures: °C less °C is K, °C less K is °C. */
function difference(a: Term, b: Term, joining: Joining): Term {
  if (a.kind !== 'measured' || b.kind !== 'measured') return alike(a, b, joining);
  if (!isSameUnit(a.unit, b.unit)) throw unlike(a.unit, b.unit, joining.verb, joining.culprit);
  if (!b.unit.hasOwnZero) return a.unit.scale === null ? b : a;
  if (!a.unit.hasOwnZero) throw unlike(a.unit, b.unit, joining.verb, joining.culprit);
  return measured(differenceOf(a.unit));
}

function product(a: Term, b: Term, sign: 1 | -1): Term {
  if (a.kind === 'fitting' || b.kind === 'fitting') return fitting;
  if (a.kind === 'plain' && b.kind === 'plain') return plain(valueOf(a, b, sign));
  const unit = productOf(unitOfFactor(a), unitOfFactor(b), sign);
  // A plain factor leaves a temperature on its scale: the mean of two is (a + b) / 2.
  const hasOwnZero = a.kind === 'measured' && a.unit.hasOwnZero && b.kind === 'plain';
  return measured({ ...unit, hasOwnZero });
}

const unitOfFactor = (term: Plain | Measured): Unit =>
  term.kind === 'measured' ? term.unit : { ...pureUnit, scale: null };

function valueOf(a: Plain, b: Plain, sign: 1 | -1): number | null {
  if (a.value === null || b.value === null) return null;
  return sign === 1 ? a.value * b.value : a.value / b.value;
}

function power(base: Term, exponent: Term, culprit: string): Term {
  needPure(exponent, 'An exponent', culprit);
  if (base.kind === 'fitting') return fitting;
  if (base.kind === 'plain') return exponent.kind === 'plain' ? plain() : measured(pureUnit);
  if (exponent.kind === 'plain' && exponent.value !== null)
    return measured(powerOf(base.unit, exponent.value));
  if (isPure(base.unit)) return measured(pureUnit);
  throw new ExpressionFault(
    `${named(base.unit)} can be raised to a plain number only: write it out, as in x ^ 2.`,
    culprit,
  );
}

function needPure(term: Term, what: string, culprit: string): void {
  if (term.kind !== 'measured' || isPure(term.unit)) return;
  throw new ExpressionFault(
    `${what} must be a pure number, not ${named(term.unit)}: divide by a reference, / weight(…).`,
    culprit,
  );
}

function termOfCall(node: FunctionNode, at: (part: MathNode) => Term, axes: TraceAxes): Term {
  const name = functionNameOf(node);
  const terms = node.args.map(at);
  const ofTrace = traceFunctionByName.get(name);
  if (ofTrace) return termOfTraceCall(ofTrace, terms, parseUnit(axisOf(node.args[0], axes)?.unit ?? ''));
  const [first = fitting, second = fitting] = terms;
  switch (functionByName.get(name)?.unitRule) {
    case 'pure':
      needPure(first, `What "${name}" takes`, name);
      return first.kind === 'plain' ? plain() : measured(pureUnit);
    case 'square-root':
      return first.kind === 'measured'
        ? measured(powerOf(first.unit, 0.5))
        : first.kind === 'plain'
          ? plain()
          : first;
    case 'power':
      return power(first, second, name);
    case 'drops':
      return measured(pureUnit);
    case 'fits':
      if (first.kind !== 'measured') return fitting;
      throw new ExpressionFault(`"${name}" takes a plain number, not ${named(first.unit)}.`, name);
    default: {
      const joined = terms.reduce((a, b) => alike(a, b, { ...comparing, culprit: name }));
      return joined.kind === 'plain' ? plain() : joined;
    }
  }
}

function axisOf(node: MathNode | undefined, axes: TraceAxes): TraceAxis | undefined {
  if (node?.type === 'ParenthesisNode') return axisOf(contentOf(node), axes);
  return node && axes.get(dottedName(node) ?? '');
}
