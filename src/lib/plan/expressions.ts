import type { Expression as EsExpression, Node as EsNode, Program } from 'estree';

import { FUNCTIONS, UNITS } from './functions.ts';
import { describeKind, divideKinds, isNumericKind, isSameKind, multiplyKinds } from './kinds.ts';
import { ARITHMETIC, calculate, compareNumbers, EQUALITY, ORDERING } from './operators.ts';
import { quoteSource } from './problems.ts';
import type { Finding, ProblemList } from './problems.ts';
import { MATERIAL_MEMBERS, PART_MEMBERS } from './scope.ts';
import type { Member, Scope } from './scope.ts';
import { placeAt } from './source.ts';
import type { Source } from './source.ts';
import { suggestName } from './suggest.ts';
import type { Expression, Formula, Kind, Place } from './types.ts';

/** Limits of one expression. */
export const MAX_EXPRESSION_NODES = 4000;
export const MAX_EXPRESSION_DEPTH = 64;

/** What checking an expression needs to know. */
export interface CheckContext {
  source: Source;
  problems: ProblemList;
  scope: Scope;
}

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

/** The range of source that a node covers; acorn leaves it on every node. */
function rangeOf(node: EsNode): [number, number] {
  const { start, end } = node as unknown as { start?: number; end?: number };
  return typeof start === 'number' && typeof end === 'number' ? [start, end] : [0, 1];
}

/** The expression of a program of one expression statement, or null. */
export function expressionOf(program: Program | null | undefined): EsExpression | null {
  const statement = program?.body[0];
  if (program?.body.length !== 1 || statement?.type !== 'ExpressionStatement') return null;
  return statement.expression;
}

function childrenOf(node: EsNode): EsNode[] {
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
function isFactorSign(sign: string): boolean {
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

function report(context: CheckContext, node: EsNode, finding: Finding): null {
  const [start, end] = rangeOf(node);
  context.problems.add(placeAt(context.source, start, end), finding);
  return null;
}

function textOf(context: CheckContext, node: EsNode): string {
  const [start, end] = rangeOf(node);
  return quoteSource(context.source.text.slice(start, end));
}

function checkLiteral(node: EsExpression & { type: 'Literal' }, context: CheckContext): Expression | null {
  if ('bigint' in node && node.bigint !== undefined) {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: 'A number with an n behind it has no place in a plan.',
      hint: 'Leave the n out.',
    });
  }
  if ('regex' in node && node.regex !== undefined) {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: 'A text pattern has no place in a plan.',
      hint: 'Compare with ===.',
    });
  }
  if (typeof node.value === 'number') {
    if (!Number.isFinite(node.value)) {
      return report(context, node, {
        rule: 'not-finite',
        message: `${textOf(context, node)} is too large for a number.`,
      });
    }
    return { op: 'value', kind: 'number', value: node.value };
  }
  if (typeof node.value === 'string') return { op: 'value', kind: 'text', value: node.value };
  if (typeof node.value === 'boolean') return { op: 'value', kind: 'yesno', value: node.value };
  return report(context, node, {
    rule: 'not-in-the-language',
    message: '“null” has no place in a plan.',
    hint: 'Leave the attribute out, or use when={…}.',
  });
}

function checkName(
  node: EsNode & { type: 'Identifier' },
  context: CheckContext,
  isFactor: boolean,
): Expression | null {
  const { name } = node;
  const unit = UNITS.get(name);
  const meaning = context.scope.get(name);
  if (unit && (isFactor || meaning === undefined)) return { op: 'value', kind: unit.kind, value: unit.value };
  if (meaning === undefined) {
    const called = FUNCTIONS.get(name);
    if (called) {
      return report(context, node, {
        rule: 'function-without-values',
        message: `“${name}” is a function and needs values in brackets.`,
        hint: `Write ${called.usage}.`,
      });
    }
    const near = suggestName(name, [...context.scope.keys(), ...UNITS.keys(), ...FUNCTIONS.keys()]);
    return report(context, node, {
      rule: 'unknown-name',
      message: `Nothing in this plan is called “${name}”.`,
      found: name,
      hint: near
        ? `Did you mean ${near}?`
        : `Declare it with <Size name="${name}" …/> or <Let name="${name}" value={…} />.`,
    });
  }
  if (meaning.type === 'material' || meaning.type === 'part') {
    const members = meaning.type === 'material' ? [...meaning.members] : PART_MEMBERS;
    return report(context, node, {
      rule: 'needs-member',
      message: `“${name}” is a ${meaning.type}, not a value.`,
      hint: `Write ${members.map((member) => `${name}.${member}`).join(', ')}.`,
    });
  }
  return meaning.kind === null ? null : { op: 'name', kind: meaning.kind, name };
}

function checkMember(
  node: EsExpression & { type: 'MemberExpression' },
  context: CheckContext,
): Expression | null {
  if (node.computed || node.property.type !== 'Identifier') {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: 'Square brackets behind a name have no place in a plan.',
      hint: 'Write a plain point: ply.thickness.',
    });
  }
  if (node.object.type !== 'Identifier') {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: `“${textOf(context, node.object)}” has no members.`,
      hint: 'Only a material and a part have members: ply.thickness, A.length.',
    });
  }
  const { name } = node.object;
  const member = node.property.name;
  const meaning = context.scope.get(name);
  if (meaning === undefined) {
    const marks = [...context.scope].filter(
      ([, found]) => found.type === 'material' || found.type === 'part',
    );
    const near = suggestName(
      name,
      marks.map(([known]) => known),
    );
    return report(context, node.object, {
      rule: 'unknown-name',
      message: `Nothing in this plan is called “${name}”.`,
      found: name,
      hint: near
        ? `Did you mean ${near}.${member}?`
        : 'Declare it with <Material name="…" …/> or <Part mark="…" …/>.',
    });
  }
  if (meaning.type !== 'material' && meaning.type !== 'part') {
    return report(context, node, {
      rule: 'no-members',
      message: `“${name}” is a ${meaning.type === 'let' ? 'derived value' : meaning.type} and has no members.`,
      hint: `Write ${name} alone.`,
    });
  }
  const all = meaning.type === 'material' ? MATERIAL_MEMBERS : PART_MEMBERS;
  const known = all.find((candidate) => candidate === member);
  if (known === undefined) {
    const near = suggestName(member, all);
    return report(context, node, {
      rule: 'unknown-member',
      message: `A ${meaning.type} has no “${member}”.`,
      found: member,
      wanted: all.join(', '),
      hint: near
        ? `Did you mean ${name}.${near}?`
        : `Write ${all.map((each) => `${name}.${each}`).join(', ')}.`,
    });
  }
  if (meaning.type === 'material' && !meaning.members.has(known)) {
    return report(context, node, {
      rule: 'undeclared-measure',
      message: `The material “${name}” states no ${known}.`,
      hint: `Add ${known}="…" to <Material name="${name}" …/>.`,
    });
  }
  return {
    op: 'member',
    kind: known === 'qty' ? 'number' : 'length',
    of: meaning.type,
    name,
    member: known satisfies Member,
  };
}

/** Says that two kinds do not go together. A bare number beside a measure gets the cure that is nearly always meant. */
function reportKinds(
  node: EsNode,
  sign: string,
  left: Expression,
  right: Expression,
  context: CheckContext,
): null {
  const bare = left.kind === 'number' ? left : right.kind === 'number' ? right : undefined;
  const measure = bare === left ? right : left;
  let hint = 'Bring both sides to one kind.';
  if (bare && measure.kind === 'length') hint = 'Give the number a unit: 3*mm or 1/8*inch.';
  else if (bare && measure.kind === 'angle') hint = 'Give the number a unit: 45*deg.';
  else if (bare && measure.kind === 'mass') hint = 'Give the number a unit: 20*kg.';
  return report(context, node, {
    rule: 'kinds-differ',
    message: `${describeKind(left.kind)} ${sign} ${describeKind(right.kind)} has no meaning.`.replace(
      /^./,
      (first) => first.toUpperCase(),
    ),
    found: `${describeKind(left.kind)} ${sign} ${describeKind(right.kind)}`,
    hint,
  });
}

/** Warns where a choice is compared with a text that is none of its options: the branch could never be taken. */
function checkOptionText(node: EsNode, left: Expression, right: Expression, context: CheckContext): void {
  const name = left.op === 'name' ? left : right.op === 'name' ? right : undefined;
  const value = left.op === 'value' ? left : right.op === 'value' ? right : undefined;
  if (!name || typeof value?.value !== 'string') return;
  const meaning = context.scope.get(name.name);
  if (meaning?.type !== 'choice' || meaning.options.some((option) => option.value === value.value)) return;
  const values = meaning.options.map((option) => String(option.value));
  const near = suggestName(value.value, values);
  report(context, node, {
    rule: 'unknown-option',
    message: `The choice “${name.name}” has no option “${value.value}”.`,
    found: value.value,
    wanted: values.join(', '),
    hint: near
      ? `Did you mean "${near}"?`
      : `Its options are ${values.map((option) => `"${option}"`).join(', ')}.`,
  });
}

function combine(
  node: EsNode,
  sign: string,
  left: Expression,
  right: Expression,
  context: CheckContext,
): Expression | null {
  let kind: Kind | null;
  if (sign === '+' || sign === '-' || sign === '%') {
    kind = isNumericKind(left.kind) && left.kind === right.kind ? left.kind : null;
  } else if (sign === '*') kind = multiplyKinds(left.kind, right.kind);
  else if (sign === '/') kind = divideKinds(left.kind, right.kind);
  else if (ORDERING.has(sign)) kind = isNumericKind(left.kind) && left.kind === right.kind ? 'yesno' : null;
  else if (EQUALITY.has(sign))
    kind = typeof left.kind === 'string' && left.kind === right.kind ? 'yesno' : null;
  else kind = left.kind === 'yesno' && right.kind === 'yesno' ? 'yesno' : null;
  if (kind === null) return reportKinds(node, sign, left, right, context);
  if (EQUALITY.has(sign) && left.kind === 'text') checkOptionText(node, left, right, context);

  // Constants are worked out once, here; what is not finite now never will be.
  if (
    left.op === 'value' &&
    right.op === 'value' &&
    typeof left.value === 'number' &&
    typeof right.value === 'number'
  ) {
    if (ARITHMETIC.has(sign)) {
      const value = calculate(sign, left.value, right.value);
      if (!Number.isFinite(value)) {
        return report(context, node, {
          rule: 'not-finite',
          message: `${textOf(context, node)} is not a finite number.`,
          hint: 'Check for a division by zero.',
        });
      }
      return { op: 'value', kind, value };
    }
    return { op: 'value', kind, value: compareNumbers(sign, left.kind, left.value, right.value) };
  }
  return { op: 'binary', kind, sign, left, right };
}

const KNOWN_SIGNS: ReadonlySet<string> = new Set([...ARITHMETIC, ...ORDERING, ...EQUALITY, '&&', '||']);
const SIGN_CURES: ReadonlyMap<string, string> = new Map([
  ['==', 'Write ===.'],
  ['!=', 'Write !==.'],
  ['**', 'Multiply: a * a.'],
  ['??', 'Write a condition: test ? a : b.'],
  ['&', 'Write && for “and”.'],
  ['|', 'Write || for “or”.'],
]);

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
