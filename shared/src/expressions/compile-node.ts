import type {
  ConditionalNode,
  ConstantNode,
  FunctionNode,
  MathNode,
  OperatorNode,
  RelationalNode,
} from 'mathjs';
import { ExpressionFault } from './expression-fault.js';
import { expressionFunctions, functionByName } from './expression-functions.js';
import { Operation } from './operations.js';
import { compileSum } from './compile-sum.js';
import { compileTraceCall, type TraceSlots } from './compile-trace-call.js';
import { contentOf, dottedName, functionNameOf, operatorOf, relationNames } from './parsed-nodes.js';
import type { ProgramBuilder } from './program-builder.js';
import { traceFunctionByName, traceFunctions } from './trace-functions.js';

/** Where the value of a piece stands when the program has come past it. */
export interface CompiledNode {
  readonly register: number;
  /** Its result is a truth value: 1 or 0 (or NaN). */
  readonly isCondition: boolean;
}

export interface NodeCompiler {
  readonly builder: ProgramBuilder;
  /** Gives the register of a symbol; throws an ExpressionFault for one that is not known. */
  readonly symbolRegister: (name: string) => number;
  readonly traces: TraceSlots;
}

const arithmetic: Record<string, Operation> = {
  multiply: Operation.multiply,
  divide: Operation.divide,
  pow: Operation.pow,
};

const comparisons: Record<string, Operation> = {
  smaller: Operation.smaller,
  smallerEq: Operation.smallerEq,
  larger: Operation.larger,
  largerEq: Operation.largerEq,
  equal: Operation.equal,
  unequal: Operation.unequal,
};

const logic: Record<string, Operation> = { and: Operation.and, or: Operation.or };

/**
 * Turns a parsed expression into instructions.
 *
 * @throws ExpressionFault for anything that the language does not have
 */
export function compileNode(node: MathNode, compiler: NodeCompiler): CompiledNode {
  switch (node.type) {
    case 'ParenthesisNode':
      return compileNode(contentOf(node), compiler);
    case 'ConstantNode':
      return compileConstant(node as ConstantNode, compiler);
    case 'SymbolNode':
    case 'AccessorNode':
      return compileSymbol(node, compiler);
    case 'OperatorNode':
      return compileOperator(node as OperatorNode, compiler);
    case 'RelationalNode':
      return compileRelation(node as RelationalNode, compiler);
    case 'ConditionalNode':
      return compileConditional(node as ConditionalNode, compiler);
    case 'FunctionNode':
      return compileCall(node as FunctionNode, compiler);
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

function compileConstant(node: ConstantNode, { builder }: NodeCompiler): CompiledNode {
  const value: unknown = node.value;
  if (typeof value === 'boolean') return { register: builder.constant(value ? 1 : 0), isCondition: true };
  if (typeof value === 'number' && Number.isFinite(value)) {
    return { register: builder.constant(value), isCondition: false };
  }
  if (value === undefined) throw new ExpressionFault('Write an expression.');
  const text = node.toString();
  throw new ExpressionFault(`"${text}" is no number that can be used here.`, text);
}

function compileSymbol(node: MathNode, { symbolRegister }: NodeCompiler): CompiledNode {
  const name = dottedName(node);
  if (name === null) throw new ExpressionFault('Values cannot be picked from others here: use plain names.');
  return { register: symbolRegister(name), isCondition: false };
}

function compileOperator(node: OperatorNode, compiler: NodeCompiler): CompiledNode {
  const { op, fn, args } = operatorOf(node);
  if (node.implicit)
    throw new ExpressionFault('An operator is missing between two values: write "*" to multiply.');
  const { builder } = compiler;
  if (args.length === 2 && (fn === 'add' || fn === 'subtract')) {
    const compile = (part: MathNode) => compileNode(part, compiler).register;
    return { register: compileSum(node, builder, compile), isCondition: false };
  }
  const [a, b] = args.map((argument) => compileNode(argument, compiler));
  if (a && !b) {
    if (fn === 'unaryPlus') return { register: a.register, isCondition: false };
    if (fn === 'unaryMinus')
      return { register: builder.emit(Operation.negate, a.register), isCondition: false };
    if (fn === 'not') return { register: builder.emit(Operation.not, a.register), isCondition: true };
  }
  const operation = arithmetic[fn] ?? comparisons[fn] ?? logic[fn];
  if (operation === undefined || !a || !b) {
    throw new ExpressionFault(`The operator "${op}" cannot be used here.`, op);
  }
  return {
    register: builder.emit(operation, a.register, b.register),
    isCondition: fn in comparisons || fn in logic,
  };
}

/** A chain such as `2 < x <= 4`: every neighbouring pair must hold. */
function compileRelation(node: RelationalNode, compiler: NodeCompiler): CompiledNode {
  const { builder } = compiler;
  const values = node.params.map((part) => compileNode(part, compiler).register);
  const pairs = relationNames(node).map((name, i) => {
    const [operation, a, b] = [comparisons[name], values[i], values[i + 1]];
    if (operation === undefined || a === undefined || b === undefined) {
      throw new ExpressionFault('This comparison cannot be used here.');
    }
    return builder.emit(operation, a, b);
  });
  const register = pairs.reduce((left, right) => builder.emit(Operation.and, left, right));
  return { register, isCondition: true };
}

function compileConditional(node: ConditionalNode, compiler: NodeCompiler): CompiledNode {
  const condition = compileNode(node.condition, compiler);
  let isCondition = true;
  const side = (part: MathNode) => () => {
    const compiled = compileNode(part, compiler);
    isCondition &&= compiled.isCondition;
    return compiled.register;
  };
  const register = compiler.builder.choose(condition.register, side(node.trueExpr), side(node.falseExpr));
  return { register, isCondition };
}

function compileCall(node: FunctionNode, compiler: NodeCompiler): CompiledNode {
  const name = functionNameOf(node);
  const { builder, traces } = compiler;
  const compile = (part: MathNode) => compileNode(part, compiler).register;
  const ofTrace = traceFunctionByName.get(name);
  if (ofTrace) {
    return { register: compileTraceCall(node, ofTrace, traces, builder, compile), isCondition: false };
  }
  const known = functionByName.get(name);
  if (!known) {
    const names = [...expressionFunctions, ...traceFunctions].map((candidate) => candidate.name).join(', ');
    throw new ExpressionFault(`There is no function "${name}": use one of ${names}.`, name);
  }
  const { operation, minArguments, maxArguments, signature } = known;
  if (node.args.length < minArguments || node.args.length > maxArguments) {
    throw new ExpressionFault(
      `"${name}" is called with the wrong number of values: write ${signature}.`,
      name,
    );
  }
  const values = node.args.map(compile);
  return {
    register: name === 'clamp' ? clamp(builder, values) : call(builder, operation, values),
    isCondition: false,
  };
}

function call(builder: ProgramBuilder, operation: Operation, values: readonly number[]): number {
  const [first, ...others] = values as [number, ...number[]];
  if (others.length === 0) return builder.emit(operation, first);
  return others.reduce((front, value) => builder.emit(operation, front, value), first);
}

function clamp(builder: ProgramBuilder, values: readonly number[]): number {
  const [value, low, high] = values as [number, number, number];
  const lowerEnd = builder.emit(Operation.lowerEnd, low, high);
  return builder.emit(Operation.min, builder.emit(Operation.max, value, lowerEnd), high);
}
