/**
 * The shapes that the plan language compiles and resolves to. All of it is plain data that survives JSON:
 * a compiled plan is kept with its revision, sent to a licensed buyer's browser, and resolved there and on the server alike.
 *
 * Lengths are whole nanometres, angles degrees, areas square nanometres and volumes cubic nanometres
 * (both as plain numbers, exact to 2^53 and rounded beyond), masses kilograms.
 */

import type { UnitSystem } from '#lib/units/length.ts';

/** What a value is. `list` holds the kind of its members; `any` stands only in an empty list. */
export type Kind =
  | 'length'
  | 'area'
  | 'volume'
  | 'mass'
  | 'angle'
  | 'number'
  | 'text'
  | 'yesno'
  | { readonly list: Kind | 'any' };

export type Scalar = number | string | boolean;
export type Value = Scalar | readonly Value[];

/** A place in the source: line and column count from 1, `length` in characters on that line. */
export interface Place {
  line: number;
  column: number;
  length: number;
}

export type Severity = 'error' | 'warning' | 'advice';

/** Something wrong in a plan, said so that its author can mend it. */
export interface Problem extends Place {
  /** Stable kebab-case name of the rule. */
  rule: string;
  severity: Severity;
  /** One sentence: what is wrong. */
  message: string;
  /** What stood there, and what was wanted, where that helps. */
  found?: string;
  wanted?: string;
  /** The cure, in the author's own syntax. */
  hint?: string;
}

/** A checked expression: a compact tree, kinds decided, names resolved. */
export type Expression =
  | { op: 'value'; kind: Kind; value: Value }
  /** A declared size, choice or let. */
  | { op: 'name'; kind: Kind; name: string }
  /** `ply.thickness`, `A.qty`: the thing's name or mark, and the member. */
  | {
      op: 'member';
      kind: Kind;
      of: 'material' | 'part';
      name: string;
      member: 'thickness' | 'width' | 'length' | 'qty';
    }
  | { op: 'unary'; kind: Kind; sign: '-' | '!' | '+'; of: Expression }
  | { op: 'binary'; kind: Kind; sign: string; left: Expression; right: Expression }
  | { op: 'if'; kind: Kind; test: Expression; then: Expression; otherwise: Expression }
  | { op: 'call'; kind: Kind; name: string; args: Expression[] }
  | { op: 'list'; kind: Kind; items: Expression[] };

/** An expression together with where it stands and how the author wrote it. */
export interface Formula {
  at: Place;
  text: string;
  expression: Expression;
}

export interface FrontMatter {
  title: string;
  summary: string;
  skill: 1 | 2 | 3 | 4 | 5;
  /** Hours of work, low and high. */
  hours: [number, number];
  spaces: string[];
  tools: string[];
  tags: string[];
  /** Asset name of the cover picture. */
  cover?: string;
}

export interface SizeDeclaration {
  type: 'size';
  at: Place;
  name: string;
  label: string;
  kind: 'length' | 'angle' | 'number';
  default: number;
  min: number;
  max: number;
  step: number;
  when?: Formula;
}
export interface ChoiceOption {
  value: number | string;
  label: string;
}
export interface ChoiceDeclaration {
  type: 'choice';
  at: Place;
  name: string;
  label: string;
  kind: 'length' | 'number' | 'text';
  default: number | string;
  options: ChoiceOption[];
  when?: Formula;
}
export interface LetDeclaration {
  type: 'let';
  at: Place;
  name: string;
  value: Formula;
  note?: string;
  when?: Formula;
}

/** A written price: minor units of its currency, per what. */
export interface WrittenPrice {
  minor: number;
  currency: string;
  per: 'piece' | 'board-foot' | 'm3' | 'm2' | 'm';
}

export type MaterialKind = 'sheet' | 'board' | 'bar';
export type Grain = 'length' | 'width' | 'none';

export interface MaterialDeclaration {
  type: 'material';
  at: Place;
  name: string;
  label: string;
  kind: MaterialKind;
  thickness: Formula;
  width?: Formula;
  length?: Formula;
  /** Stock sizes it is sold in: [length, width] for sheets and boards, [length] for bars. */
  sizes?: Formula;
  grain: Grain;
  species?: string;
  price?: WrittenPrice;
  measured: boolean;
  when?: Formula;
}

/** The shape children of a part, in the order of the file, each attribute a formula or a word. */
export interface ShapeDeclaration {
  type: 'notch' | 'cutout' | 'groove' | 'rabbet' | 'hole' | 'taper' | 'bevel' | 'roundover';
  at: Place;
  formulas: Record<string, Formula>;
  words: Record<string, string>;
  flags: string[];
  when?: Formula;
}

export interface PartDeclaration {
  type: 'part';
  at: Place;
  mark: string;
  name: string;
  material: string;
  qty: Formula;
  length: Formula;
  width: Formula;
  thickness?: Formula;
  grain?: Grain;
  /** Axes of the piece that the part's length and width run along, e.g. ['z', 'y']. */
  along?: [string, string];
  position?: Formula;
  every?: Formula;
  turn?: Formula;
  handed: boolean;
  /** Edges to be banded or dressed, as named by the author. */
  edges: string[];
  shape: ShapeDeclaration[];
  when?: Formula;
}

export interface HardwareDeclaration {
  type: 'hardware';
  at: Place;
  name: string;
  qty: Formula;
  unit?: string;
  note?: string;
  pack?: number;
  price?: WrittenPrice;
  link?: string;
  when?: Formula;
}
export interface ConsumableDeclaration {
  type: 'consumable';
  at: Place;
  name: string;
  for: 'surface' | 'joint';
  /** Square metres (surface) or metres (joint) that one unit covers, and the unit's name. */
  coverage: { amount: number; measure: 'm2' | 'm'; unit: string };
  coats: Formula;
  price?: WrittenPrice;
  when?: Formula;
}
export interface ToolDeclaration {
  type: 'tool';
  at: Place;
  name: string;
  note?: string;
  link?: string;
  sponsored: boolean;
  when?: Formula;
}
export interface RequireDeclaration {
  type: 'require';
  at: Place;
  that: Formula;
  message: Prose;
  when?: Formula;
}
export interface ShelfDeclaration {
  type: 'shelf';
  at: Place;
  part: string;
  span: Formula;
  load: Formula;
  position: string;
  species?: string;
  when?: Formula;
}
export interface CautionDeclaration {
  type: 'caution';
  at: Place;
  about: string;
  text: Prose;
  when?: Formula;
}
export interface StepDeclaration {
  type: 'step';
  at: Place;
  title: string;
  parts: string[];
  tools: string[];
  minutes?: number;
  body: Prose;
  when?: Formula;
}
export interface FigureDeclaration {
  type: 'figure';
  at: Place;
  src: string;
  alt: string;
  caption?: string;
  when?: Formula;
}
export interface ViewDeclaration {
  type: 'view';
  at: Place;
  from: 'front' | 'side' | 'top' | 'back' | 'corner';
  show: string[];
  explode?: Formula;
  step?: number;
  when?: Formula;
}
export interface TemplateDeclaration {
  type: 'template';
  at: Place;
  part: string;
  scale?: number;
  when?: Formula;
}
export interface PlaceDeclaration {
  type: 'parts-table' | 'stock-layout' | 'hardware-table' | 'shopping-list';
  at: Place;
  when?: Formula;
}

export type Declaration =
  | SizeDeclaration
  | ChoiceDeclaration
  | LetDeclaration
  | MaterialDeclaration
  | PartDeclaration
  | HardwareDeclaration
  | ConsumableDeclaration
  | ToolDeclaration
  | RequireDeclaration
  | ShelfDeclaration
  | CautionDeclaration
  | StepDeclaration
  | FigureDeclaration
  | ViewDeclaration
  | TemplateDeclaration
  | PlaceDeclaration;

/**
 * Prose as a small tree of allowed nodes; a `value` prints in the reader's units, a `declared` stands where a
 * component stood (its index in `CompiledPlan.declarations`). Links carry only http, https, mailto or relative addresses.
 */
export type ProseNode =
  | { node: 'paragraph' | 'quote' | 'emphasis' | 'strong' | 'strike'; children: ProseNode[] }
  | { node: 'heading'; depth: number; children: ProseNode[] }
  | { node: 'list'; ordered: boolean; start?: number; items: ProseNode[][] }
  | { node: 'table'; align: ('left' | 'right' | 'center' | null)[]; rows: ProseNode[][][] }
  | { node: 'text'; text: string }
  | { node: 'code'; text: string; block: boolean }
  | { node: 'link'; href: string; children: ProseNode[] }
  | { node: 'picture'; src: string; alt: string }
  | { node: 'break' | 'rule' }
  | { node: 'value'; formula: Formula }
  | { node: 'declared'; index: number };
export type Prose = ProseNode[];

/** A revision's source, read and checked. Resolving it needs nothing but this and a fit. */
export interface CompiledPlan {
  /** Version of this shape, so that a stored one is compiled again when it changes. */
  format: 1;
  front: FrontMatter;
  /** Every component, nested ones too (a Caution inside a Step), in the order of the file. */
  declarations: Declaration[];
  /** The order in which kept values are worked out: `bay`, `ply.thickness`, `A.length`. */
  order: string[];
  /** The prose of the file outside steps, in order, with the components standing in it. */
  body: Prose;
}

export type { UnitSystem };

/** What a buyer sets: all optional, the plan's defaults fill in. */
export interface Fit {
  /** Sizes and choices by name, in nanometres, degrees, numbers or texts. */
  values: Record<string, number | string>;
  /** Real thicknesses by material name, in nanometres. */
  measured: Record<string, number>;
  units: UnitSystem;
  /** The buyer's own prices by material name, in minor units of the written price. */
  prices?: Record<string, number>;
}

/** One resolved size or choice, as set or by default. */
export interface ResolvedSize {
  name: string;
  label: string;
  kind: 'length' | 'angle' | 'number';
  value: number;
  default: number;
  min: number;
  max: number;
  step: number;
}
export interface ResolvedChoice {
  name: string;
  label: string;
  kind: 'length' | 'number' | 'text';
  value: number | string;
  options: ChoiceOption[];
}

export interface ResolvedShape {
  type: ShapeDeclaration['type'];
  at: Place;
  /** Evaluated attributes by name. */
  values: Record<string, Value>;
  words: Record<string, string>;
  flags: string[];
}

export interface ResolvedPart {
  mark: string;
  name: string;
  material: string;
  qty: number;
  /** Finished sizes in nanometres. */
  length: number;
  width: number;
  thickness: number;
  grain: Grain;
  along?: [string, string];
  /** Lower left front corner of the first piece, the step between pieces, and the turn [axis, degrees]. */
  position?: [number, number, number];
  every?: [number, number, number];
  turn?: [string, number];
  handed: boolean;
  edges: string[];
  shape: ResolvedShape[];
  at: Place;
}

export interface ResolvedMaterial {
  name: string;
  label: string;
  kind: MaterialKind;
  grain: Grain;
  species?: string;
  /** Nanometres; `nominal` is what the author wrote, `thickness` what the buyer measured or the nominal. */
  thickness: number;
  nominal: number;
  measured: boolean;
  width?: number;
  length?: number;
  /** Stock sizes, [length, width] or [length]. */
  sizes: number[][];
  /** Number of pieces cut from it, their face area in m², tally in board feet, real volume in m³, length in m, mass in kg when the species is known. */
  pieces: number;
  areaM2: number;
  boardFeet: number;
  volumeM3: number;
  lengthM: number;
  massKg?: number;
  /** Least number of sheets, boards or bars by area or length alone, before any layout. */
  leastStock: number;
  price?: WrittenPrice;
  /** Estimated cost in minor units of the price's currency. */
  costMinor?: number;
}
export interface ResolvedHardware {
  name: string;
  qty: number;
  unit?: string;
  note?: string;
  pack?: number;
  packs: number;
  price?: WrittenPrice;
  costMinor?: number;
  link?: string;
}
export interface ResolvedConsumable {
  name: string;
  for: 'surface' | 'joint';
  coats: number;
  amount: number;
  unit: string;
  /** Price of one unit, and the cost of the whole units to buy. */
  price?: WrittenPrice;
  costMinor?: number;
}
export interface ResolvedTool {
  name: string;
  note?: string;
  link?: string;
  sponsored: boolean;
}
export interface ResolvedRequirement {
  holds: boolean;
  message: string;
  at: Place;
}
export interface ResolvedCaution {
  about: string;
  text: string;
}
export interface ResolvedStep {
  number: number;
  title: string;
  parts: string[];
  tools: string[];
  minutes?: number;
  body: ResolvedProse;
}
export interface ResolvedShelf {
  part: string;
  span: number;
  loadKg: number;
  at: string;
  species: string;
  /** Deflection in nanometres, the usual limits, and whether each holds. */
  sag: number;
  limits: { name: string; limit: number; holds: boolean }[];
  approximate: boolean;
  guidance: string;
}

/** A drawing asked for; `index` is that of its declaration, as in the `place` node where it stands. */
export interface ResolvedView {
  index: number;
  from: ViewDeclaration['from'];
  /** Marks to show; all where empty. Parts that are left out at this fit are left out here. */
  show: string[];
  /** How far the parts are drawn apart, in nanometres. */
  explode?: number;
  step?: number;
}
/** A full-size template asked for, of a part that is cut at this fit. */
export interface ResolvedTemplate {
  index: number;
  part: string;
  /** Drawn size over real size. */
  scale: number;
}

/** Prose with its values filled in: `value` carries the number so that a page can set real fractions. */
export type ResolvedProseNode =
  | { node: 'paragraph' | 'quote' | 'emphasis' | 'strong' | 'strike'; children: ResolvedProseNode[] }
  | { node: 'heading'; depth: number; children: ResolvedProseNode[] }
  | { node: 'list'; ordered: boolean; start?: number; items: ResolvedProseNode[][] }
  | { node: 'table'; align: ('left' | 'right' | 'center' | null)[]; rows: ResolvedProseNode[][][] }
  | { node: 'text'; text: string }
  | { node: 'code'; text: string; block: boolean }
  | { node: 'link'; href: string; children: ResolvedProseNode[] }
  | { node: 'picture'; src: string; alt: string }
  | { node: 'break' | 'rule' }
  | { node: 'value'; kind: Kind; value: Value; text: string }
  | { node: 'figure'; src: string; alt: string; caption?: string }
  | { node: 'caution'; about: string; text: string }
  | { node: 'step'; number: number }
  | { node: 'place'; what: PlaceDeclaration['type'] | 'view' | 'template'; index: number };
export type ResolvedProse = ResolvedProseNode[];

/** A plan at one fit: everything that a page, a table, a layout or a book needs. */
export interface ResolvedPlan {
  title: string;
  units: UnitSystem;
  sizes: ResolvedSize[];
  choices: ResolvedChoice[];
  /** Derived values by name, in the order of the file. */
  values: { name: string; kind: Kind; value: Value; note?: string }[];
  parts: ResolvedPart[];
  materials: ResolvedMaterial[];
  hardware: ResolvedHardware[];
  consumables: ResolvedConsumable[];
  tools: ResolvedTool[];
  requirements: ResolvedRequirement[];
  cautions: ResolvedCaution[];
  shelves: ResolvedShelf[];
  steps: ResolvedStep[];
  views: ResolvedView[];
  templates: ResolvedTemplate[];
  /** The prose outside steps; tables that the author did not place are appended with the index −1. */
  body: ResolvedProse;
  /** Mass of all parts in kg, where every species is known. */
  massKg?: number;
  /** Cost of materials, hardware and consumables by currency, in minor units. */
  costs: { currency: string; minor: number }[];
  /** Overall size of the placed parts, in nanometres. */
  overall?: { width: number; depth: number; height: number };
  /** Impossible parts and values, with the formula, its value and the sizes that led there. */
  problems: Problem[];
}
