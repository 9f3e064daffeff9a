import { parse } from 'acorn';

import { checkMarkdown, checkTags } from './precheck-nesting.ts';
import type { ProblemList } from './problems.ts';
import { placeAt } from './source.ts';
import type { Source } from './source.ts';

/**
 * Bounds that are checked before any parser sees the text. The parsers recurse and back-track; with these bounds their
 * work is linear in the text and their stack shallow, whatever was typed.
 */
export const MAX_TEXT_LENGTH = 400_000;
const MAX_EXPRESSION_LENGTH = 8000;
const MAX_BRACKETS = 64;
const MAX_EXPRESSIONS = 10_000;

/** What is left after the pre-check: the text for the Markdown parser, and where expressions were blanked out of it. */
export interface Prechecked {
  text: string;
  /** Offsets of opening braces whose expression was blanked: its fault is reported already. */
  blanked: ReadonlySet<number>;
}

type Fault = 'unclosed' | 'unopened' | 'too-long' | 'too-deep' | 'braces';

/** Finds the end of the expression that opens at `open`, stepping over strings and comments. */
function findClosingBrace(text: string, open: number): { end: number } | { fault: Fault; at: number } {
  let brackets = 0;
  let i = open + 1;
  while (i < text.length) {
    if (i - open > MAX_EXPRESSION_LENGTH) return { fault: 'too-long', at: open };
    const char = text[i];
    if (char === '"' || char === "'") {
      const start = i;
      const lineEnd = text.indexOf('\n', i);
      const quote = text.indexOf(char, i + 1);
      if (quote === -1 || (lineEnd !== -1 && lineEnd < quote)) return { fault: 'unclosed', at: start };
      i += 1;
      while (i < text.length && text[i] !== char) {
        if (text[i] === '\n') return { fault: 'unclosed', at: start };
        // A brace inside a string would make the Markdown parser try to end the expression there.
        if (text[i] === '{' || text[i] === '}') return { fault: 'braces', at: i };
        i += text[i] === '\\' ? 2 : 1;
      }
      if (i >= text.length) return { fault: 'unclosed', at: start };
    } else if (char === '/' && text[i + 1] === '*') {
      const end = text.indexOf('*/', i + 2);
      if (end === -1) return { fault: 'unclosed', at: i };
      i = end + 1;
    } else if (char === '{') return { fault: 'braces', at: i };
    else if (char === '}') return { end: i };
    else if (char === '(' || char === '[') {
      brackets += 1;
      if (brackets > MAX_BRACKETS) return { fault: 'too-deep', at: i };
    } else if (char === ')' || char === ']') {
      brackets -= 1;
      if (brackets < 0) return { fault: 'unopened', at: i };
    }
    i += 1;
  }
  return { fault: 'unclosed', at: open };
}

function isComment(inside: string): boolean {
  const trimmed = inside.trim();
  return trimmed.startsWith('/*') && trimmed.endsWith('*/') && trimmed.indexOf('*/') === trimmed.length - 2;
}

/** Blanks keep every line and column where it was. */
function blank(text: string): string {
  return text.replace(/[^\n\r]/g, ' ');
}

function describeFault(fault: Fault): { rule: string; message: string; hint: string } {
  switch (fault) {
    case 'unclosed':
      return {
        rule: 'unclosed',
        message: 'An expression, a text or a comment is opened here and not closed.',
        hint: 'Close it with }, a quote or */, or write \\{ for a brace that is only text.',
      };
    case 'unopened':
      return {
        rule: 'expression-syntax',
        message: 'A bracket is closed here that was not opened.',
        hint: 'Leave it out, or open it before.',
      };
    case 'too-long':
      return {
        rule: 'expression-too-large',
        message: `The expression is longer than ${MAX_EXPRESSION_LENGTH} characters, or is not closed.`,
        hint: 'Give its pieces names with <Let>.',
      };
    case 'too-deep':
      return {
        rule: 'expression-too-large',
        message: `The expression is nested more than ${MAX_BRACKETS} deep.`,
        hint: 'Give its pieces names with <Let>.',
      };
    case 'braces':
      return {
        rule: 'not-in-the-language',
        message: 'Braces inside an expression have no place in a plan.',
        hint: 'Write a list in square brackets: [a, b]; for a brace that is only text write \\{.',
      };
  }
}

function checkSyntax(source: Source, open: number, end: number, problems: ProblemList): boolean {
  const text = source.text.slice(open + 1, end);
  const at = (offset: number): void => {
    problems.add(placeAt(source, Math.min(open + 1 + offset, end), end), {
      rule: 'expression-syntax',
      message: 'The expression cannot be read from here on.',
      found: text.slice(offset, offset + 20).trim() || 'the end of the expression',
      hint: 'Check for a missing operator, bracket, comma or quote; write \\{ for a brace that is only text.',
    });
  };
  try {
    // In brackets, as the Markdown parser reads it: `1; exit()` is then no expression.
    const program = parse(`(${text})`, { ecmaVersion: 2024, sourceType: 'module' });
    if (program.body.length === 1 && program.body[0]?.type === 'ExpressionStatement') return true;
    at(0);
  } catch (fault) {
    // A SyntaxError of the parser carries its position; running out of stack does not.
    at(fault instanceof SyntaxError && 'pos' in fault ? Number(fault.pos) - 1 : 0);
  }
  return false;
}

/**
 * Bounds the text before it is parsed: its length, the length and nesting of expressions, tags, lists, quotes and emphasis;
 * and reads each expression once by itself, so that every syntax error has its own place. Gives null where parsing on
 * would be unsafe. Linear in the text.
 */
export function precheck(source: Source, problems: ProblemList): Prechecked | null {
  const { text } = source;
  if (text.length > MAX_TEXT_LENGTH) {
    problems.add(
      { line: 1, column: 1, length: 1 },
      {
        rule: 'plan-too-long',
        message: `The plan has ${text.length} characters; the most is ${MAX_TEXT_LENGTH}.`,
        hint: 'Split it into several plans.',
      },
    );
    return null;
  }
  const blanked = new Set<number>();
  const pieces: string[] = [];
  // The same text with expressions blanked, for counting what is Markdown only.
  const outside: string[] = [];
  let from = 0;
  let expressions = 0;
  // A spread that is blanked is no attribute, so nothing behind this check can read on.
  let hasSpread = false;
  for (let i = text.indexOf('{'); i !== -1; i = text.indexOf('{', i)) {
    let backslashes = 0;
    while (text[i - 1 - backslashes] === '\\') backslashes += 1;
    if (backslashes % 2 === 1) {
      i += 1;
      continue;
    }
    expressions += 1;
    if (expressions > MAX_EXPRESSIONS) {
      problems.add(placeAt(source, i, i + 1), {
        rule: 'plan-too-long',
        message: `The plan has more than ${MAX_EXPRESSIONS} expressions.`,
        hint: 'Split it into several plans.',
      });
      return null;
    }
    const found = findClosingBrace(text, i);
    if ('fault' in found) {
      problems.add(placeAt(source, found.at, found.at + 1), describeFault(found.fault));
      return null;
    }
    const inside = text.slice(i + 1, found.end);
    outside.push(text.slice(from, i + 1), blank(inside));
    if (inside.trimStart().startsWith('...')) {
      problems.add(placeAt(source, i, found.end + 1), {
        rule: 'not-in-the-language',
        message: 'Attributes cannot be spread from a value.',
        hint: 'Write each attribute: name={value}.',
      });
      hasSpread = true;
      pieces.push(text.slice(from, found.end));
    } else if (inside.trim() === '') {
      pieces.push(text.slice(from, found.end));
    } else if (isComment(inside)) {
      pieces.push(text.slice(from, i + 1), blank(inside));
    } else if (inside.includes('`') || !checkSyntax(source, i, found.end, problems)) {
      if (inside.includes('`')) {
        problems.add(placeAt(source, i + 1 + inside.indexOf('`'), i + 2 + inside.indexOf('`')), {
          rule: 'not-in-the-language',
          message: 'A text in backquotes has no place in a plan.',
          hint: 'Write the text in double quotes.',
        });
      }
      blanked.add(i);
      pieces.push(text.slice(from, i + 1), `0${blank(inside).slice(1)}`);
    } else {
      pieces.push(text.slice(from, found.end));
    }
    from = found.end;
    i = found.end + 1;
  }
  pieces.push(text.slice(from));
  outside.push(text.slice(from));
  const bare = outside.join('');
  if (!checkMarkdown(source, bare, problems) || !checkTags(source, bare, problems) || hasSpread) return null;
  return { text: pieces.join(''), blanked };
}
