import type { ResolvedPlan, ResolvedStep } from '#lib/plan/types.ts';

import { cleanText } from './clean-text.ts';
import { needRoom, setSection, skip, words, type Flow } from './flow.ts';
import { breakLines } from './inline.ts';
import { drawPartMark } from './part-mark.ts';
import { setProse } from './prose-blocks.ts';
import { PENCIL, RULE } from './sheet.ts';

const TITLE_LEADING = 18;
const MARK_ROW = 20;

/** Sets the steps in the order of the work: the number, parts and time in the margin, the words beside them. */
export function setSteps(flow: Flow, number: string, resolved: ResolvedPlan): void {
  if (resolved.steps.length === 0) return;
  setSection(flow, number, 'Steps', 100);
  resolved.steps.forEach((step, index) => setStep(flow, step, resolved, index > 0));
}

function setStep(flow: Flow, step: ResolvedStep, resolved: ResolvedPlan, isRuled: boolean): void {
  const { sheet, faces } = flow;
  const title = breakLines(
    [words(cleanText(step.title), { face: 'semibold', size: 13 })],
    sheet.right - sheet.text,
    faces.measure,
  );
  const marks = step.parts.filter((mark) => resolved.parts.some((part) => part.mark === mark));
  const perRow = 4;
  const margin = 24 + Math.ceil(marks.length / perRow) * MARK_ROW + (step.minutes ? 16 : 0);
  skip(flow, 8);
  needRoom(flow, Math.max(margin, title.length * TITLE_LEADING + 54) + 12);
  if (isRuled && flow.y > sheet.top) {
    flow.pen.line(sheet.left, flow.y, sheet.right, flow.y, 0.5, RULE);
    flow.y += 9;
  }
  const top = flow.y;
  const page = flow.pens.length - 1;
  flow.bookmarks.push({ title: `${step.number}. ${step.title}`, level: 2, page, y: top });

  const { pen } = flow;
  pen.text(String(step.number), sheet.left, top + 16, { face: 'monoBold', size: 17 });
  let y = top + 38;
  let x = sheet.left;
  marks.forEach((mark, index) => {
    if (index > 0 && index % perRow === 0) {
      y += MARK_ROW;
      x = sheet.left;
    }
    x += drawPartMark(pen, mark, x, y) + 5;
  });
  if (marks.length > 0) y += MARK_ROW;
  if (step.minutes)
    pen.text(`${step.minutes} min`, sheet.left, y, { face: 'regular', size: 8.6, color: PENCIL });

  for (const line of title) {
    line.draw(pen, sheet.text, flow.y + 14);
    flow.y += TITLE_LEADING;
  }
  if (step.tools.length > 0) {
    const tools = breakLines(
      [words(cleanText(step.tools.join(', ')), { face: 'italic', size: 9, color: PENCIL })],
      sheet.right - sheet.text,
      faces.measure,
    );
    for (const line of tools) {
      line.draw(pen, sheet.text, flow.y + 9.5);
      flow.y += 13;
    }
  }
  flow.y += 4;
  setProse(flow, step.body, resolved.units);
  if (flow.pens.length - 1 === page) flow.y = Math.max(flow.y, top + margin);
}
