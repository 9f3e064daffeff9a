import { parseAngle } from '#lib/units/parse-angle.ts';
import { parseLength } from '#lib/units/parse-length.ts';

import { attributesOf } from './components.ts';
import type { AttributeSpec, AttributeType, ComponentSpec } from './components.ts';
import { checkExpression, expressionOf, makeFormula, namesIn } from './expressions.ts';
import type { CheckContext } from './expressions.ts';
import { describeKind, isSameKind } from './kinds.ts';
import type { Element, ElementAttribute } from './parse.ts';
import type { Finding } from './problems.ts';
import { safeHref } from './safe-href.ts';
import { isMark, isName, isReservedName } from './scope.ts';
import { placeAt } from './source.ts';
import { suggestName } from './suggest.ts';
import type { Expression, Formula, Kind, Place, WrittenPrice } from './types.ts';
import { parseCoverage, parseMass, parsePrice } from './written.ts';
import type { Coverage } from './written.ts';

/** What reading a plan carries along. */
export interface ReadContext extends CheckContext {
  /** Offsets of braces whose expression was blanked because its fault is reported already. */
  blanked: ReadonlySet<number>;
}

/** A constant as read: its kind and its value in nanometres, degrees, kilograms or as it is. */
export interface Constant {
  kind: Kind;
  value: number | string;
}

type ReadValue =
  | { type: 'text'; text: string }
  | { type: 'words'; words: string[] }
  | { type: 'flag' }
  | { type: 'formula'; formula: Formula }
  | { type: 'constant'; constant: Constant }
  | { type: 'price'; price: WrittenPrice }
  | { type: 'coverage'; coverage: Coverage };

/** The attributes of one component, read and checked; a getter gives undefined where there is none or it is in error. */
export interface Attributes {
  /** The place of the opening tag. */
  at: Place;
  /** True for a required attribute that is missing or in error: the declaration cannot be made whole. */
  isBroken: boolean;
  /** True when the author wrote it, in error or not. */
  has: (name: string) => boolean;
  placeOf: (name: string) => Place;
  text: (name: string) => string | undefined;
  words: (name: string) => string[];
  flag: (name: string) => boolean;
  formula: (name: string) => Formula | undefined;
  constant: (name: string) => Constant | undefined;
  price: (name: string) => WrittenPrice | undefined;
  coverage: (name: string) => Coverage | undefined;
}

const LENGTHS: Kind = { list: 'length' };
const FORMULA_KINDS: ReadonlyMap<AttributeType, Kind> = new Map<AttributeType, Kind>([
  ['length', 'length'],
  ['angle', 'angle'],
  ['number', 'number'],
  ['mass', 'mass'],
  ['yesno', 'yesno'],
  ['point', LENGTHS],
  ['place', LENGTHS],
]);

/** How each type is written, for hints. */
const SAMPLES: Readonly<Record<AttributeType, string>> = {
  name: '="width"',
  mark: '="A"',
  text: '="…"',
  address: '="https://…"',
  picture: '="bench.jpg"',
  word: '="…"',
  words: '="…"',
  flag: '',
  marks: '="A B"',
  part: '="A"',
  material: '="ply"',
  texts: '="drill, router"',
  length: '={18*mm}',
  angle: '={45*deg}',
  number: '={2}',
  mass: '={90*kg}',
  yesno: '={width > 900*mm}',
  any: '={width - 36*mm}',
  constant: '="18 mm"',
  count: '={2}',
  option: '="plinth"',
  point: '={[0*mm, 0*mm]}',
  place: '={[0*mm, 0*mm, 0*mm]}',
  spacing: '={32*mm}',
  sizes: '={[[2440*mm, 1220*mm]]}',
  turn: '={["z", 90*deg]}',
  axes: '="x y"',
  price: '="78.00 EUR"',
  coverage: '="10 m2/l"',
};

/** How an attribute is written, as an example in the author's syntax. */
export function sampleOf(name: string, spec: AttributeSpec): string {
  const option = spec.options?.[0];
  return option === undefined ? `${name}${SAMPLES[spec.type]}` : `${name}="${option}"`;
}

function offsetsOf(node: {
  position?: { start: { offset?: number }; end: { offset?: number } } | undefined;
}): [number, number] {
  return [node.position?.start.offset ?? 0, node.position?.end.offset ?? 1];
}

/** The place of a component's opening: `<Part`. */
export function placeOfElement(element: Element, context: ReadContext): Place {
  const [start] = offsetsOf(element);
  return placeAt(context.source, start, start + 1 + (element.name?.length ?? 0));
}

interface Reading {
  attribute: ElementAttribute;
  spec: AttributeSpec;
  element: Element;
  context: ReadContext;
  at: Place;
}

function fail(reading: Reading, finding: Finding): null {
  reading.context.problems.add(reading.at, finding);
  return null;
}

/** Reads a text attribute that stands for a measure: `"450 mm"`, `"45°"`, `"90 kg"`. */
function readWrittenMeasure(text: string, reading: Reading): Constant | null {
  const { type } = reading.spec;
  if (
    type === 'angle' ||
    (type === 'constant' && /[°g]\s*$|degrees?\s*$/.test(text) && /\d\s*(°|deg)/.test(text))
  ) {
    const angle = parseAngle(text);
    if (angle.ok) return { kind: 'angle', value: angle.degrees };
    return fail(reading, {
      rule: 'written-value',
      message: angle.message,
      found: text,
      wanted: 'an angle',
      hint: angle.hint,
    });
  }
  if (type === 'mass') {
    const mass = parseMass(text);
    if (mass.ok) return { kind: 'mass', value: mass.value };
    return fail(reading, {
      rule: 'written-value',
      message: mass.message,
      found: text,
      wanted: 'a mass',
      hint: mass.hint,
    });
  }
  const inMm = parseLength(text, 'mm');
  const inInches = parseLength(text, 'in');
  if (!inMm.ok || !inInches.ok) {
    const fault = inMm.ok ? inInches : inMm;
    if (fault.ok) return null;
    return fail(reading, {
      rule: 'written-value',
      message: fault.message,
      found: text,
      wanted: 'a length',
      hint: fault.hint,
    });
  }
  // Only a length that carries its own unit reads alike whatever the default is.
  if (inMm.nm !== inInches.nm) {
    return fail(reading, {
      rule: 'written-value',
      message: `“${text}” has no unit.`,
      found: text,
      wanted: type === 'constant' ? 'a length, an angle or a number' : 'a length',
      hint:
        type === 'constant'
          ? `Write ${reading.attribute.name}={${text.trim()}} for a number, ${reading.attribute.name}="${text.trim()} mm" for a length.`
          : `Write ${reading.attribute.name}="${text.trim()} mm" or ${reading.attribute.name}="${text.trim()} in".`,
    });
  }
  return { kind: 'length', value: inMm.nm };
}

function readText(text: string, reading: Reading): ReadValue | null {
  const { spec, attribute, element } = reading;
  const options = spec.options ?? [];
  const trimmed = text.trim();
  const refuseOption = (word: string): null => {
    const near = suggestName(word, options);
    return fail(reading, {
      rule: 'unknown-value',
      message: `${attribute.name} of <${element.name}> cannot be “${word}”.`,
      found: word,
      wanted: options.join(', '),
      hint: near
        ? `Did you mean ${attribute.name}="${near}"?`
        : `Write one of ${options.map((option) => `"${option}"`).join(', ')}.`,
    });
  };
  switch (spec.type) {
    case 'text':
      if (trimmed === '' || trimmed.length > 400) {
        return fail(reading, {
          rule: 'text-length',
          message: `${attribute.name} of <${element.name}> is ${trimmed === '' ? 'empty' : 'longer than 400 characters'}.`,
          hint: `Write ${attribute.name}="…" with 1 to 400 characters.`,
        });
      }
      return { type: 'text', text: trimmed };
    case 'name':
      if (!isName(trimmed) || isReservedName(trimmed, element.name)) {
        return fail(reading, {
          rule: 'bad-name',
          message: isReservedName(trimmed, element.name)
            ? `“${trimmed}” is a word of the language.`
            : `“${trimmed}” cannot be used as a name.`,
          found: trimmed,
          wanted: 'a letter, then letters, digits or underscores, 40 at most',
          hint: 'Choose another name, such as innerWidth.',
        });
      }
      return { type: 'text', text: trimmed };
    case 'mark':
      if (!isMark(trimmed) || isReservedName(trimmed, element.name)) {
        return fail(reading, {
          rule: 'bad-name',
          message: `“${trimmed}” cannot be used as a mark.`,
          found: trimmed,
          wanted: 'one or two letters, then at most three digits',
          hint: 'Write mark="A" or mark="C1".',
        });
      }
      return { type: 'text', text: trimmed };
    case 'material':
    case 'part': {
      const meaning = reading.context.scope.get(trimmed);
      if (meaning?.type === spec.type) return { type: 'text', text: trimmed };
      const known = [...reading.context.scope]
        .filter(([, each]) => each.type === spec.type)
        .map(([name]) => name);
      const near = suggestName(trimmed, known);
      return fail(reading, {
        rule: 'unknown-name',
        message: `There is no ${spec.type} “${trimmed}” in this plan.`,
        found: trimmed,
        wanted: known.join(', '),
        hint: near
          ? `Did you mean ${attribute.name}="${near}"?`
          : spec.type === 'material'
            ? `Declare it with <Material name="${trimmed}" …/>.`
            : `Declare it with <Part mark="${trimmed}" …/>.`,
      });
    }
    case 'marks': {
      const marks = trimmed.split(/[\s,]+/).filter((mark) => mark !== '');
      const known = [...reading.context.scope]
        .filter(([, each]) => each.type === 'part')
        .map(([name]) => name);
      for (const mark of marks) {
        if (known.includes(mark)) continue;
        const near = suggestName(mark, known);
        fail(reading, {
          rule: 'unknown-name',
          message: `There is no part “${mark}” in this plan.`,
          found: mark,
          wanted: known.join(', '),
          hint: near ? `Did you mean ${near}?` : `Declare it with <Part mark="${mark}" …/>.`,
        });
      }
      return { type: 'words', words: [...new Set(marks)] };
    }
    case 'texts':
      return {
        type: 'words',
        words: trimmed
          .split(',')
          .map((each) => each.trim())
          .filter((each) => each !== ''),
      };
    case 'word': {
      // Two words of an option may be written in either order: “bottom left” is “left bottom”.
      const sorted = (words: string): string => words.split(/\s+/).sort().join(' ');
      const match = options.find((option) => sorted(option) === sorted(trimmed));
      return match === undefined ? refuseOption(trimmed) : { type: 'text', text: match };
    }
    case 'words': {
      const words = trimmed.split(/[\s,]+/).filter((word) => word !== '');
      const odd = words.find((word) => !options.includes(word));
      return odd === undefined ? { type: 'words', words: [...new Set(words)] } : refuseOption(odd);
    }
    case 'axes': {
      const axes = trimmed.split(/[\s,]+/);
      const isGood =
        axes.length === 2 && axes[0] !== axes[1] && axes.every((axis) => ['x', 'y', 'z'].includes(axis));
      if (isGood) return { type: 'words', words: axes };
      return fail(reading, {
        rule: 'unknown-value',
        message: `${attribute.name} of <${element.name}> cannot be “${trimmed}”.`,
        found: trimmed,
        wanted: 'two different axes out of x, y and z',
        hint: `Write ${attribute.name}="z y": the length runs along z, the width along y.`,
      });
    }
    case 'address': {
      const href = safeHref(trimmed);
      if (href !== null) return { type: 'text', text: href };
      return fail(reading, {
        rule: 'unsafe-address',
        message: `“${trimmed.slice(0, 60)}” is not an address that may stand in a plan.`,
        wanted: 'an http, https, mailto or relative address',
        hint: `Write ${attribute.name}="https://…".`,
      });
    }
    case 'picture':
      if (isPictureName(trimmed)) return { type: 'text', text: trimmed };
      return fail(reading, {
        rule: 'picture-name',
        message: `“${trimmed.slice(0, 60)}” is not the name of a picture.`,
        found: trimmed.slice(0, 60),
        wanted: 'letters, digits, points, dashes and underscores, 100 at most',
        hint: 'Upload the picture and write its name: src="bench.jpg".',
      });
    case 'price': {
      const price = parsePrice(text);
      if (price.ok) return { type: 'price', price: price.value };
      return fail(reading, {
        rule: 'written-value',
        message: price.message,
        found: text.slice(0, 60),
        wanted: 'a price',
        hint: price.hint,
      });
    }
    case 'coverage': {
      const coverage = parseCoverage(text);
      if (coverage.ok) return { type: 'coverage', coverage: coverage.value };
      return fail(reading, {
        rule: 'written-value',
        message: coverage.message,
        found: text.slice(0, 60),
        wanted: 'a coverage',
        hint: coverage.hint,
      });
    }
    case 'option':
      return trimmed === ''
        ? fail(reading, {
            rule: 'text-length',
            message: `${attribute.name} of <${element.name}> is empty.`,
            hint: 'Write a text, or {250*mm}.',
          })
        : { type: 'constant', constant: { kind: 'text', value: trimmed } };
    case 'constant': {
      const constant = readWrittenMeasure(text, reading);
      return constant === null ? null : { type: 'constant', constant };
    }
    case 'length':
    case 'spacing':
    case 'angle':
    case 'mass': {
      const constant = readWrittenMeasure(text, reading);
      if (constant === null) return null;
      const expression: Expression = { op: 'value', kind: constant.kind, value: constant.value };
      return { type: 'formula', formula: makeFormula(expression, reading.at, `"${text}"`) };
    }
    case 'flag':
      return fail(reading, {
        rule: 'wrong-kind',
        message: `${attribute.name} of <${element.name}> stands alone, without a value.`,
        wanted: attribute.name,
        hint: `Write ${attribute.name} alone, or leave it out.`,
      });
    case 'number':
    case 'count':
    case 'yesno':
    case 'any':
    case 'point':
    case 'place':
    case 'sizes':
    case 'turn':
      return fail(reading, {
        rule: 'wrong-kind',
        message: `${attribute.name} of <${element.name}> is text, and ${wantedBy(spec.type)} is wanted.`,
        found: 'text',
        wanted: wantedBy(spec.type),
        hint: `Write ${sampleOf(attribute.name, spec)}.`,
      });
  }
}

function wantedBy(type: AttributeType): string {
  const kind = FORMULA_KINDS.get(type);
  if (type === 'point') return 'a list of two lengths';
  if (type === 'place') return 'a list of three lengths';
  if (type === 'spacing') return 'a length or a list of two lengths';
  if (type === 'sizes') return 'a list of stock sizes';
  if (type === 'turn') return 'an axis and an angle';
  if (type === 'count') return 'a whole number';
  if (type === 'constant') return 'a length, an angle or a number';
  if (type === 'option') return 'a length, a number or a text';
  return kind === undefined ? 'an expression' : describeKind(kind);
}

/** True for the name of an uploaded picture: no folders, no addresses. */
export function isPictureName(text: string): boolean {
  return /^[A-Za-z0-9][A-Za-z0-9._-]{0,99}$/.test(text);
}

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

function readExpression(reading: Reading): ReadValue | null {
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

function readValue(reading: Reading): ReadValue | null {
  const { attribute, spec, element } = reading;
  if (attribute.value === null || attribute.value === undefined) {
    if (spec.type === 'flag') return { type: 'flag' };
    return fail(reading, {
      rule: 'value-missing',
      message: `${attribute.name} of <${element.name}> has no value.`,
      hint: `Write ${sampleOf(attribute.name, spec)}.`,
    });
  }
  return typeof attribute.value === 'string' ? readText(attribute.value, reading) : readExpression(reading);
}

/** Reads and checks every attribute of a component against its specification; problems go to the context. */
export function readAttributes(element: Element, spec: ComponentSpec, context: ReadContext): Attributes {
  const at = placeOfElement(element, context);
  const known = attributesOf(spec);
  const values = new Map<string, ReadValue>();
  const places = new Map<string, Place>();
  for (const attribute of element.attributes) {
    if (attribute.type === 'mdxJsxExpressionAttribute') {
      const [start, end] = offsetsOf(attribute);
      context.problems.add(placeAt(context.source, start || at.column, end), {
        rule: 'not-in-the-language',
        message: `Attributes of <${element.name}> cannot be spread from a value.`,
        hint: 'Write each attribute: name={value}.',
      });
      continue;
    }
    const [start, end] = offsetsOf(attribute);
    const place = placeAt(context.source, start, end);
    const attributeSpec = known.get(attribute.name);
    if (attributeSpec === undefined) {
      const near = suggestName(attribute.name, known.keys());
      context.problems.add(place, {
        rule: 'unknown-attribute',
        message: `<${element.name}> has no attribute “${attribute.name}”.`,
        found: attribute.name,
        wanted: [...known.keys()].join(', '),
        hint: near ? `Did you mean ${near}?` : `Its attributes are ${[...known.keys()].join(', ')}.`,
      });
      continue;
    }
    if (places.has(attribute.name)) {
      context.problems.add(place, {
        rule: 'repeated-attribute',
        message: `<${element.name}> has “${attribute.name}” twice.`,
        hint: 'Leave one out.',
      });
      continue;
    }
    places.set(attribute.name, place);
    const value = readValue({ attribute, spec: attributeSpec, element, context, at: place });
    if (value !== null) values.set(attribute.name, value);
  }
  let isBroken = false;
  for (const [name, attributeSpec] of known) {
    if (attributeSpec.required !== true) continue;
    if (!values.has(name)) isBroken = true;
    if (places.has(name)) continue;
    context.problems.add(at, {
      rule: 'attribute-missing',
      message: `<${element.name}> lacks “${name}”: ${attributeSpec.doc}.`,
      wanted: name,
      hint: `Add ${sampleOf(name, attributeSpec)}.`,
    });
  }
  return {
    at,
    isBroken,
    has: (name) => places.has(name),
    placeOf: (name) => places.get(name) ?? at,
    text: (name) => {
      const value = values.get(name);
      return value?.type === 'text' ? value.text : undefined;
    },
    words: (name) => {
      const value = values.get(name);
      return value?.type === 'words' ? value.words : [];
    },
    flag: (name) => values.get(name)?.type === 'flag',
    formula: (name) => {
      const value = values.get(name);
      return value?.type === 'formula' ? value.formula : undefined;
    },
    constant: (name) => {
      const value = values.get(name);
      return value?.type === 'constant' ? value.constant : undefined;
    },
    price: (name) => {
      const value = values.get(name);
      return value?.type === 'price' ? value.price : undefined;
    },
    coverage: (name) => {
      const value = values.get(name);
      return value?.type === 'coverage' ? value.coverage : undefined;
    },
  };
}
