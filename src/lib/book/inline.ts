import { formatLength, type FormattedLength } from '#lib/units/format-length.ts';
import type { UnitSystem } from '#lib/units/length.ts';

import { drawNumerals, numeralsWidth } from './numerals.ts';
import type { Pen, TextStyle } from './pen.ts';
import { INK } from './sheet.ts';

/** A stretch of running text, or a length set with a real fraction. */
export type Inline =
  | { kind: 'text'; text: string; style: TextStyle; href?: string }
  | { kind: 'length'; length: FormattedLength; size: number; color?: string }
  | { kind: 'numerals'; text: string; size: number; color?: string }
  | { kind: 'break' };

/** One line of a paragraph, broken and measured. */
export interface Line {
  width: number;
  draw(pen: Pen, x: number, baseline: number): void;
}

interface Atom {
  inline: Inline;
  text: string;
  width: number;
  /** Width of the space before it; undefined when it is joined to the atom before. */
  space: number | undefined;
}

/** Numerator and denominator are set at this share of the size. */
const FRACTION = 0.68;
/** Heights over the baseline, as shares of the size: the bar, and the room between it and the figures. */
const BAR = 0.33;
const GAP = 0.1;
const FIGURE_HEIGHT = 0.65;

interface LengthPieces {
  lead: string;
  fraction: { over: string; under: string } | undefined;
  tail: string;
}

function piecesOf(length: FormattedLength): LengthPieces {
  const { units, numerator, denominator } = length;
  if (units === 'mm' || numerator === 0) return { lead: length.text, fraction: undefined, tail: '' };
  const [lead = '', tail = ''] = length.text.split(`${numerator}/${denominator}`);
  return { lead: lead.trimEnd(), fraction: { over: String(numerator), under: String(denominator) }, tail };
}

function fractionWidth(
  measure: Pen['measure'],
  fraction: { over: string; under: string },
  size: number,
): number {
  const small = size * FRACTION;
  return (
    Math.max(measure('mono', fraction.over, small), measure('mono', fraction.under, small)) + size * 0.12
  );
}

/** Width of a length in points, its unit included. */
export function lengthWidth(measure: Pen['measure'], length: FormattedLength, size: number): number {
  const { lead, fraction, tail } = piecesOf(length);
  const gap = fraction && lead !== '' ? size * 0.08 : 0;
  return (
    numeralsWidth(measure, lead, size) +
    gap +
    (fraction ? fractionWidth(measure, fraction, size) : 0) +
    measure('mono', tail, size)
  );
}

function drawFraction(
  pen: Pen,
  fraction: { over: string; under: string },
  x: number,
  baseline: number,
  style: { size: number; color: string },
): number {
  const width = fractionWidth(pen.measure, fraction, style.size);
  const small = style.size * FRACTION;
  const centre = (text: string) => x + (width - pen.measure('mono', text, small)) / 2;
  const bar = baseline - style.size * BAR;
  const text = { face: 'mono', size: small, color: style.color } as const;
  pen.text(fraction.over, centre(fraction.over), bar - style.size * GAP, text);
  pen.line(x + style.size * 0.03, bar, x + width - style.size * 0.03, bar, style.size * 0.055, style.color);
  pen.text(fraction.under, centre(fraction.under), bar + style.size * GAP + small * FIGURE_HEIGHT, text);
  return width;
}

/** Draws a length at x; copied, it reads as its plain text. Gives the width it took. */
export function drawLength(
  pen: Pen,
  length: FormattedLength,
  x: number,
  baseline: number,
  style: { size: number; color?: string },
): number {
  const { lead, fraction, tail } = piecesOf(length);
  const full = { size: style.size, color: style.color ?? INK };
  const text = { face: 'mono', ...full } as const;
  if (!fraction) {
    drawNumerals(pen, lead, x, baseline, full);
    return numeralsWidth(pen.measure, lead, style.size);
  }
  let at = x;
  pen.readAs(length.text, () => {
    pen.text(lead, at, baseline, text);
    at += pen.measure('mono', lead, style.size) + (lead === '' ? 0 : style.size * 0.08);
    at += drawFraction(pen, fraction, at, baseline, full);
    pen.text(tail, at, baseline, text);
    at += pen.measure('mono', tail, style.size);
  });
  return at - x;
}

/**
 * Draws a length with its decimal point, or the left end of its fraction, at `align`: so a column of figures can be
 * read down. In millimetres the unit is left to the column's heading.
 */
export function drawAligned(
  pen: Pen,
  length: FormattedLength,
  align: number,
  baseline: number,
  size: number,
): void {
  if (length.units === 'mm') {
    const figures = length.text.replace(/ mm$/, '');
    const whole = /^−?\d+/.exec(figures)?.[0] ?? figures;
    drawNumerals(pen, figures, align - pen.measure('mono', whole, size), baseline, { size });
    return;
  }
  const { lead, fraction } = piecesOf(length);
  const whole = fraction ? lead : lead.replace(/[+−]?"$/, '');
  const gap = fraction && lead !== '' ? size * 0.08 : 0;
  drawLength(pen, length, align - gap - pen.measure('mono', whole, size), baseline, { size });
}

/** Figures other than lengths, such as money. */
export function numerals(text: string, size: number): Inline {
  return { kind: 'numerals', text, size };
}

/** A length as it stands in running text. */
export function lengthInline(nm: number, units: UnitSystem, size: number): Inline {
  return { kind: 'length', length: formatLength(nm, { units }), size: size * 0.9 };
}

function atomsOf(inlines: readonly Inline[], measure: Pen['measure'], maxWidth: number): (Atom | 'break')[] {
  const atoms: (Atom | 'break')[] = [];
  let space: number | undefined;
  for (const inline of inlines) {
    if (inline.kind === 'break') {
      atoms.push('break');
      space = undefined;
      continue;
    }
    if (inline.kind === 'length') {
      atoms.push({ inline, text: '', width: lengthWidth(measure, inline.length, inline.size), space });
      space = undefined;
      continue;
    }
    if (inline.kind === 'numerals') {
      atoms.push({ inline, text: '', width: numeralsWidth(measure, inline.text, inline.size), space });
      space = undefined;
      continue;
    }
    const { face, size } = inline.style;
    for (const token of inline.text.split(/( +)/)) {
      if (token === '') continue;
      if (token.startsWith(' ')) {
        space = measure(face, ' ', size);
        continue;
      }
      for (const text of chop(token, (piece) => measure(face, piece, size), maxWidth)) {
        atoms.push({ inline, text, width: measure(face, text, size), space });
        space = undefined;
      }
    }
  }
  return atoms;
}

/** Cuts a word that is wider than the measure into pieces that fit, so that nothing ever runs off the sheet. */
function chop(word: string, measure: (text: string) => number, maxWidth: number): string[] {
  if (measure(word) <= maxWidth) return [word];
  const pieces: string[] = [];
  let piece = '';
  for (const char of word) {
    if (piece !== '' && measure(piece + char) > maxWidth) {
      pieces.push(piece);
      piece = '';
    }
    piece += char;
  }
  return piece === '' ? pieces : [...pieces, piece];
}

/** Breaks running text into lines no wider than `maxWidth`, ragged right. What is joined without a space stays together. */
export function breakLines(inlines: readonly Inline[], maxWidth: number, measure: Pen['measure']): Line[] {
  const lines: Line[] = [];
  let line: Atom[] = [];
  let width = 0;
  let group: Atom[] = [];

  const endLine = (): void => {
    if (line.length > 0) lines.push(lineOf(line, width));
    line = [];
    width = 0;
  };
  const endGroup = (): void => {
    const [first] = group;
    if (!first) return;
    const groupWidth = group.reduce((sum, atom) => sum + atom.width, 0);
    const space = line.length > 0 ? (first.space ?? 0) : 0;
    if (line.length > 0 && width + space + groupWidth > maxWidth) endLine();
    for (const atom of group) {
      // Only a group wider than the whole measure is parted inside.
      if (line.length > 0 && width + atom.width > maxWidth) endLine();
      const before = atom === first && line.length > 0 ? space : 0;
      line.push({ ...atom, space: before });
      width += before + atom.width;
    }
    group = [];
  };

  for (const atom of atomsOf(inlines, measure, maxWidth)) {
    if (atom === 'break') {
      endGroup();
      endLine();
    } else {
      if (atom.space !== undefined) endGroup();
      group.push(atom);
    }
  }
  endGroup();
  endLine();
  return lines;
}

function lineOf(atoms: readonly Atom[], width: number): Line {
  return {
    width,
    draw: (pen, x, baseline) => {
      let at = x;
      let pending: { text: string; x: number; inline: Extract<Inline, { kind: 'text' }> } | undefined;
      const flush = (): void => {
        if (!pending) return;
        const { style, href } = pending.inline;
        pen.text(pending.text, pending.x, baseline, style);
        if (href !== undefined)
          pen.link(href, pending.x, baseline - style.size, at - pending.x, style.size * 1.3);
        pending = undefined;
      };
      for (const atom of atoms) {
        const { inline } = atom;
        const space = atom.space ?? 0;
        if (inline.kind === 'text') {
          // Words of one style go out as one string: smaller, and a reader copies whole lines.
          if (pending?.inline === inline) pending.text += (space > 0 ? ' ' : '') + atom.text;
          else {
            // The space is drawn, not only left free, so that copied words do not run together.
            if (pending && space > 0) pending.text += ' ';
            flush();
            pending = { text: atom.text, x: at + space, inline };
          }
          at += space + atom.width;
        } else if (inline.kind === 'numerals') {
          if (pending && space > 0) pending.text += ' ';
          flush();
          at += space;
          drawNumerals(pen, inline.text, at, baseline, inline);
          at += atom.width;
        } else if (inline.kind === 'length') {
          if (pending && space > 0) pending.text += ' ';
          flush();
          at += space;
          at += drawLength(pen, inline.length, at, baseline, inline);
        }
      }
      flush();
    },
  };
}
