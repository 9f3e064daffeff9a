/**
 * The components of the plan language, as one table: checks, did-you-mean, the studio's reference and the tests all read it.
 */

/** How an attribute is written and what it is read as. */
export type AttributeType =
  /** A name that formulas use; a part's mark; plain text; a web address; the name of an uploaded picture. */
  | 'name'
  | 'mark'
  | 'text'
  | 'address'
  | 'picture'
  /** One of `options`; one or several of `options` in one text; a present or absent word. */
  | 'word'
  | 'words'
  | 'flag'
  /** Marks of declared parts; one mark; a declared material; texts between commas. */
  | 'marks'
  | 'part'
  | 'material'
  | 'texts'
  /** A formula of one kind; a length, angle and mass may also be written as text. */
  | 'length'
  | 'angle'
  | 'number'
  | 'mass'
  | 'yesno'
  /** A formula of any kind. */
  | 'any'
  /** A length, angle or number without names in it; a whole number from 0 without names in it. */
  | 'constant'
  | 'count'
  /** What an option stands for: a constant or a text. */
  | 'option'
  /** Lists of lengths: [x, y], [x, y, z], a length or [x, y], stock sizes; an axis and an angle. */
  | 'point'
  | 'place'
  | 'spacing'
  | 'sizes'
  | 'turn'
  /** Two axes, `z y`; a written price; a written coverage. */
  | 'axes'
  | 'price'
  | 'coverage';

export interface AttributeSpec {
  type: AttributeType;
  doc: string;
  required?: true;
  options?: readonly string[];
}

export interface ComponentSpec {
  doc: string;
  attributes: Readonly<Record<string, AttributeSpec>>;
  /** What may stand between its tags. */
  children: 'none' | 'prose' | 'inline' | 'options' | 'shape';
  /** The component it must stand in, where that is not the plan itself. */
  inside?: string;
}

const CORNERS = ['left bottom', 'right bottom', 'left top', 'right top'] as const;
const EDGES = ['left', 'right', 'bottom', 'top'] as const;
const FACES = ['face', 'back'] as const;

/** Topics of a caution that the house has usual wording for; other topics are free text. */
export const CAUTION_TOPICS = [
  'dust',
  'wall fixing',
  'tip-over',
  'load',
  'children',
  'wiring',
  'finish',
  'blade',
] as const;

const when: AttributeSpec = { type: 'yesno', doc: 'leaves the component out unless true' };
const must = (type: AttributeType, doc: string, options?: readonly string[]): AttributeSpec => ({
  type,
  doc,
  required: true,
  ...(options && { options }),
});
const may = (type: AttributeType, doc: string, options?: readonly string[]): AttributeSpec => ({
  type,
  doc,
  ...(options && { options }),
});

const shapeOf = (doc: string, attributes: Record<string, AttributeSpec>): ComponentSpec => ({
  doc,
  attributes: { ...attributes, when },
  children: 'none',
  inside: 'Part',
});

const placeFor = (doc: string): ComponentSpec => ({ doc, attributes: { when }, children: 'none' });

/** Every component by its name. */
export const COMPONENTS: ReadonlyMap<string, ComponentSpec> = new Map<string, ComponentSpec>([
  [
    'Size',
    {
      doc: 'a governing length, angle or whole number that the buyer may set',
      children: 'none',
      attributes: {
        name: must('name', 'the name that formulas use'),
        label: must('text', 'what the buyer reads'),
        default: must('constant', 'the value at first'),
        min: must('constant', 'the least value, allowed itself'),
        max: must('constant', 'the greatest value, allowed itself'),
        step: must('constant', 'the step of the control'),
        when,
      },
    },
  ],
  [
    'Choice',
    {
      doc: 'a governing option that the buyer may set',
      children: 'options',
      attributes: {
        name: must('name', 'the name that formulas use'),
        label: must('text', 'what the buyer reads'),
        default: must('option', 'the value at first, one of the options'),
        when,
      },
    },
  ],
  [
    'Option',
    {
      doc: 'one option of a choice',
      children: 'none',
      inside: 'Choice',
      attributes: {
        value: must('option', 'a length, a number or a text'),
        label: must('text', 'what the buyer reads'),
      },
    },
  ],
  [
    'Let',
    {
      doc: 'a derived value, for use in formulas',
      children: 'none',
      attributes: {
        name: must('name', 'the name that formulas use'),
        value: must('any', 'the formula'),
        note: may('text', 'what it is, for the author'),
        when,
      },
    },
  ],
  [
    'Material',
    {
      doc: 'what parts are cut from',
      children: 'none',
      attributes: {
        name: must('name', 'the name that parts and formulas use'),
        label: must('text', 'what the buyer reads'),
        kind: must('word', 'how it is sold', ['sheet', 'board', 'bar']),
        thickness: must('length', 'its nominal thickness'),
        width: may('length', 'its width, for a bar'),
        length: may('length', 'its length, where formulas need it'),
        sizes: may('sizes', 'the stock sizes it is sold in: [[length, width], …], for a bar [length, …]'),
        grain: may('word', 'along which side of the stock the grain runs', ['length', 'width', 'none']),
        species: may('text', 'the wood, for mass and stiffness'),
        price: may('price', 'what it costs, per piece or per measure'),
        measured: may('flag', 'lets the buyer enter the real thickness'),
        when,
      },
    },
  ],
  [
    'Part',
    {
      doc: 'a piece to be cut',
      children: 'shape',
      attributes: {
        mark: must('mark', 'the letter, or letter and number, by which it is called'),
        name: must('text', 'what it is'),
        material: must('material', 'what it is cut from'),
        qty: must('number', 'how many to cut; none leaves the part out'),
        length: must('length', 'finished length'),
        width: may('length', 'finished width; a bar gives its own when left out'),
        thickness: may('length', 'finished thickness; the material’s when left out'),
        grain: may('word', 'along which side of the part the grain must run', ['length', 'width', 'none']),
        along: may('axes', 'the axes of the piece that its length and width run along'),
        at: may('place', 'its lower left front corner in the piece'),
        every: may('place', 'the step from one piece to the next'),
        turn: may('turn', 'an axis and an angle that it is swung by, about that corner'),
        handed: may('flag', 'makes every second piece the mirror image of the first'),
        edges: may('words', 'the edges that are banded or dressed', EDGES),
        when,
      },
    },
  ],
  [
    'Notch',
    shapeOf('a corner cut away', {
      corner: must('word', 'which corner', CORNERS),
      length: must('length', 'along the part'),
      width: must('length', 'across the part'),
    }),
  ],
  [
    'Cutout',
    shapeOf('an opening inside the part', {
      at: must('point', 'its lower left corner'),
      length: must('length', 'along the part'),
      width: must('length', 'across the part'),
      radius: may('length', 'of its corners'),
      depth: may('length', 'how deep, where it does not go through'),
      through: may('flag', 'it goes through, which it does anyway unless a depth is given'),
    }),
  ],
  [
    'Groove',
    shapeOf('a groove or dado in a face', {
      face: may('word', 'which face', FACES),
      edge: must('word', 'the edge that it runs along', EDGES),
      inset: may('length', 'from that edge to its near side; 0 when left out'),
      width: must('length', 'across the groove'),
      depth: must('length', 'into the face'),
      stop: may('length', 'how far before the far end it stops; through when left out'),
    }),
  ],
  [
    'Rabbet',
    shapeOf('a step along an edge', {
      face: may('word', 'which face', FACES),
      edge: must('word', 'which edge', EDGES),
      width: must('length', 'in from the edge'),
      depth: must('length', 'into the face'),
    }),
  ],
  [
    'Hole',
    shapeOf('a hole, or a row of them along the part', {
      face: may('word', 'which face', FACES),
      at: must('point', 'its centre, or that of the first'),
      diameter: must('length', 'of the hole'),
      depth: may('length', 'how deep; through when left out'),
      count: may('number', 'how many in the row'),
      spacing: may('spacing', 'between centres, along the length or as [x, y]'),
    }),
  ],
  [
    'Taper',
    shapeOf('an end cut at an angle in the plane of the face', {
      end: must('word', 'which end', ['left', 'right']),
      angle: must('angle', 'from square'),
    }),
  ],
  [
    'Bevel',
    shapeOf('an edge cut at an angle through the thickness', {
      edge: must('word', 'which edge', EDGES),
      angle: must('angle', 'from square'),
    }),
  ],
  [
    'RoundOver',
    shapeOf('a rounded corner', {
      corner: must('word', 'which corner, or all', [...CORNERS, 'all']),
      radius: must('length', 'of the corner'),
    }),
  ],
  [
    'Hardware',
    {
      doc: 'something that is bought',
      children: 'none',
      attributes: {
        name: must('text', 'what it is'),
        qty: must('number', 'how many are needed'),
        unit: may('text', 'pair, set, m …; piece when left out'),
        note: may('text', 'what to look for'),
        pack: may('count', 'how many are in a pack'),
        price: may('price', 'of one, or of a pack where there is one'),
        link: may('address', 'where it is described'),
        when,
      },
    },
  ],
  [
    'Consumable',
    {
      doc: 'glue or finish, its quantity computed from the parts',
      children: 'none',
      attributes: {
        name: must('text', 'what it is'),
        for: must('word', 'what it covers', ['surface', 'joint']),
        coverage: must('coverage', 'how far one unit goes: "10 m2/l", "35 m/bottle"'),
        coats: may('number', 'how many coats; 1 when left out'),
        price: may('price', 'of one unit'),
        when,
      },
    },
  ],
  [
    'Tool',
    {
      doc: 'a tool that the plan needs',
      children: 'none',
      attributes: {
        name: must('text', 'what it is'),
        note: may('text', 'what it is for'),
        link: may('address', 'where it is described'),
        sponsored: may('flag', 'the link earns the author money; it is said wherever it shows'),
        when,
      },
    },
  ],
  [
    'Require',
    {
      doc: 'a limit between sizes, with the sentence that a buyer reads when it is broken',
      children: 'inline',
      attributes: { that: must('yesno', 'what must hold'), when },
    },
  ],
  [
    'Shelf',
    {
      doc: 'a part that carries load; its sag is computed and shown as guidance',
      children: 'none',
      attributes: {
        part: must('part', 'the mark of the part'),
        span: must('length', 'clear span between supports'),
        load: must('mass', 'what it carries'),
        at: may('word', 'where the load stands; spread when left out', ['spread', 'middle']),
        species: may('text', 'the wood, where the material does not say'),
        when,
      },
    },
  ],
  [
    'Caution',
    {
      doc: 'a danger, with the usual wording of the house and the author’s own',
      children: 'inline',
      attributes: { about: must('text', `${CAUTION_TOPICS.join(', ')}, or a topic of your own`), when },
    },
  ],
  [
    'Step',
    {
      doc: 'one step of the work, in order',
      children: 'prose',
      attributes: {
        title: must('text', 'what is done'),
        parts: may('marks', 'the marks of the parts in hand'),
        tools: may('texts', 'the tools, commas between'),
        minutes: may('count', 'how long it takes'),
        when,
      },
    },
  ],
  [
    'Figure',
    {
      doc: 'an uploaded picture',
      children: 'none',
      attributes: {
        src: must('picture', 'the name of the picture'),
        alt: must('text', 'what it shows, for those who do not see it'),
        caption: may('text', 'what stands under it'),
        when,
      },
    },
  ],
  [
    'View',
    {
      doc: 'a drawing made from the parts',
      children: 'none',
      attributes: {
        from: must('word', 'where it is seen from', ['front', 'side', 'top', 'back', 'corner']),
        show: may('marks', 'the marks of the parts shown; all when left out'),
        explode: may('length', 'how far the parts are drawn apart'),
        step: may('count', 'the step that it belongs to'),
        when,
      },
    },
  ],
  [
    'Template',
    {
      doc: 'a full-size template of a part',
      children: 'none',
      attributes: {
        part: must('part', 'the mark of the part'),
        scale: may('constant', 'drawn size over real size; 1 when left out'),
        when,
      },
    },
  ],
  ['PartsTable', placeFor('where the parts table stands')],
  ['StockLayout', placeFor('where the stock layout stands')],
  ['HardwareTable', placeFor('where the hardware table stands')],
  ['ShoppingList', placeFor('where the shopping list stands')],
]);

/** The attributes of a component by name. A Map, so that no name reaches a prototype. */
export function attributesOf(spec: ComponentSpec): ReadonlyMap<string, AttributeSpec> {
  return new Map(Object.entries(spec.attributes));
}
