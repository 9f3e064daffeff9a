import type { ReadContext } from './attribute-reading.ts';
import { readAttributes } from './attributes.ts';
import type { Attributes } from './attributes.ts';
import { checkChildren } from './children.ts';
import { COMPONENTS } from './components.ts';
import { UNITS } from './functions.ts';
import { describeKind } from './kinds.ts';
import type { Element } from './parse.ts';
import { suggestName } from './suggest.ts';
import { readOptions } from './symbols.ts';
import type { ChoiceDeclaration, SizeDeclaration } from './types.ts';

/** Makes the declaration of a size; null where it is in error, which is reported. */
export function declareSize(attributes: Attributes, context: ReadContext): SizeDeclaration | null {
  const read = {
    default: attributes.constant('default'),
    min: attributes.constant('min'),
    max: attributes.constant('max'),
    step: attributes.constant('step'),
  };
  const kind = read.default?.kind;
  for (const [name, constant] of Object.entries(read)) {
    if (constant && kind && constant.kind !== kind) {
      context.problems.add(attributes.placeOf(name), {
        rule: 'kinds-differ',
        message: `${name} is ${describeKind(constant.kind)}, and default is ${describeKind(kind)}.`,
        found: describeKind(constant.kind),
        wanted: describeKind(kind),
        hint: 'Write default, min, max and step in one kind.',
      });
      return null;
    }
  }
  if (attributes.isBroken || (kind !== 'length' && kind !== 'angle' && kind !== 'number')) return null;
  const [value, min, max, step] = [
    read.default?.value,
    read.min?.value,
    read.max?.value,
    read.step?.value,
  ].map(Number);
  if (value === undefined || min === undefined || max === undefined || step === undefined) return null;
  const refuse = (name: string, message: string, hint: string): null => {
    context.problems.add(attributes.placeOf(name), { rule: 'size-limits', message, hint });
    return null;
  };
  if (step <= 0)
    return refuse(
      'step',
      'step must be more than nothing.',
      kind === 'length' ? 'Write step="5 mm".' : 'Write step={1}.',
    );
  if (min > max) return refuse('max', 'max is less than min.', 'Exchange them.');
  if (value < min || value > max)
    return refuse('default', 'default lies outside min and max.', 'Choose a default between them.');
  const isWhole = [value, min, max, step].every((each) => Number.isInteger(each));
  if (kind === 'number' && !isWhole)
    return refuse(
      'step',
      'A size that is a number counts in whole numbers.',
      'Write default, min, max and step without decimals.',
    );
  return {
    type: 'size',
    at: attributes.at,
    name: attributes.text('name') ?? '',
    label: attributes.text('label') ?? '',
    kind,
    default: value,
    min,
    max,
    step,
  };
}

/** Makes the declaration of a choice with its options; null where it is in error, which is reported. */
export function declareChoice(
  element: Element,
  attributes: Attributes,
  context: ReadContext,
): ChoiceDeclaration | null {
  const children = checkChildren(element, ['Option'], context);
  const { kind, options } = readOptions(element, context);
  const spec = COMPONENTS.get('Option');
  const seen = new Set<number | string>();
  for (const child of children) {
    // Faults of the options themselves were reported by readOptions; here they are compared with each other.
    const constant = spec && readAttributes(child, spec, context).constant('value');
    if (!constant) continue;
    const { at } = readAttributes(child, spec, context);
    if (constant.kind !== kind && kind !== null) {
      context.problems.add(at, {
        rule: 'kinds-differ',
        message: `This option is ${describeKind(constant.kind)}, and the first is ${describeKind(kind)}.`,
        found: describeKind(constant.kind),
        wanted: describeKind(kind),
        hint: 'Write all options in one kind.',
      });
      return null;
    }
    if (seen.has(constant.value)) {
      context.problems.add(at, {
        rule: 'repeated-option',
        message: 'This option has the value of an earlier one.',
        hint: 'Leave one out.',
      });
    }
    seen.add(constant.value);
  }
  const initial = attributes.constant('default');
  if (options.length < 1) {
    context.problems.add(attributes.at, {
      rule: 'no-options',
      message: 'A choice needs options.',
      hint: 'Put <Option value="…" label="…" /> inside it.',
    });
    return null;
  }
  if (initial && !options.some((option) => option.value === initial.value)) {
    const values = options.map((option) => String(option.value));
    const near = suggestName(String(initial.value), values);
    context.problems.add(attributes.placeOf('default'), {
      rule: 'unknown-option',
      message: 'default is none of the options.',
      found: String(initial.value),
      hint: near ? `Did you mean "${near}"?` : 'Write it exactly as in one of the options.',
    });
    return null;
  }
  const name = attributes.text('name') ?? '';
  if (kind !== 'text' && UNITS.has(name)) {
    context.problems.add(attributes.placeOf('name'), {
      rule: 'bad-name',
      message: `“${name}” is a unit; only a choice of texts may be called so.`,
      found: name,
      hint: 'Choose another name.',
    });
    return null;
  }
  if (attributes.isBroken || !initial || (kind !== 'length' && kind !== 'number' && kind !== 'text'))
    return null;
  return {
    type: 'choice',
    at: attributes.at,
    name,
    label: attributes.text('label') ?? '',
    kind,
    default: initial.value,
    options,
  };
}
