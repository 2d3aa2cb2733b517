import type { FunctionNode, MathNode, OperatorNode } from 'mathjs';

/** The parts of the parser's nodes that its types leave out, or narrow to names that it knows. */
export const contentOf = (node: MathNode): MathNode => (node as MathNode & { content: MathNode }).content;

export const relationNames = (node: MathNode): readonly string[] =>
  (node as MathNode & { conditionals: string[] }).conditionals;

export const operatorOf = (node: OperatorNode): { op: string; fn: string; args: MathNode[] } => node;

export const functionNameOf = (node: FunctionNode): string => dottedName(node.fn) ?? '';

/** The whole dotted name of a symbol, e.g. `survey.best.airTrim`; null where it is no plain name. */
export function dottedName(node: MathNode): string | null {
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
