import { describe, expect, it } from 'vitest';

import { sagOf } from '#lib/plan/resolve-load.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { roughInches, woodFigures } from '#lib/plan/wood-figures.ts';
import { fitOf, planOf } from './plan-text.ts';

const OAK = `<Material name="oak" label="Oak" kind="board" thickness="3/4 in" sizes={[[8*foot, 6*inch]]} species="White oak" price="6.80 EUR/board foot" />
<Part mark="B" name="Shelf" material="oak" qty={2} length={800*mm} width={150*mm} />
`;

describe('loads and masses', () => {
  it('adds shear to the bending of a spread load and of one in the middle', () => {
    // 5/384·300·0.9³/(2.2e9·0.3·0.018³/12) = 8.88 mm of bending (a worked example of the handbook’s formula), and little shear.
    const beam = {
      spanM: 0.9,
      widthM: 0.3,
      thicknessM: 0.018,
      forceN: 300,
      stiffnessPa: 2.2e9,
      isMiddle: false,
    };
    expect(sagOf(beam) * 1000).toBeGreaterThan(8.87);
    expect(sagOf(beam) * 1000).toBeLessThan(8.99);
    // 1/48·200·0.8³/(10.048e9·0.3·0.018³/12) = 1.456 mm.
    const middle = {
      spanM: 0.8,
      widthM: 0.3,
      thicknessM: 0.018,
      forceN: 200,
      stiffnessPa: 10.048e9,
      isMiddle: true,
    };
    expect(sagOf(middle) * 1000).toBeGreaterThan(1.456);
    expect(sagOf(middle) * 1000).toBeLessThan(1.48);
  });

  it('shows the sag of a shelf as guidance that says it is no approval', () => {
    const { shelves } = resolvePlan(planOf(`${OAK}<Shelf part="B" span={780*mm} load={10*kg} />`), fitOf());
    expect(shelves).toMatchObject([
      { part: 'B', span: 780_000_000, loadKg: 10, at: 'spread', species: 'white oak', approximate: false },
    ]);
    expect(shelves[0]?.guidance).toContain('it is no approval');
    expect(shelves[0]?.limits.map(({ holds }) => holds)).toEqual([true, true, true]);
  });

  it('advises where the species is not known, and shows no sag', () => {
    const resolved = resolvePlan(
      planOf('<Shelf part="A" span={780*mm} load={10*kg} species="unobtainium" />'),
      fitOf(),
    );
    expect(resolved.shelves).toEqual([]);
    expect(resolved.problems).toMatchObject([
      {
        rule: 'species-unknown',
        severity: 'advice',
        message: 'The sag of part A is not shown, because no figures of “unobtainium” are known.',
      },
    ]);
  });

  it('tallies boards at their rough thickness and prices them so', () => {
    // Two of 800 × 150 mm: 0.24 m² = 372.0007 sq in, at one inch over 144 = 2.5833 board feet, at 6.80.
    const oak = resolvePlan(planOf(OAK), fitOf()).materials.find((material) => material.name === 'oak');
    expect(oak?.boardFeet).toBeCloseTo(2.583338, 5);
    expect(oak?.costMinor).toBe(1757);
    expect([0.5, 0.75, 13 / 16, 7 / 8, 1, 1.75, 2, 5].map(roughInches)).toEqual([
      1, 1, 1, 1.25, 1.25, 2, 2.5, 5,
    ]);
  });

  it('weighs the parts where every species is known, and else says nothing', () => {
    // White oak: 0.68 · 1120 = 762 kg/m³; two of 0.8 × 0.15 × 0.01905 m.
    const onlyOak = planOf(OAK, '');
    expect(resolvePlan(onlyOak, fitOf()).massKg).toBeCloseTo(2 * 0.8 * 0.15 * 0.01905 * 762, 9);
    expect(resolvePlan(planOf(OAK), fitOf()).massKg).toBeUndefined();
    expect(woodFigures('Birch Plywood')?.densityKgM3).toBe(680);
    expect(woodFigures('constructor')).toBeUndefined();
  });
});
