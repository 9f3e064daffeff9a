import type { Node as EsNode } from 'estree';

import { report, textOf } from './check-names.ts';
import type { CheckContext } from './check-names.ts';
import { describeKind, divideKinds, isNumericKind, multiplyKinds } from './kinds.ts';
import { ARITHMETIC, calculate, compareNumbers, EQUALITY, ORDERING } from './operators.ts';
import { suggestName } from './suggest.ts';
import type { Expression, Kind } from './types.ts';

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

/** The checked expression of two operands, or null where their kinds do not go together, which is reported. */
export function combine(
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

/** Every operator of the language between two values. */
export const KNOWN_SIGNS: ReadonlySet<string> = new Set([
  ...ARITHMETIC,
  ...ORDERING,
  ...EQUALITY,
  '&&',
  '||',
]);
/** What to write instead of an operator that the language does not have. */
export const SIGN_CURES: ReadonlyMap<string, string> = new Map([
  ['==', 'Write ===.'],
  ['!=', 'Write !==.'],
  ['**', 'Multiply: a * a.'],
  ['??', 'Write a condition: test ? a : b.'],
  ['&', 'Write && for “and”.'],
  ['|', 'Write || for “or”.'],
]);
