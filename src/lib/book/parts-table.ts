import type { ResolvedPart, ResolvedPlan } from '#lib/plan/types.ts';
import { formatAlike, REMAINDER_LEGEND, type FormattedLength } from '#lib/units/format-length.ts';

import { needRoom, setParagraph, setSection, setSubheading, skip, SMALL, words, type Flow } from './flow.ts';
import { breakLines, drawAligned, numerals } from './inline.ts';
import { drawPartMark } from './part-mark.ts';
import { PENCIL } from './sheet.ts';
import { setTable, TICK, type Cell, type Column } from './table.ts';
import { describeWorkings } from './shape-words.ts';

const FIGURE = 10.5;
const GRAIN = { length: 'along', width: 'across', none: 'any way' } as const;

function lengthCell(length: FormattedLength | undefined, align: number): Cell {
  return { draw: (pen, x, baseline) => length && drawAligned(pen, length, x + align, baseline, FIGURE) };
}

/** Sets the parts table: every part with its finished length, width and thickness, and a box to tick when it is cut. */
export function setPartsTable(flow: Flow, number: string, resolved: ResolvedPlan): void {
  const { units, parts } = resolved;
  setSection(flow, number, 'Parts', 110);
  const unit = units === 'mm' ? 'mm' : 'inches';
  setParagraph(flow, [
    words(
      `Finished sizes in ${unit}: length, width, thickness, in that order. The length is not always the longer side. Cut one part, try it, then cut the rest.`,
    ),
  ]);
  skip(flow, 6);

  const dimensions = units === 'mm' ? { width: 48, align: 28 } : { width: 56, align: 26 };
  const total = flow.sheet.right - flow.sheet.left;
  const fixed = 18 + 30 + 26 + 3 * dimensions.width + 44;
  const name = (total - fixed) * 0.47;
  const columns: Column[] = [
    { heading: '', width: 18 },
    { heading: 'Mark', width: 30 },
    { heading: 'Part', width: name },
    { heading: 'Cut', width: 26, align: 'right' },
    { heading: 'Length', width: dimensions.width },
    { heading: 'Width', width: dimensions.width },
    { heading: 'Thickness', width: dimensions.width },
    { heading: 'Grain', width: 44 },
    { heading: 'Material', width: total - fixed - name },
  ];
  // Parts that must match are printed alike, so all sizes are read together.
  const shown = formatAlike(
    parts.flatMap((part) => [part.length, part.width, part.thickness]),
    { units },
  );
  const labels = new Map(resolved.materials.map((material) => [material.name, material.label]));
  const text = (content: string) => [words(content, { size: 9.5 })];
  setTable(
    flow,
    columns,
    parts.map((part, index): Cell[] => [
      TICK,
      { draw: (pen, x, baseline) => void drawPartMark(pen, part.mark, x, baseline) },
      text(part.name),
      [numerals(String(part.qty), FIGURE)],
      lengthCell(shown[index * 3], dimensions.align),
      lengthCell(shown[index * 3 + 1], dimensions.align),
      lengthCell(shown[index * 3 + 2], dimensions.align),
      text(GRAIN[part.grain]),
      text(labels.get(part.material) ?? part.material),
    ]),
  );
  if (shown.some((length) => length.marked)) {
    skip(flow, 6);
    setParagraph(flow, [words(REMAINDER_LEGEND, { size: SMALL.size, color: PENCIL })], SMALL, {
      x: flow.sheet.left,
    });
  }
  setWorkings(flow, resolved);
}

/** What is cut into each part, under the table: grooves, notches, holes, tapers. */
function setWorkings(flow: Flow, resolved: ResolvedPlan): void {
  const worked = resolved.parts.filter(
    (part) => describeWorkings(part, resolved.units, PROSE_SIZE).length > 0,
  );
  if (worked.length === 0) return;
  skip(flow, 8);
  setSubheading(flow, 'Workings', 60);
  setParagraph(flow, [
    words(
      'Each part lies face up, its length running left to right. Distances along are from its left end, distances up from its bottom edge.',
    ),
  ]);
  for (const part of worked) setPartWorkings(flow, part, resolved);
}

const PROSE_SIZE = 10;
const LEADING = 15;

function setPartWorkings(flow: Flow, part: ResolvedPart, resolved: ResolvedPlan): void {
  const { sheet, faces } = flow;
  const workings = describeWorkings(part, resolved.units, PROSE_SIZE);
  const indent = 84;
  const first = breakLines(workings[0] ?? [], sheet.right - sheet.text - 12, faces.measure).length;
  const name = breakLines([words(part.name, { size: 9.5 })], indent - 10, faces.measure);
  skip(flow, 7);
  needRoom(flow, Math.max(2, first, name.length) * LEADING);
  const baseline = flow.y + 11.5;
  const width = drawPartMark(flow.pen, part.mark, sheet.left, baseline);
  name.forEach((line, index) =>
    line.draw(flow.pen, sheet.left + Math.max(22, width + 5), baseline + index * 12),
  );
  const top = flow.y;
  const pages = flow.pens.length;
  for (const working of workings)
    setParagraph(
      flow,
      working,
      { size: PROSE_SIZE, leading: LEADING },
      {
        x: sheet.text + 12,
        lead: (pen, line) =>
          pen.text('–', sheet.text, line, { face: 'regular', size: PROSE_SIZE, color: PENCIL }),
      },
    );
  if (flow.pens.length === pages) flow.y = Math.max(flow.y, top + name.length * 12 + 4);
}
