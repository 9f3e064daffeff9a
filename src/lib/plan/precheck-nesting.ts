import type { ProblemList } from './problems.ts';
import { placeAt } from './source.ts';
import type { Source } from './source.ts';

const MAX_TAG_DEPTH = 32;
const MAX_TAGS = 8000;
const MAX_LINE_MARKERS = 24;
/** Emphasis, brackets and backquotes in one block of text (up to a blank line). */
const MAX_DELIMITERS_PER_BLOCK = 600;
const MAX_BACKQUOTES_PER_BLOCK = 200;
const MAX_TABLE_BARS_PER_BLOCK = 4000;
const MAX_LINES_PER_BLOCK = 3000;
/** Backslashes in the whole text: each costs the parser as much as a word. */
const MAX_BACKSLASHES = 20_000;

/** Counts tags with a small lexer, so that no parser has to nest deeper than {@link MAX_TAG_DEPTH}. */
export function checkTags(source: Source, text: string, problems: ProblemList): boolean {
  let depth = 0;
  let tags = 0;
  let i = text.indexOf('<');
  while (i !== -1) {
    const next = text.charAt(i + 1);
    const isClosing = next === '/';
    if (isClosing || /[A-Za-z_$>]/.test(next)) {
      tags += 1;
      let j = i + 1;
      while (j < text.length && text[j] !== '>' && text[j] !== '<') {
        const char = text[j];
        if (char === '"' || char === "'") {
          const end = text.indexOf(char, j + 1);
          if (end === -1) break;
          j = end;
        }
        j += 1;
      }
      const isWhole = text[j - 1] === '/' && !isClosing;
      if (isClosing) depth = Math.max(0, depth - 1);
      else if (!isWhole) depth += 1;
      if (depth > MAX_TAG_DEPTH || tags > MAX_TAGS) {
        problems.add(placeAt(source, i, i + 2), {
          rule: 'nested-too-deep',
          message:
            tags > MAX_TAGS
              ? `The plan has more than ${MAX_TAGS} components.`
              : `Components are nested more than ${MAX_TAG_DEPTH} deep, or opened and not closed.`,
          hint: 'Close each component: <Step …>…</Step>, or <Part … />.',
        });
        return false;
      }
      i = j;
    }
    i = text.indexOf('<', i + 1);
  }
  return true;
}

function isWordAt(text: string, index: number): boolean {
  return /[A-Za-z0-9]/.test(text.charAt(index));
}

/** Counts what nests or pairs in Markdown, line by line and block by block. */
export function checkMarkdown(source: Source, text: string, problems: ProblemList): boolean {
  let [delimiters, backquotes, bars, lines, backslashes] = [0, 0, 0, 0, 0];
  for (let line = 0; line < source.lineStarts.length; line += 1) {
    const start = source.lineStarts[line] ?? 0;
    const end = source.lineStarts[line + 1] ?? text.length;
    let markers = 0;
    let isLead = true;
    let isBlank = true;
    for (let i = start; i < end; i += 1) {
      const char = text.charAt(i);
      if (char === '\n' || char === '\r') continue;
      // An underscore between letters opens no emphasis: names such as inner_width are free.
      const isIntraword = char === '_' && isWordAt(text, i - 1) && isWordAt(text, i + 1);
      if (isIntraword) continue;
      if (char === '|') bars += 1;
      if (char === '\\') backslashes += 1;
      if (char === '*' || char === '_' || char === '~' || char === '[' || char === ']' || char === '!')
        delimiters += 1;
      if (char === '`') backquotes += 1;
      if (isLead) {
        if ('>-+*'.includes(char) || ((char === '.' || char === ')') && i > start)) markers += 1;
        else if (char !== ' ' && char !== '\t' && !(char >= '0' && char <= '9')) isLead = false;
      }
      if (char !== ' ' && char !== '\t') isBlank = false;
    }
    const indent = text.slice(start, Math.min(end, start + 400)).search(/[^ \t>]/);
    const isRule =
      isLead &&
      /^[ \t]*([-*_])[ \t]*(?:\1[ \t]*){2,}\s*$/.test(text.slice(start, Math.min(end, start + 200)));
    lines += 1;
    if (isBlank) delimiters = backquotes = bars = lines = 0;
    const isTooDeep = (markers > MAX_LINE_MARKERS && !isRule) || indent > 200;
    const isTooMany =
      delimiters > MAX_DELIMITERS_PER_BLOCK ||
      backquotes > MAX_BACKQUOTES_PER_BLOCK ||
      bars > MAX_TABLE_BARS_PER_BLOCK ||
      lines > MAX_LINES_PER_BLOCK ||
      backslashes > MAX_BACKSLASHES;
    if (isTooDeep || isTooMany) {
      problems.add(placeAt(source, start, start + 1), {
        rule: 'nested-too-deep',
        message: isTooDeep
          ? 'Lists or quotes are nested too deep here.'
          : 'There are too many lines, or too many asterisks, underscores, brackets, bars or backquotes, in one block of text.',
        hint: 'Put a blank line between blocks, or write \\* for an asterisk that is only text.',
      });
      return false;
    }
  }
  return true;
}
