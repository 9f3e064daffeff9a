import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { setBook } from '#lib/book/set-book.ts';
import { drawPage, readPicture, shareOfDifference, type PagePicture } from './read-pdf.ts';
import { sampleInput } from './sample-book.ts';

/** Readers draw the edges of letters a little differently; a changed figure is far more than this. */
const TOLERANCE = 0.0004;

const placeOf = (name: string) => new URL(`golden/${name}.png`, import.meta.url);

/** Compares with the kept picture; one that differs is left beside it for the eye. */
async function differenceFromGolden(name: string, page: PagePicture & { png: Uint8Array }): Promise<number> {
  const place = placeOf(name);
  const share = existsSync(place) ? shareOfDifference(page, await readPicture(readFileSync(place))) : 1;
  if (share > TOLERANCE) writeFileSync(placeOf(`${name}-changed`), page.png);
  return share;
}

describe('the look of a book', () => {
  it('keeps its cover', async () => {
    const { bytes } = await setBook(await sampleInput());
    expect(await differenceFromGolden('cover', await drawPage(bytes, 1))).toBeLessThanOrEqual(TOLERANCE);
  });

  it('keeps its parts table', async () => {
    const { bytes } = await setBook(await sampleInput());
    expect(await differenceFromGolden('parts', await drawPage(bytes, 4))).toBeLessThanOrEqual(TOLERANCE);
  });

  it('would be seen to change if one figure of the parts table did', async () => {
    const input = await sampleInput();
    const [first, ...others] = input.resolved.parts;
    if (!first) throw new Error('the sample has no parts');
    const parts = [{ ...first, length: first.length + 25_400_000 }, ...others];
    const { bytes } = await setBook({ ...input, resolved: { ...input.resolved, parts } });
    const share = shareOfDifference(
      await drawPage(bytes, 4),
      await readPicture(readFileSync(placeOf('parts'))),
    );
    expect(share).toBeGreaterThan(0);
    const blank = { ...(await drawPage(bytes, 4)) };
    blank.pixels = blank.pixels.map(() => 255);
    expect(shareOfDifference(blank, await readPicture(readFileSync(placeOf('parts'))))).toBeGreaterThan(
      TOLERANCE,
    );
  });
});
