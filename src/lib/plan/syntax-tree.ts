import type { Expression as EsExpression, Node as EsNode, Program } from 'estree';

import { UNITS } from './functions.ts';

/** The range of source that a node covers; acorn leaves it on every node. */
export function rangeOf(node: EsNode): [number, number] {
  const { start, end } = node as unknown as { start?: number; end?: number };
  return typeof start === 'number' && typeof end === 'number' ? [start, end] : [0, 1];
}

/** The expression of a program of one expression statement, or null. */
export function expressionOf(program: Program | null | undefined): EsExpression | null {
  const statement = program?.body[0];
  if (program?.body.length !== 1 || statement?.type !== 'ExpressionStatement') return null;
  return statement.expression;
}

/** The nodes directly inside a node, for the constructs that the language has. */
export function childrenOf(node: EsNode): EsNode[] {
  switch (node.type) {
    case 'BinaryExpression':
    case 'LogicalExpression':
      return [node.left, node.right];
    case 'UnaryExpression':
      return [node.argument];
    case 'ConditionalExpression':
      return [node.test, node.consequent, node.alternate];
    case 'CallExpression':
      return [node.callee, ...node.arguments];
    case 'ArrayExpression':
      return node.elements.flatMap((element) => (element === null ? [] : [element]));
    case 'MemberExpression':
      return [node.object];
    default:
      return [];
  }
}

/** Beside * and / a unit's name always means the unit, even where a choice of texts has the same name (`foot`). */
export function isFactorSign(sign: string): boolean {
  return sign === '*' || sign === '/';
}

function isUnitNode(node: EsNode): boolean {
  return node.type === 'Identifier' && UNITS.has(node.name);
}

/**
 * Names that an expression mentions, found without recursion. Used before kinds are known, to put the derived values in order.
 */
export function namesIn(root: EsExpression): string[] {
  const names = new Set<string>();
  const stack: EsNode[] = [root];
  for (let node = stack.pop(); node !== undefined; node = stack.pop()) {
    if (node.type === 'Identifier') names.add(node.name);
    const isProduct = node.type === 'BinaryExpression' && isFactorSign(node.operator);
    stack.push(...childrenOf(node).filter((child) => !(isProduct && isUnitNode(child))));
  }
  return [...names];
}
