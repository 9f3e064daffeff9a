import type { BookInput, BookPaper } from '#lib/book/types.ts';
import type { Place, ResolvedPart, ResolvedPlan, ResolvedStep, UnitSystem } from '#lib/plan/types.ts';
import { loadBookFonts } from '#server/copies/fonts.ts';

const at: Place = { line: 1, column: 1, length: 1 };
const INCH = 25_400_000;
const MM = 1_000_000;

function part(mark: string, name: string, sizes: [number, number, number]): ResolvedPart {
  const [length, width, thickness] = sizes;
  return {
    mark,
    name,
    material: 'ply',
    qty: 2,
    length,
    width,
    thickness,
    grain: 'length',
    handed: false,
    edges: [],
    shape: [],
    at,
  };
}

/** A step of a few lines with a length in its prose. */
export function sampleStep(number: number, text = 'Cut the sides and mark their front edges.'): ResolvedStep {
  return {
    number,
    title: `Work number ${number}`,
    parts: ['A', 'B'],
    tools: ['track saw'],
    minutes: 30,
    body: [
      {
        node: 'paragraph',
        children: [
          { node: 'text', text: `${text} Set the fence to ` },
          { node: 'value', kind: 'length', value: 17.75 * INCH, text: '17 3/4"' },
          { node: 'text', text: ' and cut all of them.' },
        ],
      },
    ],
  };
}

/** A small resolved plan, written out by hand so that the book is tested apart from the plan language. */
export function samplePlan(units: UnitSystem): ResolvedPlan {
  return {
    title: 'Hall shelf',
    units,
    sizes: [
      {
        name: 'width',
        label: 'Overall width',
        kind: 'length',
        value: 42 * INCH,
        default: 42 * INCH,
        min: 0,
        max: 99 * INCH,
        step: INCH,
      },
    ],
    choices: [
      {
        name: 'foot',
        label: 'Stands on',
        kind: 'text',
        value: 'pads',
        options: [{ value: 'pads', label: 'felt pads' }],
      },
    ],
    values: [],
    parts: [
      {
        ...part('A', 'Side', [17.75 * INCH, 12.5 * INCH, 0.75 * INCH]),
        shape: [
          {
            type: 'groove',
            at,
            values: { inset: 12 * MM, width: 6 * MM, depth: 6 * MM },
            words: { face: 'face', edge: 'bottom' },
            flags: [],
          },
        ],
      },
      part('B', 'Shelf', [400.5 * MM, 300 * MM, 18 * MM]),
    ],
    materials: [
      {
        name: 'ply',
        label: 'Birch plywood',
        kind: 'sheet',
        grain: 'length',
        thickness: 17.6 * MM,
        nominal: 18 * MM,
        measured: true,
        sizes: [[2440 * MM, 1220 * MM]],
        pieces: 4,
        areaM2: 0.53,
        boardFeet: 4,
        volumeM3: 0.0095,
        lengthM: 1.7,
        leastStock: 1,
        price: { minor: 7800, currency: 'EUR', per: 'piece' },
        costMinor: 7800,
      },
    ],
    hardware: [
      {
        name: 'Screw 4 x 40',
        qty: 32,
        pack: 50,
        packs: 1,
        price: { minor: 690, currency: 'EUR', per: 'piece' },
        costMinor: 690,
      },
    ],
    consumables: [{ name: 'Hard oil', for: 'surface', coats: 2, amount: 0.25, unit: 'l' }],
    tools: [
      {
        name: 'Marking gauge',
        note: 'for the grooves',
        link: 'https://tools.example/gauge',
        sponsored: true,
      },
    ],
    requirements: [],
    cautions: [{ about: 'wall fixing', text: 'Fix the shelf to the studs.' }],
    shelves: [
      {
        part: 'B',
        span: 400 * MM,
        loadKg: 20,
        at: 'spread',
        species: 'birch plywood',
        sag: 0.4 * MM,
        limits: [{ name: 'span/200', limit: 2 * MM, holds: true }],
        approximate: true,
        guidance: 'Guidance only, no approval.',
      },
    ],
    steps: [1, 2, 3].map((number) => sampleStep(number)),
    views: [],
    templates: [],
    body: [{ node: 'paragraph', children: [{ node: 'text', text: 'A shelf for a narrow hall.' }] }],
    costs: [{ currency: 'EUR', minor: 8490 }],
    overall: { width: 42 * INCH, depth: 300 * MM, height: 400 * MM },
    problems: [],
  };
}

/** What a book of the sample plan is set from. */
export async function sampleInput(
  change: { units?: UnitSystem; paper?: BookPaper; resolved?: Partial<ResolvedPlan> } = {},
): Promise<BookInput> {
  return {
    resolved: { ...samplePlan(change.units ?? 'in'), ...change.resolved },
    front: {
      title: 'Hall shelf',
      summary: 'A shelf for a narrow hall.',
      skill: 2,
      hours: [3, 5],
      spaces: [],
      tools: ['drill'],
      tags: [],
    },
    imprint: 'Low Fell Joinery',
    planNumber: 'hall-shelf',
    revision: { letter: 'B', date: '2026-11-20' },
    paper: change.paper ?? 'a4',
    fonts: await loadBookFonts(),
    pictures: new Map(),
    history: [
      { letter: 'A', date: '2026-10-01', notes: 'First issue' },
      { letter: 'B', date: '2026-11-20', notes: 'Part B is 2 mm shorter' },
    ],
  };
}
