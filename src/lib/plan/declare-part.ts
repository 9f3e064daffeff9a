import type { ReadContext } from './attribute-reading.ts';
import { readAttributes } from './attributes.ts';
import type { Attributes } from './attributes.ts';
import { checkChildren } from './children.ts';
import { COMPONENTS } from './components.ts';
import { given } from './given.ts';
import type { Element } from './parse.ts';
import type { Formula, Grain, PartDeclaration, ShapeDeclaration } from './types.ts';

const SHAPES: ReadonlyMap<string, ShapeDeclaration['type']> = new Map<string, ShapeDeclaration['type']>(
  (['Notch', 'Cutout', 'Groove', 'Rabbet', 'Hole', 'Taper', 'Bevel', 'RoundOver'] as const).map((name) => [
    name,
    name.toLowerCase() as ShapeDeclaration['type'],
  ]),
);

function declareShape(element: Element, context: ReadContext): ShapeDeclaration | null {
  const type = SHAPES.get(element.name ?? '');
  const spec = COMPONENTS.get(element.name ?? '');
  if (!type || !spec) return null;
  checkChildren(element, [], context);
  const attributes = readAttributes(element, spec, context);
  const shape: ShapeDeclaration = { type, at: attributes.at, formulas: {}, words: {}, flags: [] };
  for (const [name, attribute] of Object.entries(spec.attributes)) {
    if (name === 'when') continue;
    const formula = attributes.formula(name);
    const word = attributes.text(name);
    if (formula) shape.formulas[name] = formula;
    else if (word !== undefined) shape.words[name] = word;
    else if (attribute.type === 'flag' && attributes.flag(name)) shape.flags.push(name);
  }
  if (type === 'hole' && attributes.has('count') !== attributes.has('spacing')) {
    context.problems.add(attributes.at, {
      rule: 'attribute-missing',
      message: 'A row of holes needs both count and spacing.',
      hint: 'Write count={5} spacing={32*mm}.',
    });
  }
  const formula = attributes.formula('when');
  if (formula) shape.when = formula;
  return attributes.isBroken ? null : shape;
}

/** Makes the declaration of a part with its shape; null where it is in error, which is reported. */
export function declarePart(
  element: Element,
  attributes: Attributes,
  context: ReadContext,
): PartDeclaration | null {
  const shapes = checkChildren(element, [...SHAPES.keys()], context).map((child) =>
    declareShape(child, context),
  );
  const [qty, length, width] = [
    attributes.formula('qty'),
    attributes.formula('length'),
    attributes.formula('width'),
  ];
  const material = attributes.text('material');
  if (!attributes.has('width') && material !== undefined) {
    const meaning = context.scope.get(material);
    if (meaning?.type === 'material' && !meaning.members.has('width')) {
      context.problems.add(attributes.at, {
        rule: 'attribute-missing',
        message: '<Part> lacks “width”, and its material states none.',
        wanted: 'width',
        hint: 'Add width={…}.',
      });
      return null;
    }
  }
  for (const name of ['every', 'handed', 'turn']) {
    if (attributes.has(name) && !attributes.has('at')) {
      context.problems.add(attributes.placeOf(name), {
        rule: 'attribute-missing',
        message: `${name} needs a place to start from.`,
        hint: 'Add at={[0*mm, 0*mm, 0*mm]}.',
      });
    }
  }
  const along = attributes.words('along');
  if (attributes.has('at') && !attributes.has('along')) {
    context.problems.add(attributes.placeOf('at'), {
      rule: 'attribute-missing',
      message: 'at needs the axes that the part lies along.',
      hint: 'Add along="x y": the length runs along x, the width along y.',
    });
  }
  if (attributes.isBroken || !qty || !length || material === undefined) return null;
  const [first, second] = along;
  const widthFormula: Formula | undefined =
    width ??
    (attributes.has('width')
      ? undefined
      : {
          at: attributes.at,
          text: `${material}.width`,
          expression: { op: 'member', kind: 'length', of: 'material', name: material, member: 'width' },
        });
  if (!widthFormula) return null;
  return {
    type: 'part',
    at: attributes.at,
    mark: attributes.text('mark') ?? '',
    name: attributes.text('name') ?? '',
    material,
    qty,
    length,
    width: widthFormula,
    ...given('thickness', attributes.formula('thickness')),
    ...given('grain', attributes.text('grain') as Grain | undefined),
    ...given(
      'along',
      first !== undefined && second !== undefined ? ([first, second] as [string, string]) : undefined,
    ),
    ...given('position', attributes.formula('at')),
    ...given('every', attributes.formula('every')),
    ...given('turn', attributes.formula('turn')),
    handed: attributes.flag('handed'),
    edges: attributes.words('edges'),
    shape: shapes.filter((shape) => shape !== null),
  };
}
