import { PDFDocument, PDFOperator, PDFOperatorNames as Op, type PDFImage } from 'pdf-lib';

import { setCautions, setLoads, setTools } from './before-you-start.ts';
import { cleanText } from './clean-text.ts';
import { setFinishOrder, setHistory } from './closing.ts';
import { COPY_SLOT, makeCopySlot } from './copy-slot.ts';
import { setCover } from './cover.ts';
import { loadFaces } from './faces.ts';
import { needRoom, setSection, startFlow, turnPage, type Flow } from './flow.ts';
import { writeOutline } from './outline.ts';
import type { ResolvedProse } from '#lib/plan/types.ts';
import { setPartsTable } from './parts-table.ts';
import { setProse } from './prose-blocks.ts';
import { sheetOf } from './sheet.ts';
import { setShoppingList } from './shopping-list.ts';
import { setSteps } from './steps.ts';
import { drawTitleBlock } from './title-block.ts';
import type { BookInput, BookPicture } from './types.ts';

/** Every printable ASCII character and the signs that the book itself sets. */
const OWN_CHARACTERS = `${Array.from({ length: 95 }, (_, index) => String.fromCharCode(32 + index)).join('')}−×–…’“”°€£¥²³`;

async function embedPictures(
  pdf: PDFDocument,
  pictures: ReadonlyMap<string, BookPicture>,
): Promise<Map<string, PDFImage>> {
  const images = new Map<string, PDFImage>();
  for (const [name, { bytes, type }] of pictures) {
    try {
      if (type === 'image/jpeg') images.set(name, await pdf.embedJpg(bytes));
      else if (type === 'image/png') images.set(name, await pdf.embedPng(bytes));
    } catch {
      // A damaged picture must not cost its buyer the whole book: its description stands in its place.
    }
  }
  return images;
}

/** A sheet of its own begins where the page is more than half full, so that lists can be pinned up by themselves. */
function beginSheet(flow: Flow): void {
  if (flow.y > flow.sheet.top + (flow.sheet.bottom - flow.sheet.top) * 0.4) turnPage(flow);
}

/** The pictures that the plan calls for; others stay out of the file. */
function usedPictures(input: BookInput): Map<string, BookPicture> {
  const text = JSON.stringify([input.front.cover, input.resolved.body, input.resolved.steps]);
  return new Map([...input.pictures].filter(([name]) => text.includes(JSON.stringify(name))));
}

/** Cautions of the whole plan stand together in a section of their own, so the story need not say them too. */
function withoutCautions(prose: ResolvedProse): ResolvedProse {
  return prose
    .filter((node) => node.node !== 'caution')
    .map((node) =>
      node.node === 'paragraph' ? { ...node, children: withoutCautions(node.children) } : node,
    );
}

/** Whether a node of the story leaves a trace on the page: steps and tables are set elsewhere. */
function isShown(node: ResolvedProse[number]): boolean {
  if (node.node === 'paragraph') return node.children.some(isShown);
  if (node.node === 'text') return node.text.trim() !== '';
  return node.node !== 'step' && node.node !== 'place' && node.node !== 'break';
}

function setContent(flow: Flow, input: BookInput): void {
  const { resolved } = input;
  let count = 0;
  const number = () => String((count += 1));
  setCover(flow, input);
  turnPage(flow);
  const story = withoutCautions(resolved.body);
  if (story.some(isShown)) {
    setSection(flow, number(), 'About the piece');
    setProse(flow, story, resolved.units);
  }
  setSection(flow, number(), 'Before you start', 90);
  setCautions(flow, input);
  setTools(flow, input);
  setLoads(flow, input);
  beginSheet(flow);
  setShoppingList(flow, number(), resolved);
  beginSheet(flow);
  setPartsTable(flow, number(), resolved);
  beginSheet(flow);
  setSteps(flow, number(), resolved);
  setFinishOrder(flow, number(), input);
  setHistory(flow, number(), input);
  needRoom(flow, 0);
}

/**
 * Sets a resolved plan as the pages of a book: real text, embedded fonts, an outline, and on every sheet a title block with the
 * fields of ISO 7200 and a row that `stampBook` fills for a copy. The same input gives the same bytes.
 *
 * @throws when a font file is damaged or missing; a damaged picture is replaced by its description
 */
export async function setBook(input: BookInput): Promise<{ bytes: Uint8Array; pages: number }> {
  const { resolved, front, revision } = input;
  const tell = input.onProgress ?? (() => undefined);
  const sheet = sheetOf(input.paper);
  const pdf = await PDFDocument.create();
  tell(0.05, 'reading the fonts');
  const text =
    OWN_CHARACTERS +
    JSON.stringify([resolved, front, input.imprint, input.planNumber, input.history]).normalize('NFC');
  const faces = await loadFaces(pdf, input.fonts, text);
  tell(0.2, 'reading the pictures');
  const images = await embedPictures(pdf, usedPictures(input));
  tell(0.4, 'setting the pages');
  const flow = startFlow(pdf, sheet, faces, images);
  setContent(flow, input);

  const slotWidth = sheet.frame.right - sheet.frame.left;
  const slot = makeCopySlot(pdf, Math.round(slotWidth * 100) / 100, Math.round(sheet.blockRow * 100) / 100);
  flow.pens.forEach((pen, index) => {
    drawTitleBlock(pen, sheet, {
      title: cleanText(front.title),
      legalOwner: cleanText(input.imprint),
      planNumber: `${cleanText(input.planNumber)}-${cleanText(revision.letter)}`,
      dateOfIssue: revision.date,
      creator: cleanText(input.imprint),
      approval: cleanText(input.imprint),
      documentType: 'Build plan',
      revision: cleanText(revision.letter),
      units: resolved.units === 'mm' ? 'mm' : 'inches',
      sheet: index + 1,
      sheets: flow.pens.length,
    });
    pen.page.node.setXObject(COPY_SLOT, slot);
    pen.page.pushOperators(
      PDFOperator.of(Op.PushGraphicsState),
      PDFOperator.of(Op.ConcatTransformationMatrix, [
        '1',
        '0',
        '0',
        '1',
        String(Math.round(sheet.frame.left * 100) / 100),
        String(Math.round((sheet.height - sheet.frame.bottom) * 100) / 100),
      ]),
      PDFOperator.of(Op.DrawObject, [COPY_SLOT]),
      PDFOperator.of(Op.PopGraphicsState),
    );
  });
  writeOutline(pdf, flow.bookmarks);
  writeMetadata(pdf, input);
  tell(0.8, 'writing the file');
  // Without object streams the stamp need not unpack them again.
  const bytes = await pdf.save({ useObjectStreams: false });
  tell(1, 'done');
  return { bytes, pages: flow.pens.length };
}

function writeMetadata(pdf: PDFDocument, input: BookInput): void {
  const issued = new Date(`${input.revision.date}T00:00:00Z`);
  pdf.setTitle(cleanText(input.front.title), { showInWindowTitleBar: true });
  pdf.setAuthor(cleanText(input.imprint));
  pdf.setSubject(`Build plan, revision ${cleanText(input.revision.letter)}`);
  pdf.setCreator('Benchleaf');
  pdf.setProducer('Benchleaf');
  pdf.setLanguage('en-GB');
  if (!Number.isNaN(issued.getTime())) {
    pdf.setCreationDate(issued);
    pdf.setModificationDate(issued);
  }
}
