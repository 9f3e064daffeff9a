import type { FaceName } from './faces.ts';
import type { Pen } from './pen.ts';
import { INK } from './sheet.ts';

interface Segment {
  text: string;
  face: FaceName;
  /** Width in ems where the face's own is not taken. */
  ems?: number;
}

/** The tabular face gives a point the width of a figure, which tears a decimal apart. */
const POINT_EMS = 0.3;
const SPACE_EMS = 0.22;

function segmentsOf(text: string): Segment[] {
  return [...text.matchAll(/[.,]|\s+|mm\b|[^.,\sm]+|m/g)].map(([piece]): Segment => {
    if (piece === '.' || piece === ',') return { text: piece, face: 'mono', ems: POINT_EMS };
    if (piece.trim() === '') return { text: ' ', face: 'mono', ems: SPACE_EMS };
    // The unit is a word, so it is set in the face of words.
    return { text: piece, face: piece === 'mm' ? 'regular' : 'mono' };
  });
}

const widthOf = (measure: Pen['measure'], segment: Segment, size: number): number =>
  segment.ems === undefined ? measure(segment.face, segment.text, size) : segment.ems * size;

/** Width of figures in points: `1066.8 mm`, `€24.00`, `17`. */
export function numeralsWidth(measure: Pen['measure'], text: string, size: number): number {
  return segmentsOf(text).reduce((sum, segment) => sum + widthOf(measure, segment, size), 0);
}

/** Draws figures with their left edge at x. Copied, they read as they were given. */
export function drawNumerals(
  pen: Pen,
  text: string,
  x: number,
  baseline: number,
  style: { size: number; color?: string },
): void {
  const segments = segmentsOf(text);
  const draw = (): void => {
    let at = x;
    for (const segment of segments) {
      if (segment.text !== ' ')
        pen.text(segment.text, at, baseline, {
          face: segment.face,
          size: style.size,
          color: style.color ?? INK,
        });
      at += widthOf(pen.measure, segment, style.size);
    }
  };
  if (segments.length > 1) pen.readAs(text, draw);
  else draw();
}
