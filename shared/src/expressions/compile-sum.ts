import type { ConstantNode, MathNode, OperatorNode } from 'mathjs';
import { Operation } from './operations.js';
import { contentOf, operatorOf } from './parsed-nodes.js';
import type { ProgramBuilder, Term } from './program-builder.js';

/** From this many terms on a sum is quicker as one operation. */
const termsMin = 3;

/** Compiles any piece of the expression; gives the register of its value. */
export type CompilePiece = (node: MathNode) => number;

interface Summand {
  node: MathNode;
  sign: 1 | -1;
}

/** Compiles a chain of additions and subtractions, from left to right. */
export function compileSum(node: OperatorNode, builder: ProgramBuilder, compile: CompilePiece): number {
  const summands = summandsOf(node);
  if (summands.length < termsMin) {
    const [first, second] = summands.map((part) => compile(part.node));
    const operation = summands[1]?.sign === -1 ? Operation.subtract : Operation.add;
    return builder.emit(operation, first as number, second);
  }
  return builder.sum(summands.map((summand) => termOf(summand, builder, compile)));
}

/** The chain `a + b − c` is parsed as `(a + b) − c`. */
function summandsOf(node: MathNode): Summand[] {
  const { fn, args, isImplicit } = partsOf(node);
  const [left, right] = args;
  if (isImplicit || !left || !right || (fn !== 'add' && fn !== 'subtract')) return [{ node, sign: 1 }];
  return [...summandsOf(left), { node: right, sign: fn === 'add' ? 1 : -1 }];
}

/** A term such as `0.25 * x * y`; what is of another form is computed before and stands for x. */
function termOf({ node, sign }: Summand, builder: ProgramBuilder, compile: CompilePiece): Term {
  const compiled = new Map<MathNode, number>();
  const registers = factorsOf(node).map((factor) => {
    const register = compiled.get(factor) ?? compile(factor);
    compiled.set(factor, register);
    return register;
  });
  const at = registers.findIndex((register) => builder.constantOf(register) !== null);
  const constant = at === 0 || at === 1 ? builder.constantOf(registers[at] as number) : null;
  const others = constant === null ? registers : registers.filter((_, i) => i !== at);
  const [first, second, ...more] = multiplied(others, builder);
  const factor = sign * (constant ?? 1);
  if (first === undefined) return { factor, first: builder.constant(1), second: null };
  return { factor, first, second: more.length === 0 ? (second ?? null) : null };
}

/** At most two registers: three and more factors are multiplied from left to right before. */
function multiplied(registers: readonly number[], builder: ProgramBuilder): number[] {
  if (registers.length <= 2) return [...registers];
  return [registers.reduce((a, b) => builder.emit(Operation.multiply, a, b))];
}

/** A square is two factors. */
function factorsOf(node: MathNode): MathNode[] {
  const { fn, args, isImplicit } = partsOf(node);
  const [left, right] = args;
  if (isImplicit || !left || !right) return [node];
  if (fn === 'multiply') return [...factorsOf(left), ...squareOf(right)];
  return squareOf(node);
}

function squareOf(node: MathNode): MathNode[] {
  const { fn, args } = partsOf(node);
  const [base, exponent] = args;
  const isSquare =
    fn === 'pow' && exponent?.type === 'ConstantNode' && (exponent as ConstantNode).value === 2;
  return isSquare && base ? [base, base] : [node];
}

function partsOf(node: MathNode): { fn: string; args: readonly MathNode[]; isImplicit: boolean } {
  if (node.type === 'ParenthesisNode') return { fn: '', args: [contentOf(node)], isImplicit: false };
  if (node.type !== 'OperatorNode') return { fn: '', args: [], isImplicit: false };
  const { fn, args } = operatorOf(node as OperatorNode);
  return { fn, args, isImplicit: (node as OperatorNode).implicit };
}
