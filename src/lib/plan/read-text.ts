import { parseAngle } from '#lib/units/parse-angle.ts';
import { parseLength } from '#lib/units/parse-length.ts';

import { sampleOf, fail, wantedBy, isPictureName } from './attribute-reading.ts';
import type { Constant, ReadValue, Reading } from './attribute-reading.ts';
import { makeFormula } from './expressions.ts';
import { safeHref } from './safe-href.ts';
import { isMark, isName, isReservedName } from './scope.ts';
import { suggestName } from './suggest.ts';
import type { Expression } from './types.ts';
import { parseCoverage, parseMass, parsePrice } from './written.ts';

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

/** Reads an attribute that is written as text, by its type; a fault is reported and gives null. */
export function readText(text: string, reading: Reading): ReadValue | null {
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
