import { sampleOf, offsetsOf, placeOfElement, fail } from './attribute-reading.ts';
import type { ReadContext, Constant, ReadValue, Reading } from './attribute-reading.ts';
import { attributesOf } from './components.ts';
import type { ComponentSpec } from './components.ts';
import type { Element } from './parse.ts';
import { readExpression } from './read-expression.ts';
import { readText } from './read-text.ts';
import { placeAt } from './source.ts';
import { suggestName } from './suggest.ts';
import type { Formula, Place, WrittenPrice } from './types.ts';
import type { Coverage } from './written.ts';

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
