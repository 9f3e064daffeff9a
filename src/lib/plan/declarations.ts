import type { ReadContext } from './attribute-reading.ts';
import { readAttributes } from './attributes.ts';
import type { Attributes } from './attributes.ts';
import { checkChildren, reportUnknown } from './children.ts';
import { COMPONENTS } from './components.ts';
import { declareSize, declareChoice } from './declare-inputs.ts';
import { declarePart } from './declare-part.ts';
import { given } from './given.ts';
import type { Element } from './parse.ts';
import { asBlocks, compileProse } from './prose.ts';
import type {
  ConsumableDeclaration,
  Declaration,
  Grain,
  MaterialKind,
  PlaceDeclaration,
  Prose,
  ViewDeclaration,
} from './types.ts';

/** What reading the components carries along: the declarations so far, in the order of the file. */
export interface DeclareContext extends ReadContext {
  declarations: (Declaration | null)[];
}

const PLACES: ReadonlyMap<string, PlaceDeclaration['type']> = new Map<string, PlaceDeclaration['type']>([
  ['PartsTable', 'parts-table'],
  ['StockLayout', 'stock-layout'],
  ['HardwareTable', 'hardware-table'],
  ['ShoppingList', 'shopping-list'],
]);

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
