/** Stamping a 40-page book in a warm process against `qpdf --overlay` of the same file as a process; and setting that book. */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PDFDocument } from 'pdf-lib';
import { setBook } from '#lib/book/set-book.ts';
import { stampBook } from '#lib/book/stamp-book.ts';
import { loadBookFonts } from '#server/copies/fonts.ts';
import { sampleInput, sampleStep } from '../unit/book/sample-book.ts';

const ROUNDS = 15;
const PAGES = 40;

const median = (values: readonly number[]) =>
  [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? NaN;

async function time(run: () => unknown): Promise<number> {
  const start = performance.now();
  await run();
  return performance.now() - start;
}

async function inputOf(steps: number) {
  return sampleInput({
    resolved: {
      steps: Array.from({ length: steps }, (_, index) =>
        sampleStep(
          index + 1,
          'Cut the sides and mark their front edges, then try the joint on a waste piece. '.repeat(5),
        ),
      ),
    },
  });
}

const input = await inputOf(200);
let book = await setBook(input);
for (let steps = 190; book.pages !== PAGES && steps > 100; steps -= 1)
  book = await setBook(await inputOf(steps));
const setTimes: number[] = [];
for (let round = 0; round < 5; round += 1) setTimes.push(await time(() => setBook(input)));

const folder = mkdtempSync(join(tmpdir(), 'stamp-'));
const [bookFile, stampFile, outFile] = ['book.pdf', 'stamp.pdf', 'out.pdf'].map((name) => join(folder, name));
if (!bookFile || !stampFile || !outFile) throw new Error('no place for the files');
writeFileSync(bookFile, book.bytes);
const stampPage = await PDFDocument.create();
stampPage.addPage([595.276, 841.89]).drawText('Ann Marrow 1042', { x: 60, y: 32, size: 9 });
writeFileSync(stampFile, await stampPage.save());

const fonts = await loadBookFonts();
const stamp = (holderName: string) =>
  stampBook({
    book: book.bytes,
    holderName,
    copyNumber: 1042,
    planTitle: 'Hall shelf',
    revisionLetter: 'B',
    date: '2026-12-01',
    fonts,
  });
const overlay = () =>
  execFileSync('qpdf', [bookFile, '--overlay', stampFile, '--from=', '--repeat=1', '--', outFile]);

for (let round = 0; round < 5; round += 1) await stamp('Ann Marrow');
const times = { latin: [] as number[], mixed: [] as number[], qpdf: [] as number[] };
for (let round = 0; round < ROUNDS; round += 1) {
  times.latin.push(await time(() => stamp('Ann Marrow')));
  times.mixed.push(await time(() => stamp('Łukasz Иван')));
  times.qpdf.push(await time(overlay));
}
rmSync(folder, { recursive: true });

const qpdf = median(times.qpdf);
console.log(
  `${book.pages} pages, ${Math.round(book.bytes.length / 1024)} kB; set in ${median(setTimes).toFixed(0)} ms (warm, ${input.resolved.steps.length} steps)`,
);
for (const [name, values] of Object.entries(times))
  console.log(
    `${name.padEnd(6)} median ${median(values).toFixed(1)} ms, ${(median(values) / qpdf).toFixed(2)} of qpdf --overlay`,
  );
