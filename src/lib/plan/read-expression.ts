import { LENGTHS, FORMULA_KINDS, sampleOf, offsetsOf, fail, wantedBy } from './attribute-reading.ts';
import type { ReadValue, Reading } from './attribute-reading.ts';
import type { AttributeType } from './components.ts';
import { checkExpression, makeFormula } from './expressions.ts';
import { expressionOf, namesIn } from './syntax-tree.ts';
import { describeKind, isSameKind } from './kinds.ts';
import { readText } from './read-text.ts';
import { placeAt } from './source.ts';
import type { Expression } from './types.ts';

/** The lengths that a list expression can have, as far as they are written out; null where a name hides them. */
function writtenLengths(expression: Expression): number[] {
  if (expression.op === 'list') return [expression.items.length];
  if (expression.op === 'if')
    return [...writtenLengths(expression.then), ...writtenLengths(expression.otherwise)];
  return [];
}

function isFitting(expression: Expression, type: AttributeType): boolean {
  const { kind } = expression;
  const lengths = writtenLengths(expression);
  switch (type) {
    case 'any':
      return true;
    case 'point':
      return isSameKind(kind, LENGTHS) && typeof kind !== 'string' && lengths.every((length) => length === 2);
    case 'place':
      return isSameKind(kind, LENGTHS) && typeof kind !== 'string' && lengths.every((length) => length === 3);
    case 'spacing':
      return (
        kind === 'length' ||
        (typeof kind !== 'string' && isSameKind(kind, LENGTHS) && lengths.every((length) => length === 2))
      );
    case 'sizes':
      return typeof kind !== 'string' && (isSameKind(kind, LENGTHS) || isSameKind(kind, { list: LENGTHS }));
    case 'turn':
      return (
        expression.op === 'list' &&
        expression.items.length === 2 &&
        expression.items[0]?.op === 'value' &&
        ['x', 'y', 'z'].includes(String(expression.items[0].value)) &&
        expression.items[1]?.kind === 'angle'
      );
    default:
      return kind === FORMULA_KINDS.get(type);
  }
}

const CURES: ReadonlyMap<AttributeType, string> = new Map<AttributeType, string>([
  ['length', 'Give the number a unit: {18*mm} or {3/4*inch}.'],
  ['angle', 'Give the number a unit: {45*deg}.'],
  ['mass', 'Give the number a unit: {90*kg}.'],
]);

/** Reads an attribute that is written in braces, by its type; a fault is reported and gives null. */
export function readExpression(reading: Reading): ReadValue | null {
  const { attribute, spec, context, element } = reading;
  if (attribute.value === null || attribute.value === undefined || typeof attribute.value === 'string')
    return null;
  const [start] = offsetsOf(attribute);
  const brace = context.source.text.indexOf('{', start);
  if (context.blanked.has(brace)) return null;
  const root = expressionOf(attribute.value.data?.estree);
  if (root === null) {
    return fail(reading, {
      rule: 'expression-syntax',
      message: 'The braces are empty.',
      hint: `Write ${sampleOf(attribute.name, spec)}.`,
    });
  }
  const text = attribute.value.value;
  const lead = text.length - text.trimStart().length;
  const at = placeAt(context.source, brace + 1 + lead, brace + 1 + text.trimEnd().length);
  const isFixed = spec.type === 'constant' || spec.type === 'count' || spec.type === 'option';
  if (isFixed) {
    const name = namesIn(root).find((each) => context.scope.has(each));
    if (name !== undefined) {
      context.problems.add(at, {
        rule: 'not-fixed',
        message: `${attribute.name} of <${element.name}> cannot depend on “${name}”.`,
        wanted: 'a fixed value',
        hint: 'Write a fixed value, and put the limit into a <Require that={…}>.',
      });
      return null;
    }
  }
  const isWordType =
    !isFixed &&
    spec.type !== 'any' &&
    spec.type !== 'spacing' &&
    spec.type !== 'sizes' &&
    spec.type !== 'turn';
  if (isWordType && !FORMULA_KINDS.has(spec.type)) {
    // A text in braces is a text: name={"width"} reads as name="width".
    if (root.type === 'Literal' && typeof root.value === 'string' && spec.type !== 'flag')
      return readText(root.value, reading);
    return fail(reading, {
      rule: 'wrong-kind',
      message:
        spec.type === 'flag'
          ? `${attribute.name} of <${element.name}> stands alone, without a value.`
          : `${attribute.name} of <${element.name}> is an expression, and text is wanted.`,
      wanted: spec.type === 'flag' ? attribute.name : 'text',
      hint:
        spec.type === 'flag'
          ? `Write ${attribute.name} alone, or leave it out.`
          : `Write ${sampleOf(attribute.name, spec)}.`,
    });
  }
  const expression = checkExpression(root, context);
  if (expression === null) return null;
  const wrongKind = (wanted: string): null => {
    const cure = expression.kind === 'number' ? CURES.get(spec.type) : undefined;
    context.problems.add(at, {
      rule: 'wrong-kind',
      message: `${attribute.name} of <${element.name}> is ${describeKind(expression.kind)}, and ${wanted} is wanted.`,
      found: describeKind(expression.kind),
      wanted,
      hint: cure ?? `Write ${sampleOf(attribute.name, spec)}.`,
    });
    return null;
  };
  if (isFixed) {
    if (
      expression.op !== 'value' ||
      typeof expression.value === 'boolean' ||
      typeof expression.value === 'object'
    ) {
      return wrongKind(wantedBy(spec.type));
    }
    const { kind, value } = expression;
    const isAllowed =
      spec.type === 'option'
        ? kind === 'length' || kind === 'number' || kind === 'text'
        : spec.type === 'count'
          ? kind === 'number' && typeof value === 'number' && Number.isSafeInteger(value) && value >= 0
          : kind === 'length' || kind === 'angle' || kind === 'number';
    if (!isAllowed) return wrongKind(wantedBy(spec.type));
    const kept = kind === 'length' && typeof value === 'number' ? Math.round(value) : value;
    return { type: 'constant', constant: { kind, value: kept } };
  }
  return isFitting(expression, spec.type)
    ? { type: 'formula', formula: makeFormula(expression, at, text) }
    : wrongKind(wantedBy(spec.type));
}
