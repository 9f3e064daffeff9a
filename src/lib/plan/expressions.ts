import type { Expression as EsExpression, Node as EsNode } from 'estree';

import { report, textOf, checkLiteral, checkName, checkMember } from './check-names.ts';
import type { CheckContext } from './check-names.ts';
import { combine, KNOWN_SIGNS, SIGN_CURES } from './check-operators.ts';
import { FUNCTIONS } from './functions.ts';
import { describeKind, isNumericKind, isSameKind } from './kinds.ts';
import { suggestName } from './suggest.ts';
import { childrenOf, isFactorSign } from './syntax-tree.ts';
import type { Expression, Formula, Place } from './types.ts';

/** Limits of one expression. */
const MAX_EXPRESSION_NODES = 4000;
const MAX_EXPRESSION_DEPTH = 64;

/** Constructs of JavaScript that the plan language has no use for: what to call them, and what to do instead. */
const REFUSED: ReadonlyMap<string, readonly [what: string, hint: string]> = new Map<
  string,
  readonly [string, string]
>([
  ['ArrowFunctionExpression', ['A function', 'Write the value itself, or give it a name with <Let>.']],
  ['FunctionExpression', ['A function', 'Write the value itself, or give it a name with <Let>.']],
  ['ClassExpression', ['A class', 'Write the value itself, or give it a name with <Let>.']],
  [
    'AssignmentExpression',
    ['An assignment', 'Compare with ===, or declare the value with <Let name="…" value={…} />.'],
  ],
  ['UpdateExpression', ['Counting up or down', 'Write a + 1 or a - 1.']],
  ['NewExpression', ['“new”', 'Leave it out.']],
  ['TemplateLiteral', ['A text in backquotes', 'Write the text in double quotes.']],
  ['TaggedTemplateExpression', ['A text in backquotes', 'Write the text in double quotes.']],
  ['ObjectExpression', ['Braces inside an expression', 'Write a list in square brackets: [a, b].']],
  ['SequenceExpression', ['A comma between two values', 'Write a list in square brackets: [a, b].']],
  ['SpreadElement', ['“...”', 'Write the values one by one.']],
  ['ThisExpression', ['“this”', 'Use the name of a size, choice, value, material or part.']],
  ['Super', ['“super”', 'Leave it out.']],
  ['AwaitExpression', ['“await”', 'Leave it out.']],
  ['YieldExpression', ['“yield”', 'Leave it out.']],
  ['ImportExpression', ['“import”', 'A plan has everything it needs in its own file.']],
  ['MetaProperty', ['“import.meta”', 'A plan has everything it needs in its own file.']],
  ['ChainExpression', ['“?.”', 'Write a plain point: ply.thickness.']],
  ['JSXElement', ['A component inside an expression', 'Write when={…} on the component instead.']],
  ['JSXFragment', ['A component inside an expression', 'Write when={…} on the component instead.']],
]);

/** Counts nodes and depth with a stack of its own; a row of terms (a + b + c …) is one level deep, as an author sees it. */
function isWithinLimits(root: EsExpression, context: CheckContext): boolean {
  const stack: [EsNode, number][] = [[root, 1]];
  let nodes = 0;
  for (let top = stack.pop(); top !== undefined; top = stack.pop()) {
    const [node, depth] = top;
    nodes += 1;
    if (nodes > MAX_EXPRESSION_NODES || depth > MAX_EXPRESSION_DEPTH) {
      report(context, root, {
        rule: 'expression-too-large',
        message:
          depth > MAX_EXPRESSION_DEPTH
            ? `The expression is nested more than ${MAX_EXPRESSION_DEPTH} deep.`
            : `The expression has more than ${MAX_EXPRESSION_NODES} parts.`,
        hint: 'Give its pieces names with <Let>.',
      });
      return false;
    }
    const isRow = node.type === 'BinaryExpression' || node.type === 'LogicalExpression';
    childrenOf(node).forEach((child, index) => stack.push([child, isRow && index === 0 ? depth : depth + 1]));
  }
  return true;
}

function checkBinary(node: EsExpression, context: CheckContext): Expression | null {
  // A row of terms leans to the left as deep as it is long, so it is walked and not recursed into.
  const row: (EsExpression & { type: 'BinaryExpression' | 'LogicalExpression' })[] = [];
  let leftmost: EsNode = node;
  while (leftmost.type === 'BinaryExpression' || leftmost.type === 'LogicalExpression') {
    row.push(leftmost);
    leftmost = leftmost.left;
  }
  row.reverse();
  let left = checkNode(leftmost, context, isFactorSign(row[0]?.operator ?? ''));
  for (const each of row) {
    const right = checkNode(each.right, context, isFactorSign(each.operator));
    if (!KNOWN_SIGNS.has(each.operator)) {
      left = report(context, each, {
        rule: 'not-in-the-language',
        message: `The operator ${each.operator} has no place in a plan.`,
        hint: SIGN_CURES.get(each.operator) ?? 'Use + - * / %, comparisons, && and ||.',
      });
    } else {
      left = left && right ? combine(each, each.operator, left, right, context) : null;
    }
  }
  return left;
}

function checkUnary(
  node: EsExpression & { type: 'UnaryExpression' },
  context: CheckContext,
): Expression | null {
  const sign = node.operator;
  if (sign !== '-' && sign !== '+' && sign !== '!') {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: `“${sign}” has no place in a plan.`,
      hint: 'Use + - * / %, comparisons, && and ||.',
    });
  }
  const of = checkNode(node.argument, context);
  if (of === null) return null;
  const isFit = sign === '!' ? of.kind === 'yesno' : isNumericKind(of.kind);
  if (!isFit) {
    return report(context, node, {
      rule: 'kinds-differ',
      message: `${sign} before ${describeKind(of.kind)} has no meaning.`,
      found: describeKind(of.kind),
      wanted: sign === '!' ? 'yes or no' : 'a number or a measure',
    });
  }
  if (of.op === 'value' && typeof of.value === 'number' && sign !== '!') {
    return { op: 'value', kind: of.kind, value: sign === '-' ? -of.value : of.value };
  }
  return { op: 'unary', kind: of.kind, sign, of };
}

function checkCondition(
  node: EsExpression & { type: 'ConditionalExpression' },
  context: CheckContext,
): Expression | null {
  const test = checkNode(node.test, context);
  const then = checkNode(node.consequent, context);
  const otherwise = checkNode(node.alternate, context);
  if (test && test.kind !== 'yesno') {
    report(context, node.test, {
      rule: 'wrong-kind',
      message: `Before ? stands ${describeKind(test.kind)}, and yes or no is wanted.`,
      found: describeKind(test.kind),
      wanted: 'yes or no',
      hint: 'Write a comparison: width > 900*mm ? a : b.',
    });
    return null;
  }
  if (!test || !then || !otherwise) return null;
  if (!isSameKind(then.kind, otherwise.kind)) {
    return report(context, node, {
      rule: 'kinds-differ',
      message: `The two branches are ${describeKind(then.kind)} and ${describeKind(otherwise.kind)}.`,
      found: `${describeKind(then.kind)} and ${describeKind(otherwise.kind)}`,
      wanted: 'one kind in both branches',
      hint: 'Bring both branches to one kind.',
    });
  }
  return { op: 'if', kind: then.kind, test, then, otherwise };
}

function checkCall(
  node: EsExpression & { type: 'CallExpression' },
  context: CheckContext,
): Expression | null {
  const name = node.callee.type === 'Identifier' ? node.callee.name : undefined;
  const called = name === undefined ? undefined : FUNCTIONS.get(name);
  if (name === undefined || called === undefined) {
    const near = name === undefined ? undefined : suggestName(name, FUNCTIONS.keys());
    return report(context, node.callee, {
      rule: 'unknown-function',
      message: `There is no function “${textOf(context, node.callee)}”.`,
      found: textOf(context, node.callee),
      wanted: [...FUNCTIONS.keys()].join(', '),
      hint: near
        ? `Did you mean ${FUNCTIONS.get(near)?.usage}?`
        : `The functions are ${[...FUNCTIONS.keys()].join(', ')}.`,
    });
  }
  const args = node.arguments.map((argument) => checkNode(argument, context));
  if (args.length < called.least || args.length > called.most) {
    return report(context, node, {
      rule: 'wrong-number-of-values',
      message: `${name} takes ${called.least === called.most ? called.least : `${called.least} to ${called.most}`} ${called.most === 1 ? 'value' : 'values'}, not ${args.length}.`,
      hint: `Write ${called.usage}.`,
    });
  }
  const known = args.filter((arg) => arg !== null);
  if (known.length < args.length) return null;
  const kinds = known.map((arg) => arg.kind);
  const kind = called.kindOf(kinds);
  if (typeof kind === 'object' && 'wanted' in kind) {
    return report(context, node, {
      rule: 'wrong-kind',
      message: `${name} was given ${kinds.map(describeKind).join(', ')}, and ${kind.wanted} is wanted.`,
      found: kinds.map(describeKind).join(', '),
      wanted: kind.wanted,
      hint: `Write ${called.usage}.`,
    });
  }
  return { op: 'call', kind, name, args: known };
}

function checkList(
  node: EsExpression & { type: 'ArrayExpression' },
  context: CheckContext,
): Expression | null {
  const items: (Expression | null)[] = node.elements.map((element) =>
    element === null
      ? report(context, node, {
          rule: 'empty-place',
          message: 'A place in the list is empty.',
          hint: 'Write [a, b, c].',
        })
      : checkNode(element, context),
  );
  const known = items.filter((item) => item !== null);
  if (known.length < items.length) return null;
  const first = known[0]?.kind ?? 'any';
  const isAlike = known.every((item) => isSameKind(item.kind, first));
  return { op: 'list', kind: { list: isAlike ? first : 'any' }, items: known };
}

function checkNode(node: EsNode, context: CheckContext, isFactor = false): Expression | null {
  switch (node.type) {
    case 'Literal':
      return checkLiteral(node, context);
    case 'Identifier':
      return checkName(node, context, isFactor);
    case 'MemberExpression':
      return checkMember(node, context);
    case 'BinaryExpression':
    case 'LogicalExpression':
      return checkBinary(node, context);
    case 'UnaryExpression':
      return checkUnary(node, context);
    case 'ConditionalExpression':
      return checkCondition(node, context);
    case 'CallExpression':
      return checkCall(node, context);
    case 'ArrayExpression':
      return checkList(node, context);
    default: {
      const [what, hint] = REFUSED.get(node.type) ?? [
        'This',
        'Use numbers, names, operators and the functions of the language.',
      ];
      return report(context, node, {
        rule: 'not-in-the-language',
        message: `${what} has no place in a plan.`,
        hint,
      });
    }
  }
}

/**
 * Checks one parsed expression: only what the language has, every name declared, every kind decided through each operator,
 * function, member and branch. Problems go to the context; null means that there were some (here or in what it names).
 */
export function checkExpression(root: EsExpression, context: CheckContext): Expression | null {
  return isWithinLimits(root, context) ? checkNode(root, context) : null;
}

/** An expression with its place and text. */
export function makeFormula(expression: Expression, at: Place, text: string): Formula {
  return { at, text: text.replace(/\s+/g, ' ').trim(), expression };
}
