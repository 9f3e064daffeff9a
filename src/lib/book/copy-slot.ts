import { PDFDict, PDFName, PDFStream, type PDFDocument, type PDFRef } from 'pdf-lib';

/** Name of the slot in a page's resources; every page draws it in the title block's row for the copy. */
export const COPY_SLOT = PDFName.of('CopySlot');

/** Makes the empty form that every page of an unstamped book draws: one object, so that stamping replaces one object. */
export function makeCopySlot(pdf: PDFDocument, width: number, height: number): PDFRef {
  const { context } = pdf;
  return context.register(
    context.stream('', { Type: 'XObject', Subtype: 'Form', BBox: [0, 0, width, height], Resources: {} }),
  );
}

/**
 * Finds the slot of a book: the same object on every page.
 * @throws RangeError when a page lacks it, so that no page is ever sent out unmarked
 */
export function findCopySlot(pdf: PDFDocument): { ref: PDFRef; width: number; height: number } {
  const refs = pdf.getPages().map((page) => {
    const forms = page.node.Resources()?.lookupMaybe(PDFName.of('XObject'), PDFDict);
    return forms?.get(COPY_SLOT);
  });
  const [ref] = refs;
  if (!ref || refs.some((each) => each !== ref))
    throw new RangeError('a page of the book has no place for the stamp');
  const stream = pdf.context.lookup(ref, PDFStream);
  const box = stream.dict.lookup(PDFName.of('BBox'));
  const numbers = /\[\s*0 0 ([\d.]+) ([\d.]+)\s*\]/.exec(box?.toString() ?? '');
  if (!numbers) throw new RangeError('the place for the stamp has no size');
  return { ref: ref as PDFRef, width: Number(numbers[1]), height: Number(numbers[2]) };
}
