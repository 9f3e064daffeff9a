import { formatMoney } from '#lib/money/format-money.ts';
import type { ResolvedMaterial, ResolvedPlan, WrittenPrice } from '#lib/plan/types.ts';
import { formatLength } from '#lib/units/format-length.ts';
import { formatArea, formatNumber, formatRun, formatVolume } from '#lib/units/format-measure.ts';

import { cleanText } from './clean-text.ts';
import { setParagraph, setSection, setSubheading, skip, SMALL, words, type Flow } from './flow.ts';
import { lengthInline, numerals, type Inline } from './inline.ts';
import { BLUE, PENCIL } from './sheet.ts';
import { setTable, TICK, type Cell, type Column } from './table.ts';

const SIZE = 9.5;
const say = (text: string, color?: string): Inline =>
  words(cleanText(text), { size: SIZE, ...(color && { color }) });
const figure = (text: string): Inline => numerals(text, SIZE * 0.92);

function money(price: WrittenPrice | undefined, minor: number | undefined): Cell {
  return price && minor !== undefined ? [figure(formatMoney(minor, price.currency))] : [];
}

function stockWords(material: ResolvedMaterial, units: ResolvedPlan['units']): Inline[] {
  const print = (nm: number) => formatLength(nm, { units }).text;
  const size = material.sizes.map((each) => each.map(print).join(' × ')).join(', or ');
  return [
    ...(material.kind === 'bar' && material.width !== undefined
      ? [lengthInline(material.width, units, SIZE), say(' by ')]
      : []),
    lengthInline(material.thickness, units, SIZE),
    say(' thick'),
    ...(size ? [say(`; sold as ${size}`, PENCIL)] : []),
  ];
}

function quantityOf(material: ResolvedMaterial, units: ResolvedPlan['units']): string {
  if (material.kind === 'sheet')
    return `${formatArea(material.areaM2, units)}${material.leastStock > 0 ? `, at least ${material.leastStock} sheet${material.leastStock > 1 ? 's' : ''}` : ''}`;
  if (material.kind === 'bar')
    return `${formatRun(material.lengthM, units)}${material.leastStock > 0 ? `, at least ${material.leastStock}` : ''}`;
  return units === 'in'
    ? `${formatNumber(material.boardFeet, 1)} board feet`
    : formatVolume(material.volumeM3, units);
}

/** A litre is spelled out: its sign is easily read as a one. */
export function unitWord(unit: string, amount: number): string {
  if (unit !== 'l') return unit;
  return amount === 1 ? 'litre' : 'litres';
}

/** Sets what to buy: stock, hardware and consumables, with boxes to tick and the written prices. */
export function setShoppingList(flow: Flow, number: string, resolved: ResolvedPlan): void {
  const { units } = resolved;
  const wide = flow.sheet.right - flow.sheet.left;
  const columns = (second: string): Column[] => [
    { heading: '', width: 18 },
    { heading: 'What', width: wide * 0.31 },
    { heading: second, width: wide * 0.33 },
    { heading: 'How much', width: wide * 0.22 - 18 },
    { heading: 'About', width: wide * 0.14, align: 'right' },
  ];
  setSection(flow, number, 'Shopping list', 110);
  for (const cost of resolved.costs)
    setParagraph(flow, [
      words('Altogether about ', { face: 'semibold' }),
      numerals(formatMoney(cost.minor, cost.currency), 9.6),
      words(' at the prices written in the plan; your dealer’s will differ.'),
    ]);
  if (resolved.materials.length > 0) {
    setSubheading(flow, 'Stock', 50);
    setTable(
      flow,
      columns('Size'),
      resolved.materials
        .filter((material) => material.pieces > 0)
        .map((material): Cell[] => [
          TICK,
          [say(material.label)],
          stockWords(material, units),
          [say(quantityOf(material, units))],
          money(material.price, material.costMinor),
        ]),
    );
    skip(flow, 6);
    setParagraph(
      flow,
      [
        words(
          'The number of sheets and bars is the least by area alone, before saw cuts and grain; boards are counted net. Buy with the usual allowance for waste.',
          { size: SMALL.size, color: PENCIL },
        ),
      ],
      SMALL,
      { x: flow.sheet.left },
    );
  }
  if (resolved.hardware.length > 0) {
    setSubheading(flow, 'Hardware', 50);
    setTable(
      flow,
      columns('Note'),
      resolved.hardware.map((item): Cell[] => [
        TICK,
        item.link
          ? [
              {
                kind: 'text',
                text: cleanText(item.name),
                style: { face: 'regular', size: SIZE, color: BLUE },
                href: item.link,
              },
            ]
          : [say(item.name)],
        [say(item.note ?? '', PENCIL)],
        [
          say(
            `${item.qty}${item.unit ? ` ${item.unit}${item.qty > 1 && item.unit !== 'm' ? 's' : ''}` : ''}${item.pack ? `: ${item.packs} pack${item.packs > 1 ? 's' : ''} of ${item.pack}` : ''}`,
          ),
        ],
        money(item.price, item.costMinor),
      ]),
    );
  }
  if (resolved.consumables.length > 0) {
    setSubheading(flow, 'Glue and finish', 50);
    setTable(
      flow,
      columns('For'),
      resolved.consumables.map((item): Cell[] => [
        TICK,
        [say(item.name)],
        [
          say(
            item.for === 'surface' ? `surfaces, ${item.coats} coat${item.coats > 1 ? 's' : ''}` : 'joints',
            PENCIL,
          ),
        ],
        [say(`${formatNumber(item.amount, 2)} ${unitWord(item.unit, item.amount)}`)],
        money(item.price, item.costMinor),
      ]),
    );
  }
}
