import type { BookPaper } from './types.ts';

/** Points in a millimetre; PDF measures in points of 1/72 in. */
export const MM = 72 / 25.4;

/**
 * The drawing sheet that every page is. All in points, y from the top edge down. The frame has the filing margin of
 * ISO 5457 on the left (20 mm) and 10 mm on the other sides; the title block stands at its foot.
 */
export interface Sheet {
  width: number;
  height: number;
  frame: { left: number; right: number; top: number; bottom: number };
  /** Upper edge of the title block, and the height of each of its three rows. */
  blockTop: number;
  blockRow: number;
  /** Where content may stand. */
  left: number;
  right: number;
  top: number;
  bottom: number;
  /** Left edge of the text column; left of it is the margin for numbers and marks. */
  text: number;
}

/** ISO 216 A4, and US Letter of ASME Y14.1, in points. */
const PAPERS: Readonly<Record<BookPaper, readonly [number, number]>> = {
  a4: [595.276, 841.89],
  letter: [612, 792],
};

/** Inks of the house, light on paper. */
export const INK = '#1C2326';
export const PENCIL = '#566067';
export const RULE = '#C9D0CE';
export const BLUE = '#0F5C8C';
export const RED = '#B3261E';

/** The sheet for a paper. */
export function sheetOf(paper: BookPaper): Sheet {
  const [width, height] = PAPERS[paper];
  const frame = { left: 20 * MM, right: width - 10 * MM, top: 10 * MM, bottom: height - 10 * MM };
  const blockRow = 8.6 * MM;
  const blockTop = frame.bottom - 3 * blockRow;
  return {
    width,
    height,
    frame,
    blockTop,
    blockRow,
    left: frame.left + 8 * MM,
    right: frame.right - 8 * MM,
    top: frame.top + 10 * MM,
    bottom: blockTop - 6 * MM,
    text: frame.left + 44 * MM,
  };
}
