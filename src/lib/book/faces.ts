import fontkit from '@pdf-lib/fontkit';
import type { PDFDocument, PDFFont } from 'pdf-lib';

import type { BookFonts } from './types.ts';

export type FaceName = keyof BookFonts;

/** A stretch of text that one font file can set. */
export interface Run {
  font: PDFFont;
  text: string;
}

/** The faces of one document: text is split by what each file holds, and measured. */
export interface Faces {
  /** Splits text into runs. A character that no file holds is replaced by something visible; it never fails. */
  split(face: FaceName, text: string): Run[];
  /** Width of a text in points. */
  measure(face: FaceName, text: string, size: number): number;
}

interface Member {
  font: PDFFont;
  has: ReadonlySet<number>;
}

/** What stands in for signs that a face lacks, before a code point in brackets does. */
const STAND_INS: ReadonlyMap<string, string> = new Map([
  ['→', '>'],
  ['←', '<'],
  ['≤', '<='],
  ['≥', '>='],
  ['≈', '~'],
  ['′', "'"],
  ['″', '"'],
  ['⁄', '/'],
  ['‑', '-'],
  ['‐', '-'],
  ['−', '-'],
  ['\u202f', ' '],
  ['\u00a0', ' '],
  ['✓', 'v'],
]);

const characterSets = new WeakMap<Uint8Array, ReadonlySet<number>>();

/** The characters of a font file; kept, because reading them costs as much as embedding the font. */
function charactersOf(file: Uint8Array): ReadonlySet<number> {
  let has = characterSets.get(file);
  if (!has) {
    has = new Set(fontkit.create(file).characterSet);
    characterSets.set(file, has);
  }
  return has;
}

/** Six capitals before a subset's name (ISO 32000-1, 9.6.4): counted, not random, so that a book is the same each time. */
const tagOf = (index: number) => `BENCH${String.fromCharCode(65 + index)}`;

const TYPEFACES: Readonly<Record<FaceName, string>> = {
  regular: 'Literata-Regular',
  italic: 'Literata-Italic',
  semibold: 'Literata-SemiBold',
  mono: 'B612Mono-Regular',
  monoBold: 'B612Mono-Bold',
};

async function embedMembers(
  pdf: PDFDocument,
  files: readonly Uint8Array[],
  wanted: ReadonlySet<number>,
  name: string,
): Promise<Member[]> {
  const members: Member[] = [];
  const missing = new Set(wanted);
  for (const file of files) {
    if (members.length > 0 && missing.size === 0) break;
    const has = charactersOf(file);
    if (members.length > 0 && ![...missing].some((code) => has.has(code))) continue;
    const customName = `${tagOf(members.length)}+${name}`;
    members.push({ font: await pdf.embedFont(file, { subset: true, customName }), has });
    for (const code of has) missing.delete(code);
  }
  return members;
}

/**
 * Embeds the faces that a document needs.
 * @param text every character that will be set; files that hold none of them are left out
 * @throws when a face has no file, or a file is not a font
 */
export async function loadFaces(
  pdf: PDFDocument,
  fonts: BookFonts,
  text: string,
  names: readonly FaceName[] = ['regular', 'italic', 'semibold', 'mono', 'monoBold'],
): Promise<Faces> {
  pdf.registerFontkit(fontkit);
  const wanted = new Set<number>();
  for (const char of text) {
    if (char <= ' ') continue;
    // The plain letter is wanted too: it stands in where no file has the marked one.
    for (const each of char + char.normalize('NFKD')) wanted.add(each.codePointAt(0) ?? 0);
  }
  const members = new Map<FaceName, Member[]>();
  for (const name of names) members.set(name, await embedMembers(pdf, fonts[name], wanted, TYPEFACES[name]));

  const membersOf = (face: FaceName): Member[] => {
    const found = members.get(face);
    if (!found?.[0]) throw new RangeError(`the face ${face} has no font file`);
    return found;
  };
  const widths = new Map<string, number>();

  const split = (face: FaceName, text: string): Run[] => {
    const found = membersOf(face);
    const runs: Run[] = [];
    const add = (run: Run): void => {
      const last = runs[runs.length - 1];
      if (last?.font === run.font) last.text += run.text;
      else runs.push({ ...run });
    };
    for (const char of text) {
      const code = char.codePointAt(0) ?? 0;
      const member = found.find(({ has }) => has.has(code));
      if (member) add({ font: member.font, text: char });
      else replaceCharacter(char, found).forEach(add);
    }
    return runs;
  };

  const measure = (face: FaceName, text: string, size: number): number => {
    const key = `${face}\n${text}`;
    let width = widths.get(key);
    if (width === undefined) {
      width = split(face, text).reduce((sum, run) => sum + run.font.widthOfTextAtSize(run.text, 1), 0);
      widths.set(key, width);
    }
    return width * size;
  };

  return { split, measure };
}

/** Something readable for a character that no file holds: a sign like it, its plain letter, or its code point. */
function replaceCharacter(char: string, members: readonly Member[]): Run[] {
  const set = (text: string): Run[] | undefined => {
    const runs: Run[] = [];
    for (const each of text) {
      const member = members.find(({ has }) => has.has(each.codePointAt(0) ?? 0));
      if (!member) return undefined;
      runs.push({ font: member.font, text: each });
    }
    return runs;
  };
  // A combining mark by itself has nothing to stand on.
  if (/^\p{M}$/u.test(char)) return [];
  const standIn = STAND_INS.get(char);
  const plain = char.normalize('NFKD').replace(/\p{M}/gu, '');
  const code = (char.codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, '0');
  return (
    (standIn !== undefined && set(standIn)) ||
    (plain !== '' && plain !== char && set(plain)) ||
    set(`[U+${code}]`) ||
    []
  );
}
