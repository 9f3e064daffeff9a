import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compilePlan } from '#lib/plan/compile.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { ResolvedMaterial, ResolvedPart, ResolvedPlan } from '#lib/plan/types.ts';
import { type CuttingSettings, layOutPlan, readPlanProblems } from '#lib/stock/from-plan.ts';
import { verifyLayout } from '#lib/stock/verify-layout.ts';

const MM = 1_000_000;
const settings: CuttingSettings = { kerfNm: 3 * MM, trimNm: 10 * MM, stock: [] };

function material(given: Partial<ResolvedMaterial>): ResolvedMaterial {
  return {
    name: 'ply',
    label: 'Plywood',
    kind: 'sheet',
    grain: 'length',
    thickness: 18 * MM,
    nominal: 18 * MM,
    measured: false,
    sizes: [[2440 * MM, 1220 * MM]],
    pieces: 0,
    areaM2: 0,
    boardFeet: 0,
    volumeM3: 0,
    lengthM: 0,
    leastStock: 0,
    ...given,
  };
}
function part(given: Partial<ResolvedPart>): ResolvedPart {
  return {
    mark: 'A',
    name: 'Side',
    material: 'ply',
    qty: 1,
    length: 800 * MM,
    width: 300 * MM,
    thickness: 18 * MM,
    grain: 'length',
    handed: false,
    edges: [],
    shape: [],
    at: { line: 1, column: 1, length: 1 },
    ...given,
  };
}
function plan(materials: ResolvedMaterial[], parts: ResolvedPart[]): ResolvedPlan {
  return {
    title: 'A plan',
    units: 'mm',
    sizes: [],
    choices: [],
    values: [],
    parts,
    materials,
    hardware: [],
    consumables: [],
    tools: [],
    requirements: [],
    cautions: [],
    views: [],
    templates: [],
    shelves: [],
    steps: [],
    body: [],
    costs: [],
    problems: [],
  };
}

describe('the problems of a plan', () => {
  it('are one for each material that parts are cut from, in the order of the plan', () => {
    const materials = [
      material({ name: 'oak', kind: 'board' }),
      material({ name: 'unused' }),
      material({}),
      material({ name: 'rod', kind: 'bar', sizes: [[2000 * MM]] }),
    ];
    const parts = [part({}), part({ mark: 'B', material: 'rod' }), part({ mark: 'C', material: 'oak' })];
    const problems = readPlanProblems(plan(materials, parts), settings);
    expect(problems.map((p) => [p.material, p.problem.kind])).toEqual([
      ['oak', 'sheet'],
      ['ply', 'sheet'],
      ['rod', 'bar'],
    ]);
    // Boards are ripped first.
    expect(problems.map((p) => p.problem.kind === 'sheet' && p.problem.ripFirst)).toEqual([
      true,
      false,
      false,
    ]);
  });

  it('keep grain: a part turns only when it or its material has none', () => {
    const parts = [part({}), part({ mark: 'B', grain: 'none' }), part({ mark: 'C', grain: 'width' })];
    const [first] = readPlanProblems(plan([material({})], parts), settings);
    expect(first?.crosswise).toEqual(['C']);
    expect(first?.problem.parts).toMatchObject([
      { id: 'A', length: 800 * MM, width: 300 * MM, turn: false },
      { id: 'B', turn: true },
      { id: 'C', length: 300 * MM, width: 800 * MM, turn: false },
    ]);
    const [free] = readPlanProblems(plan([material({ grain: 'none' })], parts), settings);
    expect(free?.crosswise).toEqual([]);
    expect(free?.problem.parts).toMatchObject([{ turn: true }, { turn: true }, { turn: true }]);
  });

  it('count prices by the piece, the area, the length and the board foot', () => {
    const priceOf = (given: Partial<ResolvedMaterial>) =>
      readPlanProblems(plan([material(given)], [part({})]), settings)[0]?.problem.stock.map((s) => s.cost);
    const euro = (minor: number, per: 'piece' | 'm2' | 'board-foot' | 'm') => ({
      minor,
      currency: 'EUR',
      per,
    });
    expect(priceOf({ price: euro(7800, 'piece') })).toEqual([7800]);
    // 2.44 m x 1.22 m = 2.9768 m2.
    expect(priceOf({ price: euro(1000, 'm2') })).toEqual([2977]);
    // 8 ft x 6 in x 1 in = 4 board feet.
    const inch = 25_400_000;
    expect(
      priceOf({
        kind: 'board',
        nominal: inch,
        sizes: [[96 * inch, 6 * inch]],
        price: euro(680, 'board-foot'),
      }),
    ).toEqual([2720]);
    expect(priceOf({ kind: 'bar', sizes: [[2000 * MM]], price: euro(450, 'm') })).toEqual([900]);
    // Without a price, sheets are counted, or weighed by size where there are several.
    expect(priceOf({})).toEqual([1]);
    expect(
      priceOf({
        sizes: [
          [2000 * MM, 1000 * MM],
          [1000 * MM, 1000 * MM],
        ],
      }),
    ).toEqual([200, 100]);
  });

  it("put the buyer's own pieces first, untrimmed, and split boards at their defects", () => {
    const own = {
      ...settings,
      stock: [
        {
          material: 'ply',
          lengthNm: 1000 * MM,
          widthNm: 400 * MM,
          count: 2,
          defects: [{ from: 600 * MM, to: 650 * MM }],
        },
      ],
    };
    const [first] = readPlanProblems(plan([material({})], [part({})]), own);
    expect(first?.problem.stock).toMatchObject([
      { length: 600 * MM, width: 400 * MM, count: 2, cost: 0, trim: { left: 0 } },
      { length: 350 * MM, width: 400 * MM, count: 2, cost: 0, trim: { left: 0 } },
      { length: 2440 * MM, count: null, cost: 1 },
    ]);
  });

  it('leave impossible parts to the plan, and refuse parts of a material without stock', () => {
    const parts = [part({ length: -12 * MM }), part({ mark: 'B', qty: 0 }), part({ mark: 'C' })];
    const [first] = layOutPlan(plan([material({ sizes: [] })], parts), settings);
    expect(first?.layout.unplaced).toEqual([{ part: 'C', qty: 1, reason: 'PART_EXCEEDS_STOCK' }]);
  });
});

describe('laying out a whole plan', () => {
  it('lays every part of the example plan, soundly', () => {
    const text = readFileSync(new URL('../plan/fixtures/example-plan.mdx', import.meta.url), 'utf8');
    const { plan: compiled } = compilePlan(text);
    if (!compiled) throw new Error('The example plan does not compile.');
    const resolved = resolvePlan(compiled, { values: {}, measured: {}, units: 'mm' });
    const layouts = layOutPlan(resolved, settings, { steps: 500 });
    expect(layouts.map((l) => l.material)).toEqual(resolved.materials.map((m) => m.name));
    for (const { problem, layout } of layouts) {
      expect(verifyLayout(problem, layout)).toEqual([]);
      expect(layout.unplaced).toEqual([]);
    }
  });
});
