import type { Faces } from './faces.ts';
import { breakLines, type Inline } from './inline.ts';
import { createPen, type Pen } from './pen.ts';
import { INK, PENCIL, type Sheet } from './sheet.ts';
import type { PDFDocument, PDFImage } from 'pdf-lib';

/** Running text: size and leading in points. */
export const PROSE = { size: 10.5, leading: 15.5 } as const;
export const SMALL = { size: 8.6, leading: 12 } as const;

/** A heading's place in the book, for the outline that a reader shows beside the pages. */
export interface Bookmark {
  title: string;
  level: 1 | 2;
  page: number;
  /** From the top edge, in points. */
  y: number;
}

/** The pages of a book being filled from top to bottom. */
export interface Flow {
  readonly sheet: Sheet;
  readonly faces: Faces;
  readonly pens: Pen[];
  readonly bookmarks: Bookmark[];
  readonly images: ReadonlyMap<string, PDFImage>;
  pen: Pen;
  /** Where the next thing starts, from the top edge. */
  y: number;
}

/** Begins a book at the top of its first page. */
export function startFlow(
  pdf: PDFDocument,
  sheet: Sheet,
  faces: Faces,
  images: ReadonlyMap<string, PDFImage>,
): Flow & { pdf: PDFDocument } {
  const pen = createPen(pdf.addPage([sheet.width, sheet.height]), faces);
  return { pdf, sheet, faces, images, pens: [pen], bookmarks: [], pen, y: sheet.top };
}

/** Begins the next page. */
export function turnPage(flow: Flow): void {
  const { sheet, faces } = flow;
  flow.pen = createPen(flow.pen.page.doc.addPage([sheet.width, sheet.height]), faces);
  flow.pens.push(flow.pen);
  flow.y = sheet.top;
}

/** True while nothing stands on the page. */
export function isPageFresh(flow: Flow): boolean {
  return flow.y <= flow.sheet.top + 0.01;
}

/** Turns the page unless `height` points are left on it. True when it was turned. */
export function needRoom(flow: Flow, height: number): boolean {
  if (flow.y + height <= flow.sheet.bottom || isPageFresh(flow)) return false;
  turnPage(flow);
  return true;
}

/** Leaves room before the next thing, except at the top of a page. */
export function skip(flow: Flow, height: number): void {
  if (!isPageFresh(flow)) flow.y += height;
}

interface ParagraphStyle {
  size: number;
  leading: number;
}

/** Sets a paragraph. A page never ends with its first line alone and never begins with its last alone. */
export function setParagraph(
  flow: Flow,
  inlines: readonly Inline[],
  style: ParagraphStyle = PROSE,
  at: { x?: number; right?: number; lead?: (pen: Pen, baseline: number) => void } = {},
): void {
  const x = at.x ?? flow.sheet.text;
  const lines = breakLines(inlines, (at.right ?? flow.sheet.right) - x, flow.faces.measure);
  let index = 0;
  while (index < lines.length) {
    const left = lines.length - index;
    const room = Math.max(0, Math.floor((flow.sheet.bottom - flow.y + 0.01) / style.leading));
    let count = Math.min(left, room);
    if (count < left) {
      if (left - count === 1) count -= 1;
      if (count < 2 && !isPageFresh(flow)) count = 0;
    }
    if (count <= 0 && isPageFresh(flow)) count = left;
    for (const line of lines.slice(index, index + count)) {
      const baseline = flow.y + style.leading - (style.leading - style.size * 0.72) / 2;
      if (line === lines[0]) at.lead?.(flow.pen, baseline);
      line.draw(flow.pen, x, baseline);
      flow.y += style.leading;
    }
    index += count;
    if (index < lines.length) turnPage(flow);
  }
}

/**
 * A numbered section's heading over a rule across the sheet. `follow` is the least height of what must stand under it on
 * the same page, so that no heading is left alone.
 */
export function setSection(flow: Flow, number: string, title: string, follow = 60): void {
  skip(flow, 22);
  needRoom(flow, 34 + follow);
  const { sheet, pen } = flow;
  pen.line(sheet.left, flow.y, sheet.right, flow.y, 1.4, INK);
  pen.text(number, sheet.left, flow.y + 21, { face: 'mono', size: 12, color: PENCIL });
  pen.text(title, sheet.text, flow.y + 21.5, { face: 'semibold', size: 17 });
  flow.bookmarks.push({ title, level: 1, page: flow.pens.length - 1, y: flow.y });
  flow.y += 36;
}

/** A heading inside a section. */
export function setSubheading(flow: Flow, title: string, follow = 34): void {
  skip(flow, 10);
  const style = { face: 'semibold', size: 12.5 } as const;
  const lines = breakLines(
    [{ kind: 'text', text: title, style }],
    flow.sheet.right - flow.sheet.text,
    flow.faces.measure,
  );
  needRoom(flow, lines.length * 17 + follow);
  for (const line of lines) {
    line.draw(flow.pen, flow.sheet.text, flow.y + 13);
    flow.y += 17;
  }
  flow.y += 3;
}

/** Words of one style. */
export function words(
  text: string,
  style: Partial<{ face: 'regular' | 'italic' | 'semibold' | 'mono'; size: number; color: string }> = {},
): Inline {
  return {
    kind: 'text',
    text,
    style: {
      face: style.face ?? 'regular',
      size: style.size ?? PROSE.size,
      ...(style.color && { color: style.color }),
    },
  };
}
