import { readFile } from 'node:fs/promises';
import { createRequire } from 'node:module';
import { inflateSync } from 'node:zlib';
import type { BookFonts } from '#lib/book/types.ts';
import { unpackWoff } from '#lib/book/unpack-woff.ts';

const locate = createRequire(import.meta.url);
const RANGES = ['latin', 'latin-ext', 'cyrillic', 'cyrillic-ext', 'greek', 'greek-ext', 'vietnamese'];

async function readFont(file: string): Promise<Uint8Array> {
  return unpackWoff(await readFile(locate.resolve(file)), (bytes) => new Uint8Array(inflateSync(bytes)));
}

const readLiterata = (style: string): Promise<Uint8Array[]> =>
  Promise.all(RANGES.map((range) => readFont(`@fontsource/literata/files/literata-${range}-${style}.woff`)));

/** The tabular face is drawn for Latin only; what it lacks is set from Literata. */
const readMono = async (weight: string, others: readonly Uint8Array[]): Promise<Uint8Array[]> => [
  await readFont(`@fontsource/b612-mono/files/b612-mono-latin-${weight}-normal.woff`),
  ...others,
];

async function readAll(): Promise<BookFonts> {
  const [regular, italic, semibold] = await Promise.all(
    ['400-normal', '400-italic', '600-normal'].map(readLiterata),
  );
  if (!regular || !italic || !semibold) throw new Error('the fonts of the book are not installed');
  const [mono, monoBold] = await Promise.all([readMono('400', regular), readMono('700', semibold)]);
  return { regular, italic, semibold, mono, monoBold };
}

let loading: Promise<BookFonts> | undefined;

/**
 * The fonts of the book, read and unpacked once a process.
 * @throws when a file is missing or damaged; the next call tries again
 */
export function loadBookFonts(): Promise<BookFonts> {
  loading ??= readAll().catch((error: unknown) => {
    loading = undefined;
    throw error;
  });
  return loading;
}
