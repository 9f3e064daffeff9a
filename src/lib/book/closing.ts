import { formatNumber } from '#lib/units/format-measure.ts';

import { cleanText } from './clean-text.ts';
import { setParagraph, setSection, setSubheading, skip, words, type Flow } from './flow.ts';
import { unitWord } from './shopping-list.ts';
import { setTable, type Cell } from './table.ts';
import type { BookInput } from './types.ts';

const say = (text: string) => words(cleanText(text), { size: 9.5 });

/** Sets the order of the finish: each coat in the order of the plan, and the step that says how. */
export function setFinishOrder(flow: Flow, number: string, input: BookInput): void {
  const finishes = input.resolved.consumables.filter((each) => each.for === 'surface');
  if (finishes.length === 0) return;
  const steps = input.resolved.steps.filter((step) =>
    /finish|varnish|oil|lacquer|paint|wax|shellac/i.test(step.title),
  );
  setSection(flow, number, 'Finish', 80);
  const wide = flow.sheet.right - flow.sheet.text;
  setTable(
    flow,
    [
      { heading: 'Order', width: 40 },
      { heading: 'Finish', width: wide * 0.5 },
      { heading: 'Coats', width: wide * 0.16, align: 'right' },
      { heading: 'Altogether', width: wide * 0.34 - 40, align: 'right' },
    ],
    finishes.map((item, index): Cell[] => [
      [say(`${index + 1}`)],
      [say(item.name)],
      [say(formatNumber(item.coats))],
      [say(`${formatNumber(item.amount, 2)} ${unitWord(item.unit, item.amount)}`)],
    ]),
    flow.sheet.text,
  );
  skip(flow, 6);
  if (steps.length > 0)
    setParagraph(flow, [
      words(
        `How and when: ${steps.map((step) => `step ${step.number}, ${cleanText(step.title)}`).join('; ')}.`,
      ),
    ]);
}

/** Sets the published revisions, and the terms on which a copy is held. */
export function setHistory(flow: Flow, number: string, input: BookInput): void {
  setSection(flow, number, 'Revisions', 90);
  const wide = flow.sheet.right - flow.sheet.text;
  const known = input.history.some((each) => each.letter === input.revision.letter);
  const rows = known ? input.history : [...input.history, { ...input.revision, notes: '' }];
  setTable(
    flow,
    [
      { heading: 'Revision', width: 56 },
      { heading: 'Date of issue', width: 84 },
      { heading: 'What changed', width: wide - 140 },
    ],
    rows.map((revision): Cell[] => [
      [say(revision.letter)],
      [say(revision.date)],
      [say(revision.notes || (revision === rows[0] ? 'First issue' : ''))],
    ]),
    flow.sheet.text,
  );
  setSubheading(flow, 'This copy', 34);
  setParagraph(flow, [
    words(
      'This copy belongs to the holder named in the title block, under the licence it was bought with. It may be printed for the bench; it may not be passed on, posted or sold.',
    ),
  ]);
}
