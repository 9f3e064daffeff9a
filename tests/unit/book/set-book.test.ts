import { describe, expect, it } from 'vitest';
import { setBook } from '#lib/book/set-book.ts';
import { readPages, readWith } from './read-pdf.ts';
import { sampleInput, sampleStep } from './sample-book.ts';

describe('a book', () => {
  it('is as many pages as it says, each of A4 (210 × 297 mm, ISO 216)', async () => {
    const book = await setBook(await sampleInput());
    const info = await readWith('pdfinfo', ['FILE'], book.bytes);
    expect(info).toMatch(new RegExp(`Pages:\\s+${book.pages}\\b`));
    // 210 / 25.4 * 72 = 595.28 and 297 / 25.4 * 72 = 841.89.
    expect(info).toMatch(/Page size:\s+595\.2\d* x 841\.89 pts \(A4\)/);
  });

  it('is of US Letter, 8.5 × 11 in, when that is asked for', async () => {
    const book = await setBook(await sampleInput({ paper: 'letter' }));
    expect(await readWith('pdfinfo', ['FILE'], book.bytes)).toMatch(/Page size:\s+612 x 792 pts/);
  });

  it('is a sound file with every font embedded', async () => {
    const { bytes } = await setBook(await sampleInput());
    expect(await readWith('qpdf', ['--check', 'FILE'], bytes)).toContain(
      'No syntax or stream encoding errors',
    );
    const fonts = (await readWith('pdffonts', ['FILE'], bytes)).trim().split('\n').slice(2);
    expect(fonts.length).toBeGreaterThanOrEqual(4);
    // The columns from the right: object number (two), to Unicode, subset, embedded.
    for (const font of fonts) expect(font.split(/\s+/).at(-5)).toBe('yes');
  });

  it('reads a fraction as plain text where it is set with a bar', async () => {
    const { bytes } = await setBook(await sampleInput());
    const text = (await readPages(bytes)).join('\n').replace(/\s+/g, ' ');
    expect(text).toMatch(/A\s+Side\s+2\s+17 3\/4"\s+12 1\/2"\s+3\/4"/);
    // The minutes in the margin may be read between the words and the line below them.
    expect(text).toMatch(/Set the fence to 17 3\/4" and cut/);
  });

  it('gives the same lengths in millimetres, the decimal in one piece', async () => {
    const { bytes } = await setBook(await sampleInput({ units: 'mm' }));
    const text = (await readPages(bytes)).join('\n');
    // 17 3/4 in = 450.85 mm, 12 1/2 in = 317.5 mm, 3/4 in = 19.05 mm; halves of a tenth go up.
    expect(text).toMatch(/A\s+Side\s+2\s+450\.9\s+317\.5\s+19\.1/);
    expect(text).toMatch(/B\s+Shelf\s+2\s+400\.5\s+300\s+18\b/);
  });

  it('says the fit, what to buy, the cautions, the workings, the sag and the revisions', async () => {
    const { bytes } = await setBook(await sampleInput());
    const text = (await readPages(bytes)).join('\n').replace(/\s+/g, ' ');
    for (const words of [
      'Overall width 42"',
      'felt pads',
      'Birch plywood, measured',
      '32: 1 pack of 50',
      '€84.90',
      'Fix the shelf to the studs.',
      'Local building rules come first.',
      'sponsored link',
      'Groove in the face along the bottom edge',
      'Guidance only, no approval.',
      '0.25 litres',
      'Part B is 2 mm shorter',
    ])
      expect(text).toContain(words);
  });

  it('carries the title block on every sheet, numbered to the last', async () => {
    const { bytes, pages } = await setBook(await sampleInput());
    const texts = await readPages(bytes);
    texts.forEach((text, index) => {
      for (const label of [
        'Legal owner',
        'Identification number',
        'Date of issue',
        'Creator',
        'Approved by',
        'Document type',
        'Copy made for',
      ])
        expect(text).toContain(label);
      expect(text).toMatch(new RegExp(`${index + 1} ?/ ?${pages}\\b`));
    });
  });

  it('names its sections and steps in the outline, and its title and language in the file', async () => {
    const { bytes } = await setBook(await sampleInput());
    const json = await readWith('qpdf', ['--json=2', '--json-key=outlines', 'FILE'], bytes);
    for (const title of [
      'Before you start',
      'Shopping list',
      'Parts',
      'Steps',
      '2. Work number 2',
      'Revisions',
    ])
      expect(json).toContain(`"title": "${title}"`);
    expect(await readWith('pdfinfo', ['FILE'], bytes)).toMatch(/Title:\s+Hall shelf/);
    expect(Buffer.from(bytes).toString('latin1')).toMatch(
      /\/Lang \(?.*en-GB|\/Lang <FEFF0065006E002D00470042>/,
    );
  });

  it('holds no script, no action on opening and no attachment', async () => {
    const { bytes } = await setBook(await sampleInput());
    const plain = await readWith('qpdf', ['--qdf', '--object-streams=disable', 'FILE', '-'], bytes);
    expect(plain).not.toMatch(/\/(JavaScript|JS|OpenAction|AA|Launch|EmbeddedFiles?|RichMedia)\b/);
    expect(plain).toContain('https://tools.example/gauge');
  });

  it('is the same to the byte when it is set again', async () => {
    const [one, two] = [await setBook(await sampleInput()), await setBook(await sampleInput())];
    expect(Buffer.from(one.bytes).equals(two.bytes)).toBe(true);
  });

  it('keeps each step’s title with its first words, however long the plan is', async () => {
    const steps = Array.from({ length: 80 }, (_, index) => sampleStep(index + 1));
    const { bytes } = await setBook(await sampleInput({ resolved: { steps } }));
    const pages = await readPages(bytes);
    for (const step of steps) {
      const page = pages.find((text) => new RegExp(`Work number ${step.number}\\n`).test(text)) ?? '';
      const after = page.slice(page.search(new RegExp(`Work number ${step.number}\\n`)));
      expect(after).toContain('Cut the sides');
    }
  });

  it('stands in for a damaged picture with its description', async () => {
    const input = await sampleInput({
      resolved: { body: [{ node: 'figure', src: 'bad.png', alt: 'The shelf from the side' }] },
    });
    const { bytes } = await setBook({
      ...input,
      pictures: new Map([['bad.png', { bytes: new Uint8Array([1, 2, 3]), type: 'image/png' }]]),
    });
    expect((await readPages(bytes)).join('')).toContain('Picture: The shelf from the side');
  });

  it('refuses a font that is none, by a rejected promise', async () => {
    const input = await sampleInput();
    const fonts = { ...input.fonts, regular: [new Uint8Array(100)] };
    await expect(setBook({ ...input, fonts })).rejects.toThrow();
  });
});
