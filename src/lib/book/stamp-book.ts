import type { PDFHexString } from 'pdf-lib';
import { PDFDocument, PDFName, PDFOperator, PDFOperatorNames as Op } from 'pdf-lib';

import { cleanText } from './clean-text.ts';
import { findCopySlot } from './copy-slot.ts';
import { loadFaces, type Faces } from './faces.ts';
import { CELL_BASELINE, CELL_PADDING, CELL_SIZE, COPY_CELLS, shorten } from './title-block.ts';
import type { BookFonts } from './types.ts';

/** Whose copy it is. `date` is an ISO 8601 day. */
export interface StampInput {
  book: Uint8Array;
  holderName: string;
  copyNumber: number | string;
  planTitle: string;
  revisionLetter: string;
  date: string;
  fonts: BookFonts;
}

/** No name needs more; the cell holds far fewer. */
const MAX_NAME = 160;

/**
 * A name as it is printed: clean, without outer spaces, and never empty. @param name whatever a person typed
 */
export function printableName(name: string): string {
  return cleanText(name, MAX_NAME).trim() || 'name not given';
}

/**
 * Writes holder, copy number, revision and date into the title block of every page, and into the metadata. The file is
 * written anew, so the unstamped pages are not kept inside it. A name that the faces cannot set is shown by its code points.
 *
 * @throws RangeError when the bytes are not a book of ours; the fonts' errors
 */
export async function stampBook(input: StampInput): Promise<Uint8Array> {
  const pdf = await PDFDocument.load(input.book, { updateMetadata: false });
  const slot = findCopySlot(pdf);
  const name = printableName(input.holderName);
  const texts = [name, String(input.copyNumber), input.revisionLetter, input.date].map((text) =>
    cleanText(text),
  );
  const faces = await loadFaces(pdf, input.fonts, texts.join(' '), ['regular']);
  pdf.context.assign(slot.ref, makeStamp(pdf, faces, texts, slot));
  pdf.setTitle(cleanText(input.planTitle), { showInWindowTitleBar: true });
  pdf.setSubject(`Revision ${cleanText(input.revisionLetter)}, copy ${input.copyNumber}`);
  pdf.setKeywords([`Copy ${input.copyNumber} made for ${name}`]);
  const made = new Date(`${input.date}T00:00:00Z`);
  if (!Number.isNaN(made.getTime())) pdf.setModificationDate(made);
  return pdf.save({ useObjectStreams: false, updateFieldAppearances: false });
}

function makeStamp(
  pdf: PDFDocument,
  faces: Faces,
  texts: readonly string[],
  slot: { width: number; height: number },
) {
  const { context } = pdf;
  const keys = new Map<string, PDFName>();
  const fonts = context.obj({});
  const operators: PDFOperator[] = [];
  let x = 0;
  COPY_CELLS.forEach(({ share }, index) => {
    const width = share * slot.width;
    // Code points in brackets make a short name long, so the text is shortened as it will be printed.
    const text = shorten(texts[index] ?? '', width - 2 * CELL_PADDING, (words) =>
      faces.measure('regular', words, CELL_SIZE),
    );
    operators.push(
      PDFOperator.of(Op.BeginText),
      PDFOperator.of(Op.MoveText, [number(x + CELL_PADDING), number(CELL_BASELINE)]),
    );
    for (const run of faces.split('regular', text)) {
      const key = keys.get(run.font.name + run.font.ref.tag) ?? PDFName.of(`S${keys.size}`);
      keys.set(run.font.name + run.font.ref.tag, key);
      fonts.set(key, run.font.ref);
      const encoded: PDFHexString = run.font.encodeText(run.text);
      operators.push(
        PDFOperator.of(Op.SetFontAndSize, [key, number(CELL_SIZE)]),
        PDFOperator.of(Op.ShowText, [encoded]),
      );
    }
    operators.push(PDFOperator.of(Op.EndText));
    x += width;
  });
  return context.stream(operators.map(String).join('\n'), {
    Type: 'XObject',
    Subtype: 'Form',
    BBox: [0, 0, slot.width, slot.height],
    Resources: { Font: fonts },
  });
}

const number = (value: number) => String(Math.round(value * 100) / 100);
