import type { Pen } from './pen.ts';
import { INK, MM, PENCIL, type Sheet } from './sheet.ts';

/** What the title block says: the fields of ISO 7200:2004, and those of a copy. */
export interface TitleBlock {
  legalOwner: string;
  planNumber: string;
  dateOfIssue: string;
  title: string;
  creator: string;
  approval: string;
  documentType: string;
  revision: string;
  units: string;
  sheet: number;
  sheets: number;
}

/**
 * Cells of the row that is left free for the stamp, with their share of the block's width. The last one, the sheet
 * number, is filled by the book itself.
 */
export const COPY_CELLS = [
  { label: 'Copy made for', share: 0.46 },
  { label: 'Copy number', share: 0.14 },
  { label: 'Revision', share: 0.1 },
  { label: 'Copy made on', share: 0.16 },
] as const;

/** Room between a cell's edge and its text, and the size of its text, in points. */
export const CELL_PADDING = 2 * MM;
export const CELL_SIZE = 9;
/** The baseline of a cell's text over the foot of its row. */
export const CELL_BASELINE = 2.2 * MM;

interface Cell {
  label: string;
  text: string;
  share: number;
  strong?: boolean;
}

function rowsOf(block: TitleBlock): Cell[][] {
  return [
    [
      { label: 'Title', text: block.title, share: 0.56, strong: true },
      { label: 'Legal owner', text: block.legalOwner, share: 0.26 },
      { label: 'Document type', text: block.documentType, share: 0.18 },
    ],
    [
      { label: 'Identification number', text: block.planNumber, share: 0.34 },
      { label: 'Creator', text: block.creator, share: 0.22 },
      { label: 'Approved by', text: block.approval, share: 0.18 },
      { label: 'Date of issue', text: block.dateOfIssue, share: 0.14 },
      { label: 'Units', text: block.units, share: 0.12 },
    ],
    [
      ...COPY_CELLS.map(({ label, share }) => ({ label, share, text: '' })),
      { label: 'Sheet', text: `${block.sheet} / ${block.sheets}`, share: 0.14, strong: true },
    ],
  ];
}

/** Shortens a text with an ellipsis until it is no wider than `maxWidth`. */
export function shorten(text: string, maxWidth: number, measure: (text: string) => number): string {
  if (measure(text) <= maxWidth) return text;
  const characters = [...text];
  // Halving finds the longest fitting start in a few measurements, however long the text is.
  let fits = 0;
  let tooLong = characters.length;
  while (tooLong - fits > 1) {
    const middle = Math.floor((fits + tooLong) / 2);
    if (measure(`${characters.slice(0, middle).join('').trimEnd()}…`) <= maxWidth) fits = middle;
    else tooLong = middle;
  }
  return `${characters.slice(0, fits).join('').trimEnd()}…`;
}

/** Draws the frame and the title block of a sheet. The copy's row keeps its labels only. */
export function drawTitleBlock(pen: Pen, sheet: Sheet, block: TitleBlock): void {
  const { frame, blockTop, blockRow } = sheet;
  const width = frame.right - frame.left;
  pen.box(frame.left, frame.top, width, frame.bottom - frame.top, 0.7, INK);
  pen.line(frame.left, blockTop, frame.right, blockTop, 1.4, INK);
  rowsOf(block).forEach((cells, row) => {
    const top = blockTop + row * blockRow;
    if (row > 0) pen.line(frame.left, top, frame.right, top, 0.5, INK);
    let x = frame.left;
    for (const cell of cells) {
      if (x > frame.left) pen.line(x, top, x, top + blockRow, 0.5, INK);
      const cellWidth = cell.share * width;
      const face = cell.strong ? 'semibold' : 'regular';
      pen.text(cell.label, x + CELL_PADDING, top + 2.9 * MM, { face: 'regular', size: 6, color: PENCIL });
      const text = shorten(cell.text, cellWidth - 2 * CELL_PADDING, (words) =>
        pen.measure(face, words, CELL_SIZE),
      );
      pen.text(text, x + CELL_PADDING, top + blockRow - CELL_BASELINE, { face, size: CELL_SIZE });
      x += cellWidth;
    }
  });
}
