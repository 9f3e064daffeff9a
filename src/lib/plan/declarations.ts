import { placeOfElement, readAttributes } from './attributes.ts';
import type { Attributes, ReadContext } from './attributes.ts';
import { COMPONENTS } from './components.ts';
import { UNITS } from './functions.ts';
import { describeKind } from './kinds.ts';
import type { Element, MdxNode } from './parse.ts';
import { asBlocks, compileProse } from './prose.ts';
import { placeAt } from './source.ts';
import { suggestName } from './suggest.ts';
import { readOptions } from './symbols.ts';
import type {
  ChoiceDeclaration,
  ConsumableDeclaration,
  Declaration,
  Formula,
  Grain,
  MaterialKind,
  PartDeclaration,
  PlaceDeclaration,
  Prose,
  ShapeDeclaration,
  SizeDeclaration,
  ViewDeclaration,
} from './types.ts';

/** What reading the components carries along: the declarations so far, in the order of the file. */
export interface DeclareContext extends ReadContext {
  declarations: (Declaration | null)[];
}

const SHAPES: ReadonlyMap<string, ShapeDeclaration['type']> = new Map<string, ShapeDeclaration['type']>(
  (['Notch', 'Cutout', 'Groove', 'Rabbet', 'Hole', 'Taper', 'Bevel', 'RoundOver'] as const).map((name) => [
    name,
    name.toLowerCase() as ShapeDeclaration['type'],
  ]),
);

const PLACES: ReadonlyMap<string, PlaceDeclaration['type']> = new Map<string, PlaceDeclaration['type']>([
  ['PartsTable', 'parts-table'],
  ['StockLayout', 'stock-layout'],
  ['HardwareTable', 'hardware-table'],
  ['ShoppingList', 'shopping-list'],
]);

function isElement(node: MdxNode): node is Element {
  return node.type === 'mdxJsxFlowElement' || node.type === 'mdxJsxTextElement';
}

/** The components among children, with paragraphs of nothing but components opened; other content is returned apart. */
function sortChildren(children: readonly MdxNode[]): { elements: Element[]; others: MdxNode[] } {
  const elements: Element[] = [];
  const others: MdxNode[] = [];
  for (const child of children) {
    if (isElement(child)) elements.push(child);
    else if (child.type === 'paragraph') {
      const inner = sortChildren(child.children);
      elements.push(...inner.elements);
      others.push(...inner.others);
    } else if (child.type === 'text' && child.value.trim() === '') continue;
    else if (
      (child.type === 'mdxFlowExpression' || child.type === 'mdxTextExpression') &&
      child.value.trim() === ''
    )
      continue;
    else others.push(child);
  }
  return { elements, others };
}

function placeOfNode(node: MdxNode, context: ReadContext): ReturnType<typeof placeAt> {
  return placeAt(context.source, node.position?.start.offset ?? 0, node.position?.end.offset ?? 1);
}

/** Only components of some names may stand inside this one. */
function checkChildren(element: Element, allowed: readonly string[], context: ReadContext): Element[] {
  const { elements, others } = sortChildren(element.children);
  for (const other of others) {
    context.problems.add(placeOfNode(other, context), {
      rule: 'misplaced',
      message: `Text has no place inside <${element.name}>.`,
      hint:
        allowed.length === 0
          ? `Close it at once: <${element.name} … />.`
          : `Only ${allowed.join(', ')} stand there.`,
    });
  }
  return elements.filter((child) => {
    if (allowed.includes(child.name ?? '')) return true;
    reportUnknown(
      child,
      context,
      allowed,
      `<${child.name ?? ''}> has no place inside <${element.name}>.`,
      element.name ?? '',
    );
    return false;
  });
}

function reportUnknown(
  element: Element,
  context: ReadContext,
  allowed: readonly string[],
  misplaced: string,
  parent: string,
): void {
  const name = element.name ?? '';
  const isKnown = COMPONENTS.has(name);
  const near = suggestName(name, isKnown ? allowed : COMPONENTS.keys());
  const inside = COMPONENTS.get(name)?.inside;
  context.problems.add(placeOfElement(element, context), {
    rule: isKnown ? 'misplaced' : 'unknown-component',
    message: isKnown
      ? misplaced
      : name === ''
        ? 'An empty tag has no place in a plan.'
        : `There is no component <${name}>.`,
    found: name,
    hint: isKnown
      ? inside
        ? `It stands inside <${inside}>.`
        : `Put it before or after <${parent}>.`
      : near
        ? `Did you mean <${near}>?`
        : `The components are ${[...COMPONENTS.keys()].join(', ')}.`,
  });
}

function declareSize(attributes: Attributes, context: ReadContext): SizeDeclaration | null {
  const read = {
    default: attributes.constant('default'),
    min: attributes.constant('min'),
    max: attributes.constant('max'),
    step: attributes.constant('step'),
  };
  const kind = read.default?.kind;
  for (const [name, constant] of Object.entries(read)) {
    if (constant && kind && constant.kind !== kind) {
      context.problems.add(attributes.placeOf(name), {
        rule: 'kinds-differ',
        message: `${name} is ${describeKind(constant.kind)}, and default is ${describeKind(kind)}.`,
        found: describeKind(constant.kind),
        wanted: describeKind(kind),
        hint: 'Write default, min, max and step in one kind.',
      });
      return null;
    }
  }
  if (attributes.isBroken || (kind !== 'length' && kind !== 'angle' && kind !== 'number')) return null;
  const [value, min, max, step] = [
    read.default?.value,
    read.min?.value,
    read.max?.value,
    read.step?.value,
  ].map(Number);
  if (value === undefined || min === undefined || max === undefined || step === undefined) return null;
  const refuse = (name: string, message: string, hint: string): null => {
    context.problems.add(attributes.placeOf(name), { rule: 'size-limits', message, hint });
    return null;
  };
  if (step <= 0)
    return refuse(
      'step',
      'step must be more than nothing.',
      kind === 'length' ? 'Write step="5 mm".' : 'Write step={1}.',
    );
  if (min > max) return refuse('max', 'max is less than min.', 'Exchange them.');
  if (value < min || value > max)
    return refuse('default', 'default lies outside min and max.', 'Choose a default between them.');
  const isWhole = [value, min, max, step].every((each) => Number.isInteger(each));
  if (kind === 'number' && !isWhole)
    return refuse(
      'step',
      'A size that is a number counts in whole numbers.',
      'Write default, min, max and step without decimals.',
    );
  return {
    type: 'size',
    at: attributes.at,
    name: attributes.text('name') ?? '',
    label: attributes.text('label') ?? '',
    kind,
    default: value,
    min,
    max,
    step,
  };
}

function declareChoice(
  element: Element,
  attributes: Attributes,
  context: ReadContext,
): ChoiceDeclaration | null {
  const children = checkChildren(element, ['Option'], context);
  const { kind, options } = readOptions(element, context);
  const spec = COMPONENTS.get('Option');
  const seen = new Set<number | string>();
  for (const child of children) {
    // Faults of the options themselves were reported by readOptions; here they are compared with each other.
    const constant = spec && readAttributes(child, spec, context).constant('value');
    if (!constant) continue;
    const { at } = readAttributes(child, spec, context);
    if (constant.kind !== kind && kind !== null) {
      context.problems.add(at, {
        rule: 'kinds-differ',
        message: `This option is ${describeKind(constant.kind)}, and the first is ${describeKind(kind)}.`,
        found: describeKind(constant.kind),
        wanted: describeKind(kind),
        hint: 'Write all options in one kind.',
      });
      return null;
    }
    if (seen.has(constant.value)) {
      context.problems.add(at, {
        rule: 'repeated-option',
        message: 'This option has the value of an earlier one.',
        hint: 'Leave one out.',
      });
    }
    seen.add(constant.value);
  }
  const initial = attributes.constant('default');
  if (options.length < 1) {
    context.problems.add(attributes.at, {
      rule: 'no-options',
      message: 'A choice needs options.',
      hint: 'Put <Option value="…" label="…" /> inside it.',
    });
    return null;
  }
  if (initial && !options.some((option) => option.value === initial.value)) {
    const values = options.map((option) => String(option.value));
    const near = suggestName(String(initial.value), values);
    context.problems.add(attributes.placeOf('default'), {
      rule: 'unknown-option',
      message: 'default is none of the options.',
      found: String(initial.value),
      hint: near ? `Did you mean "${near}"?` : 'Write it exactly as in one of the options.',
    });
    return null;
  }
  const name = attributes.text('name') ?? '';
  if (kind !== 'text' && UNITS.has(name)) {
    context.problems.add(attributes.placeOf('name'), {
      rule: 'bad-name',
      message: `“${name}” is a unit; only a choice of texts may be called so.`,
      found: name,
      hint: 'Choose another name.',
    });
    return null;
  }
  if (attributes.isBroken || !initial || (kind !== 'length' && kind !== 'number' && kind !== 'text'))
    return null;
  return {
    type: 'choice',
    at: attributes.at,
    name,
    label: attributes.text('label') ?? '',
    kind,
    default: initial.value,
    options,
  };
}

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

/** Sets a property only where there is a value, so that plain data stays plain. */
function given<K extends string, V>(name: K, value: V | undefined): { [P in K]?: V } {
  return (value === undefined ? {} : { [name]: value }) as { [P in K]?: V };
}

function declarePart(
  element: Element,
  attributes: Attributes,
  context: DeclareContext,
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

function declareConsumable(attributes: Attributes, context: ReadContext): ConsumableDeclaration | null {
  const coverage = attributes.coverage('coverage');
  const purpose = attributes.text('for');
  if (purpose === 'surface' && coverage?.measure === 'm') {
    context.problems.add(attributes.placeOf('coverage'), {
      rule: 'kinds-differ',
      message: 'A surface is covered in square metres, not in metres.',
      hint: 'Write coverage="10 m2/l".',
    });
    return null;
  }
  if (!coverage || (purpose !== 'surface' && purpose !== 'joint') || attributes.isBroken) return null;
  return {
    type: 'consumable',
    at: attributes.at,
    name: attributes.text('name') ?? '',
    for: purpose,
    coverage,
    coats: attributes.formula('coats') ?? {
      at: attributes.at,
      text: '1',
      expression: { op: 'value', kind: 'number', value: 1 },
    },
    ...given('price', attributes.price('price')),
  };
}

function constantNumber(attributes: Attributes, name: string): number | undefined {
  const value = attributes.constant(name)?.value;
  return typeof value === 'number' ? value : undefined;
}

/** Makes the declaration of one component; null where it is in error (which is reported) . */
function declare(element: Element, attributes: Attributes, context: DeclareContext): Declaration | null {
  const { at, text, formula } = attributes;
  const named = (name: string): string => text(name) ?? '';
  const prose = (): Prose =>
    asBlocks(
      compileProse(element.children, context, (child) => declareElement(child, context, element.name)),
    );
  const name = element.name ?? '';
  const place = PLACES.get(name);
  if (place) return { type: place, at };
  switch (name) {
    case 'Size':
      return declareSize(attributes, context);
    case 'Choice':
      return declareChoice(element, attributes, context);
    case 'Let': {
      const value = formula('value');
      return value && !attributes.isBroken
        ? { type: 'let', at, name: named('name'), value, ...given('note', text('note')) }
        : null;
    }
    case 'Material': {
      const thickness = formula('thickness');
      if (!thickness || attributes.isBroken) return null;
      const kind = named('kind') as MaterialKind;
      return {
        type: 'material',
        at,
        name: named('name'),
        label: named('label'),
        kind,
        thickness,
        ...given('width', formula('width')),
        ...given('length', formula('length')),
        ...given('sizes', formula('sizes')),
        grain: (text('grain') as Grain | undefined) ?? (kind === 'sheet' ? 'none' : 'length'),
        ...given('species', text('species')),
        ...given('price', attributes.price('price')),
        measured: attributes.flag('measured'),
      };
    }
    case 'Part':
      return declarePart(element, attributes, context);
    case 'Hardware': {
      const qty = formula('qty');
      const pack = constantNumber(attributes, 'pack');
      if (pack === 0) {
        context.problems.add(attributes.placeOf('pack'), {
          rule: 'wrong-kind',
          message: 'A pack holds at least one.',
          hint: 'Write pack={50}.',
        });
        return null;
      }
      if (!qty || attributes.isBroken) return null;
      return {
        type: 'hardware',
        at,
        name: named('name'),
        qty,
        ...given('unit', text('unit')),
        ...given('note', text('note')),
        ...given('pack', pack),
        ...given('price', attributes.price('price')),
        ...given('link', text('link')),
      };
    }
    case 'Consumable':
      return declareConsumable(attributes, context);
    case 'Tool':
      return {
        type: 'tool',
        at,
        name: named('name'),
        ...given('note', text('note')),
        ...given('link', text('link')),
        sponsored: attributes.flag('sponsored'),
      };
    case 'Require': {
      const that = formula('that');
      const message = prose();
      if (message.length === 0) {
        context.problems.add(at, {
          rule: 'message-missing',
          message: '<Require> has no sentence for the buyer.',
          hint: 'Write <Require that={…}>A bay must be at least {180*mm} wide.</Require>.',
        });
        return null;
      }
      return that ? { type: 'require', at, that, message } : null;
    }
    case 'Shelf': {
      const [span, load, part] = [formula('span'), formula('load'), text('part')];
      if (!span || !load || part === undefined) return null;
      return {
        type: 'shelf',
        at,
        part,
        span,
        load,
        position: text('at') ?? 'spread',
        ...given('species', text('species')),
      };
    }
    case 'Caution':
      return { type: 'caution', at, about: named('about'), text: prose() };
    case 'Step':
      return {
        type: 'step',
        at,
        title: named('title'),
        parts: attributes.words('parts'),
        tools: attributes.words('tools'),
        ...given('minutes', constantNumber(attributes, 'minutes')),
        body: prose(),
      };
    case 'Figure':
      return {
        type: 'figure',
        at,
        src: named('src'),
        alt: named('alt'),
        ...given('caption', text('caption')),
      };
    case 'View':
      return {
        type: 'view',
        at,
        from: named('from') as ViewDeclaration['from'],
        show: attributes.words('show'),
        ...given('explode', formula('explode')),
        ...given('step', constantNumber(attributes, 'step')),
      };
    case 'Template':
      return {
        type: 'template',
        at,
        part: named('part'),
        ...given('scale', constantNumber(attributes, 'scale')),
      };
    default:
      return null;
  }
}

/**
 * Reads one component wherever it stands, checks it and appends its declaration; nested ones follow it. Gives its index, or
 * null when it is unknown or misplaced.
 */
export function declareElement(
  element: Element,
  context: DeclareContext,
  parent: string | null = null,
): number | null {
  const spec = COMPONENTS.get(element.name ?? '');
  const isMisplaced =
    spec?.inside !== undefined || (parent !== null && (parent !== 'Step' || element.name === 'Step'));
  if (spec === undefined || isMisplaced) {
    reportUnknown(
      element,
      context,
      [],
      `<${element.name ?? ''}> has no place ${parent === null ? 'by itself' : `inside <${parent}>`}.`,
      parent ?? '',
    );
    return null;
  }
  const index = context.declarations.push(null) - 1;
  const attributes = readAttributes(element, spec, context);
  if (spec.children === 'none') checkChildren(element, [], context);
  const declaration = declare(element, attributes, context);
  const when = attributes.formula('when');
  if (declaration && when) declaration.when = when;
  context.declarations[index] = declaration;
  return index;
}
