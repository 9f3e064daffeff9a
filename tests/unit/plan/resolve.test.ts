import fc from 'fast-check';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

import { compilePlan } from '#lib/plan/compile.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { ResolvedPlan } from '#lib/plan/types.ts';
import { fitOf, planOf } from './plan-text.ts';

const MM = 1_000_000;
const example = compilePlan(
  readFileSync(new URL('./fixtures/example-plan.mdx', import.meta.url), 'utf8'),
).plan;
if (!example) throw new Error('The example does not compile.');

const valueIn = (resolved: ResolvedPlan, name: string): unknown =>
  resolved.values.find((value) => value.name === name)?.value;
const messagesOf = (text: string, values = {}): string[] =>
  resolvePlan(planOf(text), fitOf(values)).problems.map((problem) => problem.message);

describe('derived values', () => {
  it.each([
    ['width / 3', 300 * MM],
    ['width / 7', 128_571_429],
    ['(width / 7) * 7', 900 * MM],
    ['roundDown(width / 7, 5*mm)', 125 * MM],
    ['roundUp(width / 7, 5*mm)', 130 * MM],
    ['round(width / 7, 5*mm)', 130 * MM],
    ['ceil(bays / 3)', 1],
    ['floor(0.3 / 0.1)', 3],
    ['-width % (350*mm)', -200 * MM],
    ['hypot(300*mm, 400*mm)', 500 * MM],
    ['sqrt(300*mm * 300*mm)', 300 * MM],
    ['min(width, 1/2*m, 20*inch)', 500 * MM],
    ['max([width, 1*m][0] === 1 ? 1 : 1, 2)', null],
    ['sin(30*deg)', 0.5],
    ['tan(45*deg)', 1],
    ['cos(90*deg)', 0],
    ['atan2(1*mm, 1*mm)', 45],
    ['asin(1)', 90],
    ['abs(-width)', 900 * MM],
    ['leg === "peg" ? 60*mm : 0*mm', 60 * MM],
    ['leg !== "pad" && bays >= 2', true],
    ['width / 3 * 3 === width', true],
    ['!(bays > 2) || width > 2*m', true],
    ['leg', 'peg'],
    ['width * 300*mm', 2.7e17],
    ['(17 + 3/4)*inch', 450_850_000],
    ['3 * 1/64*inch', 1_190_625],
    ['2*lb + 1*kg', 1.90718474],
    ['[width, 300*mm]', [900 * MM, 300 * MM]],
    ['A.length - 2*A.thickness + ply.thickness', 882 * MM],
    ['A.qty', 2],
  ])('%s', (formula, value) => {
    if (value === null) {
      expect(() => planOf(`<Let name="x" value={${formula}} />`)).toThrow('Square brackets behind a name');
      return;
    }
    expect(valueIn(resolvePlan(planOf(`<Let name="x" value={${formula}} />`), fitOf()), 'x')).toEqual(value);
  });

  it('reads a unit beside * and a choice elsewhere where both are called foot', () => {
    const plan = planOf(
      '<Choice name="foot" label="F" default="pads"><Option value="pads" label="p" /></Choice>\n<Let name="x" value={foot === "pads" ? 2*foot : 1*mm} />',
    );
    expect(valueIn(resolvePlan(plan, fitOf()), 'x')).toBe(609_600_000);
  });

  it('are refused where they are not finite or beyond a kilometre, once, with what led there', () => {
    const text =
      '<Let name="gap" value={width / (bays - 2)} />\n<Let name="half" value={gap / 2} />\n<Let name="far" value={width * 2000} />';
    expect(resolvePlan(planOf(text), fitOf()).problems).toMatchObject([
      {
        line: 12,
        column: 24,
        rule: 'not-finite',
        message: '“gap” is not a finite number (value={width / (bays - 2)}, with width 900 mm, bays 2).',
      },
      {
        rule: 'beyond-limit',
        message: '“far” is longer than 1 km (value={width * 2000}, with width 900 mm).',
      },
    ]);
  });
});

describe('impossible parts', () => {
  const part = (attributes: string, children = ''): string =>
    `<Material name="mdf" label="MDF" kind="sheet" thickness="19 mm" sizes={[[2440*mm, 1220*mm]]} grain="length" />\n<Part mark="B" name="Rail" material="mdf" ${attributes}>${children}</Part>`;
  it.each([
    [
      'qty={1} length={width - 1*m} width={300*mm}',
      '',
      'Part B “Rail” would be −100 mm long (length={width - 1*m}, with width 900 mm).',
    ],
    ['qty={1} length={width} width={0*mm}', '', 'Part B “Rail” would be 0 mm wide (width={0*mm}).'],
    [
      'qty={bays / 4} length={width} width={300*mm}',
      '',
      'Part B “Rail” would be cut 0.5 times (qty={bays / 4}, with bays 2).',
    ],
    ['qty={-1} length={width} width={300*mm}', '', 'Part B “Rail” would be cut −1 times (qty={-1}).'],
    [
      'qty={1e9} length={width} width={300*mm}',
      '',
      'Part B “Rail” would be cut 1000000000 times (qty={1e9}).',
    ],
    [
      'qty={1} length={3*width} width={300*mm}',
      '',
      'Part B “Rail” would be 2700 mm by 300 mm, larger than any stock of “MDF” (length={3*width}, with width 900 mm).',
    ],
    [
      'qty={1} length={300*mm} width={width*1.5}',
      '',
      'Part B “Rail” would be 300 mm by 1350 mm, larger than any stock of “MDF” (width={width*1.5}, with width 900 mm).',
    ],
    [
      'qty={1} length={width} width={300*mm} thickness={20*mm}',
      '',
      'Part B “Rail” would be 20 mm thick, and “MDF” is 19 mm (thickness={20*mm}).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Groove edge="left" inset={10*mm} width={6*mm} depth={19*mm} />',
      'Part B “Rail”: the groove is as deep as the part is thick, or deeper, at 19 mm (depth={19*mm}).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Groove edge="bottom" inset={296*mm} width={6*mm} depth={5*mm} />',
      'Part B “Rail”: the groove reaches beyond the face, at 6 mm (width={6*mm}).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Hole at={[width - 2*mm, 20*mm]} diameter={6*mm} />',
      'Part B “Rail”: the hole reaches beyond the part, at 898 mm, 20 mm (at={[width - 2*mm, 20*mm]}, with width 900 mm).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Hole at={[20*mm, 20*mm]} diameter={6*mm} count={bays * 20} spacing={32*mm} />',
      'Part B “Rail”: the hole and its row reach beyond the part, at 32 mm (spacing={32*mm}).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Notch corner="left bottom" length={20*mm} width={300*mm} />',
      'Part B “Rail”: the notch is as wide as the part, or wider, at 300 mm (width={300*mm}).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Cutout at={[20*mm, 20*mm]} length={40*mm} width={290*mm} />',
      'Part B “Rail”: the cutout reaches beyond the part, at 20 mm, 20 mm (at={[20*mm, 20*mm]}).',
    ],
    [
      'qty={1} length={width} width={300*mm}',
      '<Bevel edge="left" angle={90*deg} />',
      'Part B “Rail”: the bevel cuts the part away, at 90° (angle={90*deg}).',
    ],
  ])('%s %s', (attributes, children, message) => {
    expect(messagesOf(part(attributes, children))).toEqual([message]);
  });

  it('are possible where the grain lets the part lie across, and not where it does not', () => {
    const text = (grain: string): string => part(`qty={1} length={1200*mm} width={2*m} grain="${grain}"`);
    expect(messagesOf(text('width'))).toEqual([]);
    expect(messagesOf(text('none'))).toEqual([]);
    expect(messagesOf(text('length'))).toHaveLength(1);
  });

  it('take a board that is wider than any stock as a glue-up, with advice only', () => {
    const text =
      '<Material name="oak" label="Oak" kind="board" thickness="20 mm" sizes={[[2*m, 150*mm]]} />\n<Part mark="B" name="Top" material="oak" qty={1} length={1*m} width={400*mm} />';
    expect(resolvePlan(planOf(text), fitOf()).problems).toMatchObject([
      {
        rule: 'glue-up',
        severity: 'advice',
        message: expect.stringContaining('wider than any board of “Oak”') as unknown,
      },
    ]);
  });
});

describe('when', () => {
  it('leaves parts, hardware, steps, views and shapes out, and counts a left-out part as none', () => {
    const text = `<Part mark="B" name="Post" material="ply" qty={4} length={width} width={60*mm} when={bays > 2} />
<Let name="posts" value={B.qty} />
<Hardware name="Bolt" qty={2*B.qty} />
<Hardware name="Nut" qty={1} when={bays > 2} />
<View from="front" show="A B" when={bays < 9} />
<Step title="Posts" parts="A B" when={bays > 2}>Cut.</Step>

<Step title="Rest" parts="A B">Cut.</Step>`;
    const [few, many] = [2, 3].map((bays) => resolvePlan(planOf(text), fitOf({ bays })));
    expect([few, many].map((each) => each?.parts.map((part) => part.mark))).toEqual([['A'], ['A', 'B']]);
    expect([few, many].map((each) => each?.hardware.map(({ name, qty }) => [name, qty]))).toEqual([
      [],
      [
        ['Bolt', 8],
        ['Nut', 1],
      ],
    ]);
    expect(
      [few, many].map((each) => each?.steps.map(({ number, title, parts }) => [number, title, parts])),
    ).toEqual([
      [[1, 'Rest', ['A']]],
      [
        [1, 'Posts', ['A', 'B']],
        [2, 'Rest', ['A', 'B']],
      ],
    ]);
    expect(few?.views).toMatchObject([{ from: 'front', show: ['A'] }]);
  });
});

describe('totals of the example at its defaults', () => {
  const resolved = resolvePlan(example, fitOf());

  it('adds the faces of the sheets up', () => {
    // 2·432·336.55 + 1100·336.55 + 2·372·326.55 + 2·1064·60 + 2·300·110 mm², by hand.
    const mm2 = 2 * 432 * 336.55 + 1100 * 336.55 + 2 * 372 * 326.55 + 2 * 1064 * 60 + 2 * 300 * 110;
    expect(resolved.materials[0]).toMatchObject({ name: 'ply', pieces: 9, leastStock: 1, costMinor: 7800 });
    expect(resolved.materials[0]?.areaM2).toBeCloseTo(mm2 / 1e6, 9);
  });

  it('rounds hardware up to packs and prices packs', () => {
    expect(resolved.hardware[1]).toMatchObject({
      name: 'Screw 4 x 40',
      qty: 32,
      pack: 50,
      packs: 1,
      costMinor: 690,
    });
  });

  it('covers both faces and all edges of every piece with each coat', () => {
    const faces = (l: number, w: number, t: number): number => 2 * (l * w + l * t + w * t);
    const mm2 =
      2 * faces(432, 336.55, 18) +
      faces(1100, 336.55, 18) +
      2 * faces(372, 326.55, 18) +
      2 * faces(1064, 60, 18) +
      faces(1100, 40, 19.05) +
      faces(300.666667, 300, 6) +
      2 * faces(300, 110, 18);
    expect(resolved.consumables[0]?.amount).toBeCloseTo((mm2 / 1e6 / 10) * 2, 9);
  });

  it('finds the size of the placed piece', () => {
    expect(resolved.overall).toEqual({ width: 1100 * MM, depth: 355_600_000, height: 450 * MM });
  });

  it('takes the buyer’s own price', () => {
    const own = resolvePlan(example, { ...fitOf(), prices: { ply: 5000 } });
    expect(own.materials[0]).toMatchObject({ price: { minor: 5000 }, costMinor: 5000 });
    expect((resolved.costs[0]?.minor ?? 0) - (own.costs[0]?.minor ?? 0)).toBe(2800);
  });

  it('appends the tables that the author did not place', () => {
    expect(resolved.body.filter((node) => node.node === 'place').map((node) => node.what)).toEqual([
      'parts-table',
      'stock-layout',
      'hardware-table',
      'shopping-list',
    ]);
  });
});

describe('turned parts', () => {
  it('bound the piece where they end up', () => {
    const text =
      '<Part mark="B" name="Leaf" material="ply" qty={2} length={400*mm} width={300*mm} along="x y" at={[0*mm, 0*mm, 0*mm]} every={[0*mm, 0*mm, 100*mm]} turn={["z", 90*deg]} />';
    expect(resolvePlan(planOf(text), fitOf()).overall).toEqual({
      width: 300 * MM,
      depth: 400 * MM,
      height: 118 * MM,
    });
  });
});

describe('laws of resolving', () => {
  const fits = fc.record({
    width: fc.integer({ min: 600 * MM, max: 1600 * MM }),
    depth: fc.integer({ min: 304_800_000, max: 457_200_000 }),
    height: fc.integer({ min: 400 * MM, max: 500 * MM }),
    bays: fc.integer({ min: 1, max: 5 }),
    foot: fc.constantFrom('plinth', 'pads'),
    slide: fc.constantFrom(250 * MM, 300 * MM, 350 * MM),
  });

  it('gives the same for the same fit', () => {
    fc.assert(
      fc.property(fits, (values) => {
        expect(resolvePlan(example, fitOf(values))).toEqual(
          resolvePlan(structuredClone(example), fitOf(values)),
        );
      }),
      { numRuns: 30 },
    );
  });

  it('changes nothing but printed words with the units', () => {
    const bare = (resolved: ResolvedPlan): unknown => [
      resolved.values,
      resolved.parts,
      resolved.materials,
      resolved.hardware,
      resolved.costs,
    ];
    fc.assert(
      fc.property(fits, (values) => {
        expect(bare(resolvePlan(example, fitOf(values, {}, 'in')))).toEqual(
          bare(resolvePlan(example, fitOf(values))),
        );
      }),
      { numRuns: 30 },
    );
  });

  it('keeps every length whole and everything finite', () => {
    fc.assert(
      fc.property(fits, fc.integer({ min: 100_000, max: 40 * MM }), (values, ply) => {
        const resolved = resolvePlan(example, fitOf(values, { ply }));
        for (const part of resolved.parts) {
          for (const size of [part.length, part.width, part.thickness])
            expect(Number.isInteger(size)).toBe(true);
        }
        expect(JSON.stringify(resolved)).not.toMatch(/null|NaN|Infinity/);
      }),
    );
  });

  it('survives being stored as JSON', () => {
    expect(resolvePlan(JSON.parse(JSON.stringify(example)) as typeof example, fitOf())).toEqual(
      resolvePlan(example, fitOf()),
    );
  });

  it('takes any value at all in a fit without throwing, and stays inside the limits', () => {
    fc.assert(
      fc.property(
        fc.dictionary(
          fc.constantFrom('width', 'bays', 'foot', 'slide', '__proto__', 'x'),
          fc.oneof(fc.double(), fc.string()),
        ),
        (values) => {
          const resolved = resolvePlan(example, fitOf(values));
          for (const size of resolved.sizes) {
            expect(size.value).toBeGreaterThanOrEqual(size.min);
            expect(size.value).toBeLessThanOrEqual(size.max);
          }
        },
      ),
    );
  });
});
