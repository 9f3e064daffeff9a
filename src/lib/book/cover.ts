import { formatMass, formatNumber } from '#lib/units/format-measure.ts';
import { formatMoney } from '#lib/money/format-money.ts';
import type { ResolvedChoice, ResolvedPlan, ResolvedSize } from '#lib/plan/types.ts';

import { cleanText } from './clean-text.ts';
import { needRoom, setParagraph, turnPage, words, type Flow } from './flow.ts';
import { breakLines, lengthInline, type Inline, type Line } from './inline.ts';
import { setFigure } from './figures.ts';
import { INK, PENCIL, RULE } from './sheet.ts';
import type { BookInput } from './types.ts';

const FACT = 9.5;
const ROW = 17;
/** Height of a column's heading, and the least height of the cover picture, in points. */
const FACTS_HEAD = 15;
const LEAST_PICTURE = 120;
const SKILL = ['', 'first piece', 'some practice', 'practised', 'experienced', 'master'] as const;

interface Fact {
  label: string;
  value: Inline[];
}

const say = (text: string): Inline => words(cleanText(text), { size: FACT });

function sizeValue(size: Pick<ResolvedSize, 'kind' | 'value'>, units: ResolvedPlan['units']): Inline {
  if (size.kind === 'length') return lengthInline(size.value, units, FACT * 1.05);
  return say(size.kind === 'angle' ? `${formatNumber(size.value, 2)}°` : formatNumber(size.value));
}

function choiceValue(choice: ResolvedChoice): Inline {
  const option = choice.options.find((each) => each.value === choice.value);
  return say(option?.label ?? String(choice.value));
}

function fitFacts({ resolved }: BookInput): Fact[] {
  return [
    ...resolved.sizes.map((size) => ({ label: size.label, value: [sizeValue(size, resolved.units)] })),
    ...resolved.choices.map((choice) => ({ label: choice.label, value: [choiceValue(choice)] })),
    ...resolved.materials
      .filter((material) => material.measured)
      .map((material) => ({
        label: `${material.label}, ${material.thickness === material.nominal ? 'as sold' : 'measured'}`,
        value: [lengthInline(material.thickness, resolved.units, FACT * 1.05)],
      })),
  ];
}

function pieceFacts({ resolved, front }: BookInput): Fact[] {
  const { units, overall } = resolved;
  const length = (nm: number) => lengthInline(nm, units, FACT * 1.05);
  const facts: Fact[] = [];
  if (overall)
    facts.push(
      { label: 'Width over all', value: [length(overall.width)] },
      { label: 'Depth over all', value: [length(overall.depth)] },
      { label: 'Height over all', value: [length(overall.height)] },
    );
  facts.push(
    { label: 'Units', value: [say(units === 'mm' ? 'millimetres' : 'inches')] },
    { label: 'Skill', value: [say(`${front.skill} of 5, ${SKILL[front.skill]}`)] },
    { label: 'Hours of work', value: [say(`${front.hours[0]} to ${front.hours[1]}`)] },
  );
  if (resolved.massKg !== undefined)
    facts.push({ label: 'Mass, about', value: [say(formatMass(resolved.massKg, units))] });
  for (const cost of resolved.costs)
    facts.push({ label: 'Stock and hardware, about', value: [say(formatMoney(cost.minor, cost.currency))] });
  return facts;
}

interface FactLines {
  label: Line[];
  value: Line[];
  height: number;
}

function breakFact(flow: Flow, fact: Fact, width: number): FactLines {
  const { measure } = flow.faces;
  const label = breakLines(
    [words(cleanText(fact.label), { size: FACT, color: PENCIL })],
    width * 0.56,
    measure,
  );
  const value = breakLines(fact.value, width * 0.42, measure);
  return { label, value, height: ROW + (Math.max(label.length, value.length, 1) - 1) * 12 };
}

const heightOf = (facts: readonly FactLines[]) => facts.reduce((sum, fact) => sum + fact.height, FACTS_HEAD);

/** Draws the facts that fit above the foot of the page and gives the others. */
function setFacts(
  flow: Flow,
  title: string,
  facts: readonly FactLines[],
  place: { x: number; width: number },
): { rest: readonly FactLines[]; end: number } {
  const { pen } = flow;
  const { x, width } = place;
  let y = flow.y;
  pen.text(title, x, y + 10, { face: 'semibold', size: 10 });
  y += FACTS_HEAD;
  pen.line(x, y, x + width, y, 0.7, INK);
  let count = 0;
  for (const fact of facts) {
    if (y + fact.height > flow.sheet.bottom && count > 0) break;
    fact.label.forEach((line, index) => line.draw(pen, x, y + 12 + index * 12));
    fact.value.forEach((line, index) => line.draw(pen, x + width - line.width, y + 12 + index * 12));
    y += fact.height;
    pen.line(x, y, x + width, y, 0.4, RULE);
    count += 1;
  }
  return { rest: facts.slice(count), end: y };
}

/** A title's lines, as even as they can be without taking one line more. */
function balanceLines(flow: Flow, title: string, width: number): Line[] {
  const set = (measure: number) =>
    breakLines([words(cleanText(title), { face: 'semibold', size: 30 })], measure, flow.faces.measure);
  const least = set(width).length;
  let narrowest = width;
  while (narrowest > width / 2 && set(narrowest - 12).length === least) narrowest -= 12;
  return set(narrowest);
}

/** Sets the first sheet: title, imprint, picture, and the fit that everything after it is worked out for. */
export function setCover(flow: Flow, input: BookInput): void {
  const { sheet } = flow;
  const { front, imprint } = input;
  flow.pen.text(cleanText(imprint), sheet.left, flow.y + 6, { face: 'regular', size: 11, color: PENCIL });
  const letter = `Revision ${cleanText(input.revision.letter)}, ${input.revision.date}`;
  flow.pen.textTo(letter, sheet.right, flow.y + 6, { face: 'regular', size: 11, color: PENCIL });
  flow.y += 34;
  flow.bookmarks.push({ title: front.title, level: 1, page: 0, y: 0 });
  const wide = sheet.right - sheet.left;
  for (const line of balanceLines(flow, front.title, wide).slice(0, 4)) {
    line.draw(flow.pen, sheet.left, flow.y + 24);
    flow.y += 36;
  }
  flow.y += 6;
  setParagraph(
    flow,
    [words(cleanText(front.summary), { face: 'italic', size: 13 })],
    { size: 13, leading: 19 },
    {
      x: sheet.left,
      right: sheet.left + wide * 0.86,
    },
  );
  flow.y += 14;

  const column = (wide - 22) / 2;
  const fit = fitFacts(input).map((fact) => breakFact(flow, fact, column));
  const piece = pieceFacts(input).map((fact) => breakFact(flow, fact, column));
  const image = front.cover === undefined ? undefined : flow.images.get(front.cover);
  if (image) {
    const room = sheet.bottom - flow.y - Math.max(heightOf(fit), heightOf(piece)) - 18;
    const scale = Math.min(wide / image.width, Math.max(room, LEAST_PICTURE) / image.height);
    const [width, height] = [image.width * scale, image.height * scale];
    flow.pen.picture(image, sheet.left + (wide - width) / 2, flow.y, width, height);
    flow.y += height + 18;
  } else if (front.cover !== undefined) setFigure(flow, front.cover, front.title);
  setFactColumns(flow, fit, piece, column);
}

/** Two columns of facts; a plan with more sizes than the sheet holds goes on overleaf. */
function setFactColumns(
  flow: Flow,
  fit: readonly FactLines[],
  piece: readonly FactLines[],
  width: number,
): void {
  const { sheet } = flow;
  let [left, right] = [fit, piece];
  let again = '';
  needRoom(flow, FACTS_HEAD + 4 * ROW);
  for (;;) {
    const ends: number[] = [];
    if (left.length > 0) {
      const set = setFacts(flow, `This copy’s fit${again}`, left, { x: sheet.left, width });
      left = set.rest;
      ends.push(set.end);
    }
    if (right.length > 0) {
      const set = setFacts(flow, `The piece${again}`, right, { x: sheet.right - width, width });
      right = set.rest;
      ends.push(set.end);
    }
    flow.y = Math.max(flow.y, ...ends) + 12;
    if (left.length === 0 && right.length === 0) return;
    turnPage(flow);
    again = ', continued';
  }
}
