import { formatLength } from '#lib/units/format-length.ts';

import { printValue } from './print-value.ts';
import { plainText } from './resolve-prose.ts';
import { resolvePlan } from './resolve.ts';
import type {
  CompiledPlan,
  Fit,
  Kind,
  ResolvedPart,
  ResolvedPlan,
  ResolvedShape,
  UnitSystem,
  Value,
} from './types.ts';

/** One field that differs, printed in the reader's units; `difference` only for numbers of one kind. */
export interface FieldChange {
  field: string;
  before?: string;
  after?: string;
  difference?: string;
}

/** One thing that was added, removed or changed between two revisions, at one fit. */
export interface PlanChange {
  what:
    | 'part'
    | 'material'
    | 'hardware'
    | 'consumable'
    | 'tool'
    | 'value'
    | 'size'
    | 'choice'
    | 'requirement'
    | 'caution'
    | 'step';
  /** Mark, name, title or sentence. */
  name: string;
  change: 'added' | 'removed' | 'changed';
  fields: FieldChange[];
  /** The change in one sentence: “Part A “Side”: length 432 mm → 430 mm (−2 mm).” */
  sentence: string;
}

/** A fact to compare: its kind decides how it is printed. */
interface Fact {
  field: string;
  kind: Kind;
  value: Value;
}
interface Item {
  name: string;
  title: string;
  facts: Fact[];
}

const WHAT: Readonly<Record<PlanChange['what'], string>> = {
  part: 'Part',
  material: 'Material',
  hardware: 'Hardware',
  consumable: 'Consumable',
  tool: 'Tool',
  value: 'Value',
  size: 'Size',
  choice: 'Choice',
  requirement: 'Requirement',
  caution: 'Caution',
  step: 'Step',
};

function fact(field: string, kind: Kind, value: Value | undefined): Fact[] {
  return value === undefined ? [] : [{ field, kind, value }];
}

function shapeFacts(shapes: readonly ResolvedShape[]): Fact[] {
  const counts = new Map<string, number>();
  return shapes.flatMap((shape) => {
    const title = [shape.type, ...Object.values(shape.words)].join(' ');
    const count = (counts.get(title) ?? 0) + 1;
    counts.set(title, count);
    const name = count === 1 ? title : `${title} (${count})`;
    const values = Object.entries(shape.values).flatMap(([field, value]) => {
      const kind: Kind =
        field === 'angle'
          ? 'angle'
          : field === 'count'
            ? 'number'
            : Array.isArray(value)
              ? { list: 'length' }
              : 'length';
      return fact(`${name}, ${field}`, kind, value);
    });
    return [...fact(name, 'text', ['yes', ...shape.flags].join(', ')), ...values];
  });
}

function partFacts(part: ResolvedPart): Fact[] {
  return [
    ...fact('name', 'text', part.name),
    ...fact('material', 'text', part.material),
    ...fact('quantity', 'number', part.qty),
    ...fact('length', 'length', part.length),
    ...fact('width', 'length', part.width),
    ...fact('thickness', 'length', part.thickness),
    ...fact('grain', 'text', part.grain),
    ...fact('handed', 'yesno', part.handed),
    ...fact('edges', 'text', [...part.edges].sort().join(' ') || 'none'),
    ...fact('along', 'text', part.along?.join(' ')),
    ...fact('place', { list: 'length' }, part.position),
    ...fact('every', { list: 'length' }, part.every),
    ...fact('turn', 'text', part.turn && `${part.turn[1]}° about ${part.turn[0]}`),
    ...shapeFacts(part.shape),
  ];
}

/** Everything of a resolved plan that is compared, by what it is. Things of one name are told apart by their count. */
function itemsOf(plan: ResolvedPlan): [PlanChange['what'], Item[]][] {
  return [
    [
      'size',
      plan.sizes.map((size) => ({
        name: size.name,
        title: size.name,
        facts: [
          ...fact('label', 'text', size.label),
          ...fact('value', size.kind, size.value),
          ...fact('default', size.kind, size.default),
          ...fact('least', size.kind, size.min),
          ...fact('greatest', size.kind, size.max),
          ...fact('step', size.kind, size.step),
        ],
      })),
    ],
    [
      'choice',
      plan.choices.map((choice) => ({
        name: choice.name,
        title: choice.name,
        facts: [
          ...fact('label', 'text', choice.label),
          ...fact('value', choice.kind, choice.value),
          ...fact(
            'options',
            'text',
            choice.options
              .map((option) => option.label)
              .sort()
              .join(', '),
          ),
        ],
      })),
    ],
    [
      'value',
      plan.values.map((value) => ({
        name: value.name,
        title: value.name,
        facts: fact('value', value.kind, value.value),
      })),
    ],
    [
      'part',
      plan.parts.map((part) => ({
        name: part.mark,
        title: `${part.mark} “${part.name}”`,
        facts: partFacts(part),
      })),
    ],
    [
      'material',
      plan.materials.map((material) => ({
        name: material.name,
        title: material.name,
        facts: [
          ...fact('label', 'text', material.label),
          ...fact('kind', 'text', material.kind),
          ...fact('thickness', 'length', material.thickness),
          ...fact('grain', 'text', material.grain),
          ...fact('species', 'text', material.species),
          ...fact('stock sizes', { list: { list: 'length' } }, material.sizes),
          ...fact('least stock', 'number', material.leastStock),
        ],
      })),
    ],
    [
      'hardware',
      plan.hardware.map((item) => ({
        name: item.name,
        title: `“${item.name}”`,
        facts: [
          ...fact('quantity', 'number', item.qty),
          ...fact('unit', 'text', item.unit),
          ...fact('pack', 'number', item.pack),
          ...fact('packs', 'number', item.packs),
          ...fact('note', 'text', item.note),
        ],
      })),
    ],
    [
      'consumable',
      plan.consumables.map((item) => ({
        name: item.name,
        title: `“${item.name}”`,
        facts: [
          ...fact('coats', 'number', item.coats),
          ...fact('amount', 'number', Math.round(item.amount * 100) / 100),
          ...fact('unit', 'text', item.unit),
        ],
      })),
    ],
    [
      'tool',
      plan.tools.map((tool) => ({
        name: tool.name,
        title: `“${tool.name}”`,
        facts: fact('note', 'text', tool.note),
      })),
    ],
    [
      'requirement',
      plan.requirements.map((each) => ({
        name: each.message,
        title: `“${each.message}”`,
        facts: fact('holds', 'yesno', each.holds),
      })),
    ],
    [
      'caution',
      plan.cautions.map((each) => ({
        name: each.about,
        title: `“${each.about}”`,
        facts: fact('text', 'text', each.text),
      })),
    ],
    [
      'step',
      plan.steps.map((step) => ({
        name: step.title,
        title: `“${step.title}”`,
        facts: [
          ...fact('parts', 'text', [...step.parts].sort().join(' ') || 'none'),
          ...fact('tools', 'text', [...step.tools].sort().join(', ') || 'none'),
          ...fact('minutes', 'number', step.minutes),
          ...fact('text', 'text', plainText(step.body)),
        ],
      })),
    ],
  ];
}

function keyed(items: readonly Item[]): Map<string, Item> {
  const byName = new Map<string, Item>();
  for (const item of items) {
    let key = item.name;
    for (let count = 2; byName.has(key); count += 1) key = `${item.name} (${count})`;
    byName.set(key, item);
  }
  return byName;
}

function isSameValue(a: Value, b: Value): boolean {
  return JSON.stringify(a) === JSON.stringify(b);
}

function describeDifference(kind: Kind, before: Value, after: Value, units: UnitSystem): string | undefined {
  if (typeof before !== 'number' || typeof after !== 'number') return undefined;
  const difference = after - before;
  const printed =
    kind === 'length'
      ? formatLength(difference, { units, denominator: 64 }).text
      : printValue(kind, difference, units);
  return difference > 0 ? `+${printed}` : printed;
}

/** A value in a list of changes: lengths to the 64th, so that two different ones are rarely printed alike. */
function print(kind: Kind, value: Value, units: UnitSystem): string {
  const text =
    kind === 'length' && typeof value === 'number'
      ? formatLength(value, { units, denominator: 64 }).text
      : printValue(kind, value, units);
  return text.length > 160 ? `${text.slice(0, 159)}…` : text;
}

function compareFacts(before: Item, after: Item, units: UnitSystem): FieldChange[] {
  const later = new Map(after.facts.map((each) => [each.field, each]));
  const changes: FieldChange[] = [];
  for (const { field, kind, value } of before.facts) {
    const other = later.get(field);
    later.delete(field);
    if (other && isSameValue(value, other.value) && JSON.stringify(kind) === JSON.stringify(other.kind))
      continue;
    const change: FieldChange = { field, before: print(kind, value, units) };
    if (other) {
      change.after = print(other.kind, other.value, units);
      const difference =
        JSON.stringify(kind) === JSON.stringify(other.kind)
          ? describeDifference(kind, value, other.value, units)
          : undefined;
      if (difference !== undefined) change.difference = difference;
    }
    changes.push(change);
  }
  for (const { field, kind, value } of later.values())
    changes.push({ field, after: print(kind, value, units) });
  return changes;
}

function describeField({ field, before, after, difference }: FieldChange): string {
  if (before === undefined) return `${field} ${after ?? ''} added`;
  if (after === undefined) return `${field} ${before} removed`;
  if (field === 'text' || field === 'note') return `${field} reworded`;
  return `${field} ${before} → ${after}${difference === undefined ? '' : ` (${difference})`}`;
}

function compareItems(
  what: PlanChange['what'],
  before: readonly Item[],
  after: readonly Item[],
  units: UnitSystem,
): PlanChange[] {
  const earlier = keyed(before);
  const later = keyed(after);
  const changes: PlanChange[] = [];
  for (const [key, item] of earlier) {
    const other = later.get(key);
    if (!other) {
      changes.push({
        what,
        name: item.name,
        change: 'removed',
        fields: [],
        sentence: `${WHAT[what]} ${item.title} removed.`,
      });
      continue;
    }
    const fields = compareFacts(item, other, units);
    if (fields.length === 0) continue;
    const sentence = `${WHAT[what]} ${item.title}: ${fields.map(describeField).join('; ')}.`;
    changes.push({ what, name: item.name, change: 'changed', fields, sentence });
  }
  for (const [key, item] of later) {
    if (earlier.has(key)) continue;
    const size =
      what === 'part'
        ? item.facts.filter((each) => ['length', 'width', 'thickness'].includes(each.field))
        : [];
    const measures = size.map((each) => print(each.kind, each.value, units)).join(' × ');
    changes.push({
      what,
      name: item.name,
      change: 'added',
      fields: [],
      sentence: `${WHAT[what]} ${item.title} added${measures && `: ${measures}`}.`,
    });
  }
  return changes;
}

/**
 * What changed between two revisions of a plan at one buyer's fit: parts, materials, hardware, derived values, sizes,
 * requirements, cautions and steps, each with what it was, what it is and by how much, in the reader's units. Things are
 * matched by mark, name or title, so reordering is no change. A value of the fit that the later revision no longer allows
 * is brought to its nearest allowed one, which then shows as a change of that size.
 */
export function comparePlans(before: CompiledPlan, after: CompiledPlan, fit: Fit): PlanChange[] {
  const earlier = itemsOf(resolvePlan(before, fit));
  const later = itemsOf(resolvePlan(after, fit));
  return earlier.flatMap(([what, items], index) =>
    compareItems(what, items, later[index]?.[1] ?? [], fit.units),
  );
}
