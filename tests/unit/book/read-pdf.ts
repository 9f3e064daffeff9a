import { execFile } from 'node:child_process';
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { promisify } from 'node:util';
import sharp from 'sharp';

const run = promisify(execFile);

async function withFile<T>(pdf: Uint8Array, read: (file: string, folder: string) => Promise<T>): Promise<T> {
  const folder = await mkdtemp(join(tmpdir(), 'book-'));
  try {
    const file = join(folder, 'book.pdf');
    await writeFile(file, pdf);
    return await read(file, folder);
  } finally {
    await rm(folder, { recursive: true });
  }
}

/** Runs one of the tools that read PDF (poppler-utils, qpdf) on a file; `FILE` in its arguments is the file's place. */
export function readWith(tool: string, args: string[], pdf: Uint8Array): Promise<string> {
  return withFile(pdf, async (file) => {
    const { stdout } = await run(
      tool,
      args.map((arg) => (arg === 'FILE' ? file : arg)),
      { maxBuffer: 1e8 },
    );
    return stdout;
  });
}

/** The text of each page, lines as they stand. */
export async function readPages(pdf: Uint8Array): Promise<string[]> {
  const text = await readWith('pdftotext', ['-layout', 'FILE', '-'], pdf);
  return text.split('\f').slice(0, -1);
}

/** A page as grey pixels. */
export interface PagePicture {
  width: number;
  height: number;
  pixels: Uint8Array;
}

/** Draws one page, counted from 1, at 50 dots an inch. */
export function drawPage(pdf: Uint8Array, page: number): Promise<PagePicture & { png: Uint8Array }> {
  return withFile(pdf, async (file, folder) => {
    const number = String(page);
    await run('pdftoppm', [
      '-r',
      '50',
      '-gray',
      '-png',
      '-singlefile',
      '-f',
      number,
      '-l',
      number,
      file,
      join(folder, 'page'),
    ]);
    const png = await readFile(join(folder, 'page.png'));
    return { ...(await readPicture(png)), png };
  });
}

/** Reads a PNG as grey pixels. */
export async function readPicture(png: Uint8Array): Promise<PagePicture> {
  const { data, info } = await sharp(png).greyscale().raw().toBuffer({ resolveWithObject: true });
  return { width: info.width, height: info.height, pixels: new Uint8Array(data) };
}

/** Share of the pixels that differ by more than a quarter of the range; 1 when the sizes differ. */
export function shareOfDifference(a: PagePicture, b: PagePicture): number {
  if (a.width !== b.width || a.height !== b.height) return 1;
  let different = 0;
  a.pixels.forEach((pixel, index) => {
    if (Math.abs(pixel - (b.pixels[index] ?? 0)) > 64) different += 1;
  });
  return different / a.pixels.length;
}
