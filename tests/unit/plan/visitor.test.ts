import { readFileSync } from 'node:fs';

import { describe, expect, it } from 'vitest';

import { allowedStretches } from '#lib/plan/allowed-stretches.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import { publicFigures } from '#lib/plan/public-figures.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { fitOf, planOf } from './plan-text.ts';

const MM = 1_000_000;
const { plan } = compilePlan(readFileSync(new URL('./fixtures/example-plan.mdx', import.meta.url), 'utf8'));
if (!plan) throw new Error('The example does not compile.');

describe('what a visitor sees', () => {
  // Odd sizes, so that no number of a part can equal a public one by chance.
  const resolved = resolvePlan(
    plan,
    fitOf({ width: 1_103_217_000, depth: 361_117_000, height: 447_313_000 }, { ply: 17_611_000 }),
  );
  const json = JSON.stringify(publicFigures(resolved));

  it('has the sizes with their limits, the overall size, totals, cost, requirements, step titles and tools', () => {
    expect(publicFigures(resolved)).toMatchObject({
      title: 'Boot bench for a narrow hall',
      sizes: [
        { name: 'width', value: 1_103_217_000, min: 600 * MM, max: 1600 * MM },
        { name: 'depth' },
        { name: 'height' },
        { name: 'bays' },
      ],
      overall: { width: 1_103_217_000, depth: 361_117_000, height: 447_313_000 },
      materials: [{ label: 'Birch plywood', leastStock: 1, costMinor: 7800 }, {}, {}],
      requirements: [{ holds: true }, { holds: true }],
      steps: [
        { number: 1, title: 'Cut the panels' },
        { number: 2, title: 'Groove the sides' },
        { number: 3, title: 'Finish before the oak' },
      ],
      tools: [{ name: '6 mm brad-point bit', sponsored: false }],
      canBeBuilt: true,
    });
  });

  it('has no part size, position or derived value in it', () => {
    const hidden = new Set<number>();
    // The sizes that were set, and the thickness that oak is sold in.
    const allowed = new Set([1_103_217_000, 361_117_000, 447_313_000, 19_050_000]);
    for (const part of resolved.parts) {
      for (const number of [part.length, part.width, ...(part.position ?? []), ...(part.every ?? [])])
        hidden.add(number);
      for (const shape of part.shape)
        for (const value of Object.values(shape.values).flat()) hidden.add(Number(value));
    }
    for (const { value } of resolved.values) hidden.add(Number(value));
    const checked = [...hidden].filter(
      (number) => number > 10_000_000 && number % MM !== 0 && !allowed.has(number),
    );
    expect(checked.length).toBeGreaterThan(6);
    for (const number of checked) {
      expect(json).not.toContain(String(number));
      expect(json).not.toContain(String(number / MM));
    }
  });

  it('has no part, formula, step text or place in it', () => {
    for (const word of [
      'Divider',
      'Tray bottom',
      'Plinth rail',
      'roundDown',
      'ply.thickness',
      'Set the fence',
      'Varnish the plywood',
      'position',
      'groove',
      'inner',
      'carcass',
    ]) {
      expect(json).not.toContain(word);
    }
  });

  it('learns that a fit cannot be built without learning why inside', () => {
    const broken = planOf(
      '<Part mark="B" name="Secret rail" material="ply" qty={1} length={width - 1*m} width={60*mm} />',
    );
    const figures = publicFigures(resolvePlan(broken, fitOf()));
    expect(figures.canBeBuilt).toBe(false);
    expect(JSON.stringify(figures)).not.toContain('Secret rail');
  });
});

describe('stretches that cannot be built', () => {
  it('end where the requirement says, to the nanometre', () => {
    // bay = (width − 2·18 − 4·18) / 5 ≥ 180 mm holds from width = 1008 mm on; halves of a nanometre round up.
    const [stretch, ...others] = allowedStretches(plan, fitOf({ bays: 5 }), 'width');
    expect(others).toEqual([]);
    expect(stretch).toMatchObject({
      from: 600 * MM,
      reason: 'A bay must be at least 180 mm wide to take a pair of boots: use fewer bays or a wider bench.',
    });
    expect(Math.abs((stretch?.to ?? 0) - 1_008_000_000)).toBeLessThanOrEqual(5);
  });

  it('are told in the reader’s units, and for counted sizes in whole numbers', () => {
    expect(allowedStretches(plan, fitOf({ width: 600 * MM }, {}, 'in'), 'bays')).toEqual([
      {
        from: 3,
        to: 5,
        reason:
          'A bay must be at least 7 3/32" wide to take a pair of boots: use fewer bays or a wider bench.',
      },
    ]);
  });

  it('are none where everything is allowed, and none for a name that is no size', () => {
    expect(allowedStretches(plan, fitOf(), 'height')).toEqual([]);
    expect(allowedStretches(plan, fitOf(), 'nothing')).toEqual([]);
  });

  it('lie in the middle of a range where a requirement excludes its middle', () => {
    const text = '<Require that={width < 800*mm || width > 1000*mm}>No slide fits.</Require>';
    expect(allowedStretches(planOf(text), fitOf(), 'width')).toEqual([
      { from: 800 * MM, to: 1000 * MM, reason: 'No slide fits.' },
    ]);
  });
});
