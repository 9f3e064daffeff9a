import type { Place } from './types.ts';

/** The text of a plan with its line starts, so that an offset becomes a line and a column in one look-up. */
export interface Source {
  text: string;
  lineStarts: readonly number[];
}

/** Indexes a text by its lines (LF, CRLF and CR end a line, as in Markdown). */
export function indexSource(text: string): Source {
  const lineStarts = [0];
  for (let i = 0; i < text.length; i += 1) {
    const code = text.charCodeAt(i);
    if (code === 10 || (code === 13 && text.charCodeAt(i + 1) !== 10)) lineStarts.push(i + 1);
  }
  return { text, lineStarts };
}

/** Line and column (from 1) of the characters from `start` to `end`; the length stops at the end of the line. */
export function placeAt(source: Source, start: number, end: number): Place {
  let low = 0;
  let high = source.lineStarts.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if ((source.lineStarts[middle] ?? 0) <= start) low = middle;
    else high = middle - 1;
  }
  const lineEnd = (source.lineStarts[low + 1] ?? source.text.length + 1) - 1;
  return {
    line: low + 1,
    column: start - (source.lineStarts[low] ?? 0) + 1,
    length: Math.max(1, Math.min(end, lineEnd) - start),
  };
}
