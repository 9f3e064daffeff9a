import { breakLines, type Inline, type Line } from './inline.ts';
import { needRoom, turnPage, type Flow } from './flow.ts';
import type { Pen } from './pen.ts';
import { INK, PENCIL, RULE } from './sheet.ts';

/** A column: its heading, its width in points, and which way its text stands. */
export interface Column {
  heading: string;
  width: number;
  align?: 'left' | 'right';
}

/** A cell: running text that is broken to the column, or a drawing on the row's first baseline. */
export type Cell = readonly Inline[] | { draw: (pen: Pen, x: number, baseline: number) => void };

const SIZE = 9.5;
const LEADING = 13.5;
const PADDING = 4;

function setHeading(flow: Flow, columns: readonly Column[], x: number): void {
  const { pen } = flow;
  const right = x + columns.reduce((sum, column) => sum + column.width, 0);
  let at = x;
  for (const { heading, width, align } of columns) {
    const style = { face: 'regular', size: 7.5, color: PENCIL } as const;
    if (align === 'right') pen.textTo(heading, at + width - 6, flow.y + 10, style);
    else pen.text(heading, at, flow.y + 10, style);
    at += width;
  }
  flow.y += 14;
  pen.line(x, flow.y, right, flow.y, 0.7, INK);
}

/** Sets a table. A row is never parted; the heading stands again on every page that the table reaches. */
export function setTable(
  flow: Flow,
  columns: readonly Column[],
  rows: readonly (readonly Cell[])[],
  x: number = flow.sheet.left,
): void {
  if (rows.length === 0) return;
  const right = x + columns.reduce((sum, column) => sum + column.width, 0);
  const { measure } = flow.faces;
  rows.forEach((row, rowIndex) => {
    const cells: (Line[] | undefined)[] = row.map((cell, index) =>
      'draw' in cell ? undefined : breakLines(cell, (columns[index]?.width ?? 0) - 6, measure),
    );
    const count = Math.max(1, ...cells.map((lines) => lines?.length ?? 1));
    const height = count * LEADING + 2 * PADDING;
    if (rowIndex === 0) {
      needRoom(flow, height + 14);
      setHeading(flow, columns, x);
    } else if (flow.y + height > flow.sheet.bottom) {
      turnPage(flow);
      setHeading(flow, columns, x);
    }
    const { pen } = flow;
    let at = x;
    row.forEach((cell, index) => {
      const column = columns[index];
      if (!column) return;
      const baseline = flow.y + PADDING + SIZE;
      if ('draw' in cell) cell.draw(pen, at, baseline);
      else
        cells[index]?.forEach((line, lineIndex) => {
          const start = column.align === 'right' ? at + column.width - 6 - line.width : at;
          line.draw(pen, start, baseline + lineIndex * LEADING);
        });
      at += column.width;
    });
    flow.y += height;
    pen.line(x, flow.y, right, flow.y, 0.4, RULE);
  });
}

/** A box to tick with a pencil. */
export const TICK: Cell = { draw: (pen, x, baseline) => pen.box(x, baseline - 8, 8.5, 8.5, 0.6, INK) };
