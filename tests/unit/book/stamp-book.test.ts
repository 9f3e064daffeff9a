import { PDFDocument } from 'pdf-lib';
import { beforeAll, describe, expect, it } from 'vitest';
import { setBook } from '#lib/book/set-book.ts';
import { printableName, stampBook, type StampInput } from '#lib/book/stamp-book.ts';
import { loadBookFonts } from '#server/copies/fonts.ts';
import { drawPage, readPages, readWith, shareOfDifference } from './read-pdf.ts';
import { sampleInput } from './sample-book.ts';

let book: { bytes: Uint8Array; pages: number };
beforeAll(async () => {
  book = await setBook(await sampleInput());
});

async function stamp(change: Partial<StampInput> = {}): Promise<Uint8Array> {
  return stampBook({
    book: book.bytes,
    holderName: 'Ann Marrow',
    copyNumber: 1042,
    planTitle: 'Hall shelf',
    revisionLetter: 'B',
    date: '2026-12-01',
    fonts: await loadBookFonts(),
    ...change,
  });
}

/** Names of every awkward kind, and what must be read on the page. */
const NAMES: [kind: string, name: string, shown: RegExp][] = [
  ['PDF operators', 'Ann) Tj ET /JS (', /Ann\) Tj ET \/JS \(/],
  ['NUL', 'A\u0000nn', /Ann/],
  ['bell', 'An\u0007n', /Ann/],
  ['a new line', 'Ann\nMarrow', /Ann Marrow/],
  ['Hebrew', 'דנה', /\[U\+05D3\]\[U\+05E0\]\[U\+05D4\]/],
  ['a bidi override', 'Ann\u202egpj.exe', /Anngpj\.exe/],
  ['separate accents', 'Zoe\u0308', /Zoë/],
  ['heaped accents', `A${'\u0301\u0316'.repeat(60)}nn`, /nn/],
  ['a lone surrogate', 'Ann\ud83d', /Ann/],
  ['emoji', 'Ann 🪚', /Ann \[U\+1FA9A\]/u],
  ['Chinese', '王小明', /\[U\+738B\]\[U\+5C0F\]\[U\+660E\]/],
  ['Cyrillic', 'Иван Петров', /Иван Петров/],
  ['Greek', 'Ελένη', /Ελένη/],
  ['Polish', 'Łukasz Żółć', /Łukasz Żółć/],
  ['Vietnamese', 'Nguyễn Thị Hạnh', /Nguyễn Thị Hạnh/],
  ['nothing', '', /name not given/],
  ['5,000 characters', 'Wilhelmina '.repeat(455), /Wilhelmina Wilhelmina.*…/],
];

describe('a stamped copy', () => {
  it('carries holder, number, revision and date on every page', async () => {
    const pages = await readPages(await stamp());
    expect(pages).toHaveLength(book.pages);
    for (const page of pages) expect(page).toMatch(/Ann Marrow\s+1042\s+B\s+2026-12-01/);
  });

  it('differs from the unstamped book on every page, by less than a hundredth of it', async () => {
    const stamped = await stamp();
    for (let page = 1; page <= book.pages; page += 1) {
      const share = shareOfDifference(await drawPage(stamped, page), await drawPage(book.bytes, page));
      expect(share).toBeGreaterThan(0);
      expect(share).toBeLessThan(0.01);
    }
  });

  it.each(NAMES)('takes a name with %s', async (_kind, holderName, shown) => {
    const bytes = await stamp({ holderName });
    expect(await readWith('qpdf', ['--check', 'FILE'], bytes)).toContain(
      'No syntax or stream encoding errors',
    );
    for (const page of await readPages(bytes)) {
      expect(page).toMatch(shown);
      expect(page).toContain('1042');
    }
  });

  it('keeps a name of any length inside its cell', async () => {
    const bytes = await stamp({ holderName: 'W'.repeat(5000) });
    const [page = ''] = await readPages(bytes);
    expect(page).toMatch(/W{10,60}…\s+1042/);
  });

  it('keeps no unstamped pages behind: one cross-reference table, one end', async () => {
    const text = Buffer.from(await stamp()).toString('latin1');
    expect(text.match(/%%EOF/g)).toHaveLength(1);
    expect(text.match(/startxref/g)).toHaveLength(1);
    expect(text.slice(text.lastIndexOf('trailer'))).not.toContain('/Prev');
  });

  it('says in its metadata whose copy it is, and nothing of the machine', async () => {
    const info = await readWith('pdfinfo', ['FILE'], await stamp());
    expect(info).toMatch(/Title:\s+Hall shelf/);
    expect(info).toMatch(/Subject:\s+Revision B, copy 1042/);
    expect(info).toMatch(/Keywords:\s+Copy 1042 made for Ann Marrow/);
    expect(info).toMatch(/Producer:\s+Benchleaf/);
  });

  it('has no script, no action on opening and no attachment, whatever the name', async () => {
    const bytes = await stamp({ holderName: '/OpenAction << /S /JavaScript /JS (x) >>' });
    const json = await readWith('qpdf', ['--json=2', '--json-stream-data=none', 'FILE'], bytes);
    expect(json).not.toMatch(/"\/(JavaScript|JS|OpenAction|AA|EmbeddedFiles?)":/);
  });

  it('has every font embedded', async () => {
    const fonts = (await readWith('pdffonts', ['FILE'], await stamp({ holderName: 'Łukasz Иван' }))).trim();
    for (const font of fonts.split('\n').slice(2)) expect(font.split(/\s+/).at(-5)).toBe('yes');
  });

  it('is refused for a file that is no book of ours, by a rejected promise', async () => {
    const foreign = await PDFDocument.create();
    foreign.addPage();
    await expect(stamp({ book: await foreign.save() })).rejects.toThrow(RangeError);
    await expect(stamp({ book: new Uint8Array([1, 2, 3]) })).rejects.toThrow();
  });

  it('is refused with a broken font, by a rejected promise', async () => {
    const fonts = await loadBookFonts();
    await expect(stamp({ fonts: { ...fonts, regular: [new Uint8Array(64)] } })).rejects.toThrow();
  });
});

describe('a printable name', () => {
  it('is composed (NFC), with one space between words and none outside', () => {
    expect(printableName('  Zoe\u0308 \t\u3000 Marrow\u200b ')).toBe('Zoë Marrow');
  });
});
