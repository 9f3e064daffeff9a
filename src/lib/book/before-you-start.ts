import { formatLength } from '#lib/units/format-length.ts';
import { formatMass } from '#lib/units/format-measure.ts';

import { setCaution } from './cautions.ts';
import { cleanText } from './clean-text.ts';
import { setParagraph, setSubheading, skip, words, type Flow } from './flow.ts';
import { lengthInline, type Inline } from './inline.ts';
import { drawPartMark } from './part-mark.ts';
import { BLUE, PENCIL } from './sheet.ts';
import { setTable, TICK, type Cell } from './table.ts';
import type { BookInput } from './types.ts';

const SIZE = 9.5;
const say = (text: string, color?: string): Inline =>
  words(cleanText(text), { size: SIZE, ...(color && { color }) });

/** Sets the cautions that apply at this fit; every book says at least that it defers to local rules. */
export function setCautions(flow: Flow, input: BookInput): void {
  // The same caution may stand in the plan and again in a step: it is said once here.
  const seen = new Set<string>();
  for (const caution of input.resolved.cautions) {
    const key = `${caution.about}\n${caution.text}`;
    if (seen.has(key)) continue;
    setCaution(flow, caution, seen.has(caution.about));
    seen.add(key).add(caution.about);
  }
  setParagraph(flow, [
    words(
      'Read the whole plan before you cut. You are responsible for your own work: where local rules, a standard or a licensed trade says otherwise, follow that and not this plan.',
    ),
  ]);
}

/** Sets the tools to have at hand, to be ticked off. A sponsored link is said to be one. */
export function setTools(flow: Flow, input: BookInput): void {
  const named = new Set(input.resolved.tools.map((tool) => tool.name.toLowerCase()));
  const rows: Cell[][] = [
    ...input.front.tools
      .filter((tool) => !named.has(tool.toLowerCase()))
      .map((tool): Cell[] => [TICK, [say(tool)], []]),
    ...input.resolved.tools.map((tool): Cell[] => {
      const note = [tool.note, tool.sponsored ? 'sponsored link: it earns the author money' : '']
        .filter(Boolean)
        .join('; ');
      const name: Inline[] = tool.link
        ? [
            {
              kind: 'text',
              text: cleanText(tool.name),
              style: { face: 'regular', size: SIZE, color: BLUE },
              href: tool.link,
            },
          ]
        : [say(tool.name)];
      return [TICK, name, [say(note, PENCIL)]];
    }),
  ];
  if (rows.length === 0) return;
  setSubheading(flow, 'Tools', 50);
  const wide = flow.sheet.right - flow.sheet.text;
  setTable(
    flow,
    [
      { heading: '', width: 18 },
      { heading: 'Tool', width: wide * 0.4 },
      { heading: 'For', width: wide * 0.6 - 18 },
    ],
    rows,
    flow.sheet.text,
  );
  skip(flow, 8);
}

/** Sets the shelves that carry load with their computed sag: guidance, and said to be so. */
export function setLoads(flow: Flow, input: BookInput): void {
  const { shelves, units } = input.resolved;
  if (shelves.length === 0) return;
  setSubheading(flow, 'Loads and sag', 60);
  const wide = flow.sheet.right - flow.sheet.text;
  const column = wide / 5;
  setTable(
    flow,
    [
      { heading: 'Part', width: column },
      { heading: 'Clear span', width: column },
      { heading: 'Load', width: column },
      { heading: 'Sag', width: column },
      { heading: 'Usual limit', width: column },
    ],
    shelves.map((shelf): Cell[] => {
      const holds = shelf.limits.every((limit) => limit.holds);
      return [
        { draw: (pen, x, baseline) => void drawPartMark(pen, shelf.part, x, baseline) },
        [lengthInline(shelf.span, units, SIZE)],
        [say(`${formatMass(shelf.loadKg, units)}${shelf.at === 'middle' ? ' in the middle' : ''}`)],
        [{ kind: 'length', length: formatLength(shelf.sag, { units, denominator: 64 }), size: SIZE * 0.9 }],
        [say(holds ? 'holds' : 'exceeded: stiffen it or carry less')],
      ];
    }),
    flow.sheet.text,
  );
  skip(flow, 4);
  const guidance = shelves[0]?.guidance ?? '';
  if (guidance)
    setParagraph(flow, [words(cleanText(guidance), { size: 8.6, color: PENCIL })], {
      size: 8.6,
      leading: 12,
    });
  skip(flow, 6);
}
