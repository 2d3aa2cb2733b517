import type {
  ConditionalNode,
  ConstantNode,
  FunctionNode,
  MathNode,
  OperatorNode,
  RelationalNode,
} from 'mathjs';
import { expressionConstants, expressionFunctions } from './expression-functions.js';

/** A piece of an expression as a closure over the slots of its symbols. */
export interface CompiledNode {
  readonly run: () => number;
  /** Its result is a truth value: 1 or 0 (or NaN). */
  readonly isCondition: boolean;
}

/** Gives the reader of a symbol's slot; throws an ExpressionFault for a symbol that is not known. */
export type SymbolReader = (name: string) => () => number;

/** What is wrong with an expression. */
export class ExpressionFault extends Error {
  constructor(
    message: string,
    /** Text at fault, to find its place; null where unknown. */
    readonly culprit: string | null = null,
  ) {
    super(message);
  }
}

type Binary = (a: number, b: number) => number;

/** Division by zero and overflow are no numbers: a result that is not finite must not be compared. */
const finite = (value: number) => (Number.isFinite(value) ? value : NaN);
const truth = (is: boolean) => (is ? 1 : 0);
const isNotANumber = (a: number, b: number) => Number.isNaN(a) || Number.isNaN(b);
const judged =
  (judge: (a: number, b: number) => boolean): Binary =>
  (a, b) =>
    isNotANumber(a, b) ? NaN : truth(judge(a, b));

const arithmetic: Record<string, Binary> = {
  add: (a, b) => finite(a + b),
  subtract: (a, b) => finite(a - b),
  multiply: (a, b) => finite(a * b),
  divide: (a, b) => finite(a / b),
  // Math.pow(NaN, 0) is 1 and would hide a bad input.
  pow: (a, b) => (isNotANumber(a, b) ? NaN : finite(Math.pow(a, b))),
};

const comparisons: Record<string, Binary> = {
  smaller: judged((a, b) => a < b),
  smallerEq: judged((a, b) => a <= b),
  larger: judged((a, b) => a > b),
  largerEq: judged((a, b) => a >= b),
  equal: judged((a, b) => a === b),
  unequal: judged((a, b) => a !== b),
};

const logic: Record<string, Binary> = {
  and: judged((a, b) => a !== 0 && b !== 0),
  or: judged((a, b) => a !== 0 || b !== 0),
};

const unary: Record<string, (a: number) => number> = {
  unaryMinus: (a) => -a,
  unaryPlus: (a) => a,
  not: (a) => (Number.isNaN(a) ? NaN : truth(a === 0)),
};

const functionByName = new Map(expressionFunctions.map((known) => [known.name, known]));

/**
 * Turns a parsed expression into closures.
 *
 * @throws ExpressionFault for anything that the language does not have
 */
export function compileNode(node: MathNode, readSymbol: SymbolReader): CompiledNode {
  switch (node.type) {
    case 'ParenthesisNode':
      return compileNode((node as MathNode & { content: MathNode }).content, readSymbol);
    case 'ConstantNode':
      return compileConstant(node as ConstantNode);
    case 'SymbolNode':
    case 'AccessorNode':
      return compileSymbol(node, readSymbol);
    case 'OperatorNode':
      return compileOperator(node as OperatorNode, readSymbol);
    case 'RelationalNode':
      return compileRelation(node as RelationalNode, readSymbol);
    case 'ConditionalNode':
      return compileConditional(node as ConditionalNode, readSymbol);
    case 'FunctionNode':
      return compileCall(node as FunctionNode, readSymbol);
    default:
      throw new ExpressionFault(
        refusals[node.type] ?? 'Only arithmetic, comparisons and functions can be used.',
      );
  }
}

const refusals: Record<string, string> = {
  AssignmentNode: 'Nothing can be assigned here: write "==" to compare.',
  FunctionAssignmentNode: 'Functions cannot be defined here: write "==" to compare.',
  BlockNode: 'Write one expression, without ";" and line breaks.',
  ArrayNode: 'Lists cannot be used here.',
  RangeNode: 'Ranges cannot be used here: write "a ? b : c" for a choice.',
  ObjectNode: 'Objects cannot be used here.',
};

function compileConstant(node: ConstantNode): CompiledNode {
  const value: unknown = node.value;
  if (typeof value === 'boolean') return { run: () => truth(value), isCondition: true };
  if (typeof value === 'number' && Number.isFinite(value)) return { run: () => value, isCondition: false };
  if (value === undefined) throw new ExpressionFault('Write an expression.');
  const text = node.toString();
  throw new ExpressionFault(`"${text}" is no number that can be used here.`, text);
}

/** The whole dotted name of a symbol, e.g. `survey.best.airTrim`; null where it is no plain name. */
function dottedName(node: MathNode): string | null {
  if (node.type === 'SymbolNode') return (node as MathNode & { name: string }).name;
  if (node.type !== 'AccessorNode') return null;
  const { object, index } = node as MathNode & {
    object: MathNode;
    index: { dotNotation: boolean; dimensions: { value?: unknown }[] };
  };
  const front = dottedName(object);
  const last = index.dimensions[0]?.value;
  return index.dotNotation && front !== null && typeof last === 'string' ? `${front}.${last}` : null;
}

function compileSymbol(node: MathNode, readSymbol: SymbolReader): CompiledNode {
  const name = dottedName(node);
  if (name === null) throw new ExpressionFault('Values cannot be picked from others here: use plain names.');
  return { run: readSymbol(name), isCondition: false };
}

function compileOperator(node: OperatorNode, readSymbol: SymbolReader): CompiledNode {
  // The library's types narrow names to those it knows; what is parsed may be any.
  const { op, fn, args }: { op: string; fn: string; args: MathNode[] } = node;
  if (node.implicit)
    throw new ExpressionFault('An operator is missing between two values: write "*" to multiply.');
  const [a, b] = args.map((argument) => compileNode(argument, readSymbol));
  const one = unary[fn];
  if (one && a && !b) return { run: () => one(a.run()), isCondition: fn === 'not' };
  const two = arithmetic[fn] ?? comparisons[fn] ?? logic[fn];
  if (!two || !a || !b) throw new ExpressionFault(`The operator "${op}" cannot be used here.`, op);
  return { run: () => two(a.run(), b.run()), isCondition: fn in comparisons || fn in logic };
}

/** A chain such as `2 < o2 <= 4`: every neighbouring pair must hold. */
function compileRelation(node: RelationalNode, readSymbol: SymbolReader): CompiledNode {
  const values = node.params.map((part) => compileNode(part, readSymbol));
  const pairs = (node as unknown as { conditionals: string[] }).conditionals.map((name, i): CompiledNode => {
    const [compare, a, b] = [comparisons[name], values[i], values[i + 1]];
    if (!compare || !a || !b) throw new ExpressionFault('This comparison cannot be used here.');
    return { run: () => compare(a.run(), b.run()), isCondition: true };
  });
  const and = logic['and'] as Binary;
  return pairs.reduce((left, right) => ({ run: () => and(left.run(), right.run()), isCondition: true }));
}

function compileConditional(node: ConditionalNode, readSymbol: SymbolReader): CompiledNode {
  const condition = compileNode(node.condition, readSymbol);
  const yes = compileNode(node.trueExpr, readSymbol);
  const no = compileNode(node.falseExpr, readSymbol);
  const run = () => {
    const is = condition.run();
    if (Number.isNaN(is)) return NaN;
    return is !== 0 ? yes.run() : no.run();
  };
  return { run, isCondition: yes.isCondition && no.isCondition };
}

function compileCall(node: FunctionNode, readSymbol: SymbolReader): CompiledNode {
  const name = dottedName(node.fn) ?? '';
  const known = functionByName.get(name);
  if (!known) {
    const names = expressionFunctions.map((candidate) => candidate.name).join(', ');
    throw new ExpressionFault(`There is no function "${name}": use one of ${names}.`, name);
  }
  const { apply, minArguments, maxArguments, signature } = known;
  if (node.args.length < minArguments || node.args.length > maxArguments) {
    throw new ExpressionFault(
      `"${name}" is called with the wrong number of values: write ${signature}.`,
      name,
    );
  }
  const runs = node.args.map((argument) => compileNode(argument, readSymbol).run);
  return { run: callOf(apply, runs), isCondition: false };
}

/** One closure per number of arguments: spreading an array would allocate in each scan. */
function callOf(apply: (...values: number[]) => number, runs: (() => number)[]): () => number {
  const [a, b, c, ...rest] = runs as [() => number, ...(() => number)[]];
  if (!b) return () => finite(apply(a()));
  if (!c) return () => finite(apply(a(), b()));
  if (rest.length === 0) return () => finite(apply(a(), b(), c()));
  // Only min and max take more, and both can be built up in pairs.
  const front = callOf(apply, runs.slice(0, -1));
  const last = runs.at(-1) ?? a;
  return () => finite(apply(front(), last()));
}

export function constantReader(name: string): (() => number) | null {
  const value = expressionConstants.get(name);
  return value === undefined ? null : () => value;
}
