import type { Pen } from './pen.ts';
import { INK } from './sheet.ts';

/** Draws a part's mark, its letter in a circle, with the circle's left edge at x. Gives the width it took. */
export function drawPartMark(pen: Pen, mark: string, x: number, baseline: number, size = 9): number {
  const radius = Math.max(size * 0.82, pen.measure('monoBold', mark, size * 0.85) / 2 + 2.4);
  const width = pen.measure('monoBold', mark, size * 0.85);
  pen.circle(x + radius, baseline - size * 0.32, radius, 0.6, INK);
  pen.text(mark, x + radius - width / 2, baseline, { face: 'monoBold', size: size * 0.85 });
  return radius * 2;
}
