import { PDFHexString, PDFName, type PDFDocument, type PDFRef } from 'pdf-lib';

import { cleanText } from './clean-text.ts';
import type { Bookmark } from './flow.ts';

interface Entry {
  bookmark: Bookmark;
  ref: PDFRef;
  children: Entry[];
}

/** Writes the outline that a reader shows beside the pages: sections, and the steps inside theirs. */
export function writeOutline(pdf: PDFDocument, bookmarks: readonly Bookmark[]): void {
  if (bookmarks.length === 0) return;
  const { context } = pdf;
  const root = context.nextRef();
  const entries: Entry[] = [];
  for (const bookmark of bookmarks) {
    const entry = { bookmark, ref: context.nextRef(), children: [] };
    const parent = entries[entries.length - 1];
    if (bookmark.level === 2 && parent) parent.children.push(entry);
    else entries.push(entry);
  }
  writeSiblings(pdf, entries, root);
  const ends = { First: entries[0]?.ref ?? null, Last: entries[entries.length - 1]?.ref ?? null };
  context.assign(root, context.obj({ Type: 'Outlines', ...ends, Count: entries.length }));
  pdf.catalog.set(PDFName.of('Outlines'), root);
  pdf.catalog.set(PDFName.of('PageMode'), PDFName.of('UseOutlines'));
}

function writeSiblings(pdf: PDFDocument, entries: readonly Entry[], parent: PDFRef): void {
  const { context } = pdf;
  entries.forEach((entry, index) => {
    const page = pdf.getPage(entry.bookmark.page);
    const [first, last] = [entry.children[0], entry.children[entry.children.length - 1]];
    const previous = entries[index - 1];
    const next = entries[index + 1];
    context.assign(
      entry.ref,
      context.obj({
        Title: PDFHexString.fromText(cleanText(entry.bookmark.title)),
        Parent: parent,
        Dest: [page.ref, 'XYZ', null, page.getHeight() - entry.bookmark.y + 8, null],
        ...(previous && { Prev: previous.ref }),
        ...(next && { Next: next.ref }),
        // A negative count keeps the steps folded until they are asked for.
        ...(first && last && { First: first.ref, Last: last.ref, Count: -entry.children.length }),
      }),
    );
    writeSiblings(pdf, entry.children, entry.ref);
  });
}
