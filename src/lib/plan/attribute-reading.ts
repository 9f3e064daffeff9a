import type { AttributeSpec, AttributeType } from './components.ts';
import type { CheckContext } from './check-names.ts';
import { describeKind } from './kinds.ts';
import type { Element, ElementAttribute } from './parse.ts';
import type { Finding } from './problems.ts';
import { placeAt } from './source.ts';
import type { Formula, Kind, Place, WrittenPrice } from './types.ts';
import type { Coverage } from './written.ts';

/** What reading a plan carries along. */
export interface ReadContext extends CheckContext {
  /** Offsets of braces whose expression was blanked because its fault is reported already. */
  blanked: ReadonlySet<number>;
}

/** A constant as read: its kind and its value in nanometres, degrees, kilograms or as it is. */
export interface Constant {
  kind: Kind;
  value: number | string;
}

/** What an attribute was read as, told apart by how it is used. */
export type ReadValue =
  | { type: 'text'; text: string }
  | { type: 'words'; words: string[] }
  | { type: 'flag' }
  | { type: 'formula'; formula: Formula }
  | { type: 'constant'; constant: Constant }
  | { type: 'price'; price: WrittenPrice }
  | { type: 'coverage'; coverage: Coverage };

/** The kind of places, points and rows of stock sizes. */
export const LENGTHS: Kind = { list: 'length' };
/** The kind that a formula of an attribute type must have, where it is one kind only. */
export const FORMULA_KINDS: ReadonlyMap<AttributeType, Kind> = new Map<AttributeType, Kind>([
  ['length', 'length'],
  ['angle', 'angle'],
  ['number', 'number'],
  ['mass', 'mass'],
  ['yesno', 'yesno'],
  ['point', LENGTHS],
  ['place', LENGTHS],
]);

/** How each type is written, for hints. */
const SAMPLES: Readonly<Record<AttributeType, string>> = {
  name: '="width"',
  mark: '="A"',
  text: '="…"',
  address: '="https://…"',
  picture: '="bench.jpg"',
  word: '="…"',
  words: '="…"',
  flag: '',
  marks: '="A B"',
  part: '="A"',
  material: '="ply"',
  texts: '="drill, router"',
  length: '={18*mm}',
  angle: '={45*deg}',
  number: '={2}',
  mass: '={90*kg}',
  yesno: '={width > 900*mm}',
  any: '={width - 36*mm}',
  constant: '="18 mm"',
  count: '={2}',
  option: '="plinth"',
  point: '={[0*mm, 0*mm]}',
  place: '={[0*mm, 0*mm, 0*mm]}',
  spacing: '={32*mm}',
  sizes: '={[[2440*mm, 1220*mm]]}',
  turn: '={["z", 90*deg]}',
  axes: '="x y"',
  price: '="78.00 EUR"',
  coverage: '="10 m2/l"',
};

/** How an attribute is written, as an example in the author's syntax. */
export function sampleOf(name: string, spec: AttributeSpec): string {
  const option = spec.options?.[0];
  return option === undefined ? `${name}${SAMPLES[spec.type]}` : `${name}="${option}"`;
}

/** Where a node of the tree begins and ends in the text. */
export function offsetsOf(node: {
  position?: { start: { offset?: number }; end: { offset?: number } } | undefined;
}): [number, number] {
  return [node.position?.start.offset ?? 0, node.position?.end.offset ?? 1];
}

/** The place of a component's opening: `<Part`. */
export function placeOfElement(element: Element, context: ReadContext): Place {
  const [start] = offsetsOf(element);
  return placeAt(context.source, start, start + 1 + (element.name?.length ?? 0));
}

/** One attribute that is being read, with everything that reading it needs. */
export interface Reading {
  attribute: ElementAttribute;
  spec: AttributeSpec;
  element: Element;
  context: ReadContext;
  at: Place;
}

/** Reports a fault of an attribute; gives null, as reading a faulty one does. */
export function fail(reading: Reading, finding: Finding): null {
  reading.context.problems.add(reading.at, finding);
  return null;
}

/** What an attribute type wants, in words: `a list of two lengths`. */
export function wantedBy(type: AttributeType): string {
  const kind = FORMULA_KINDS.get(type);
  if (type === 'point') return 'a list of two lengths';
  if (type === 'place') return 'a list of three lengths';
  if (type === 'spacing') return 'a length or a list of two lengths';
  if (type === 'sizes') return 'a list of stock sizes';
  if (type === 'turn') return 'an axis and an angle';
  if (type === 'count') return 'a whole number';
  if (type === 'constant') return 'a length, an angle or a number';
  if (type === 'option') return 'a length, a number or a text';
  return kind === undefined ? 'an expression' : describeKind(kind);
}

/** True for the name of an uploaded picture: no folders, no addresses. */
export function isPictureName(text: string): boolean {
  return /^[A-Za-z0-9][A-Za-z0-9._-]{0,99}$/.test(text);
}
