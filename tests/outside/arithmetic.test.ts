import fc from 'fast-check';
import { create, all } from 'mathjs';
import { describe, expect, it } from 'vitest';

import { compilePlan } from '#lib/plan/compile.ts';
import { programOf, runOf } from '#lib/plan/evaluate.ts';

/**
 * Arithmetic of the plan language against mathjs 15 (https://mathjs.org), an evaluator that shares no code with ours. Random
 * expressions over numbers are written in the syntax that both read alike; degrees are written out for mathjs.
 */
const math = create(all ?? {}, { number: 'number' });

const FRONT = '---\ntitle: T\nsummary: S\nskill: 1\nhours: [1, 2]\n---\n\n';
const NAMES = ['a', 'b', 'c'] as const;
const SIZES = NAMES.map(
  (name) => `<Size name="${name}" label="x" default={2} min={-1000} max={1000} step={1} />`,
).join('\n');

type Pair = { ours: string; theirs: string };

const leaf: fc.Arbitrary<Pair> = fc.oneof(
  fc.constantFrom(...NAMES).map((name) => ({ ours: name, theirs: name })),
  fc.integer({ min: 0, max: 999 }).map((value) => ({ ours: String(value), theirs: String(value) })),
  fc
    .integer({ min: 1, max: 9999 })
    .map((value) => ({ ours: String(value / 100), theirs: String(value / 100) })),
);

const { expression } = fc.letrec<{ expression: Pair }>((tie) => {
  const sub = tie('expression');
  const both = fc.tuple(sub, sub);
  return {
    expression: fc.oneof(
      { maxDepth: 5, depthSize: 'medium' },
      leaf,
      fc.tuple(fc.constantFrom('+', '-', '*', '/'), both).map(([sign, [x, y]]) => ({
        ours: `(${x.ours} ${sign} ${y.ours})`,
        theirs: `(${x.theirs} ${sign} ${y.theirs})`,
      })),
      // Without brackets both must agree on what binds tighter.
      both.map(([x, y]) => ({
        ours: `(${x.ours} - ${y.ours} * 2 + ${x.ours})`,
        theirs: `(${x.theirs} - ${y.theirs} * 2 + ${x.theirs})`,
      })),
      sub.map((x) => ({ ours: `(-${x.ours})`, theirs: `(-${x.theirs})` })),
      fc.tuple(fc.constantFrom('min', 'max', 'hypot'), both).map(([name, [x, y]]) => ({
        ours: `${name}(${x.ours}, ${y.ours})`,
        theirs: `${name}(${x.theirs}, ${y.theirs})`,
      })),
      sub.map((x) => ({ ours: `abs(${x.ours})`, theirs: `abs(${x.theirs})` })),
      sub.map((x) => ({ ours: `sqrt(abs(${x.ours}))`, theirs: `sqrt(abs(${x.theirs}))` })),
      sub.map((x) => ({ ours: `sin(${x.ours} * deg)`, theirs: `sin(${x.theirs} * pi / 180)` })),
      sub.map((x) => ({ ours: `(atan(${x.ours}) / (1*deg))`, theirs: `(atan(${x.theirs}) * 180 / pi)` })),
      fc.tuple(fc.constantFrom('<', '>'), both).map(([sign, [x, y]]) => ({
        ours: `(${x.ours} ${sign} ${y.ours} ? ${x.ours} : ${y.ours})`,
        theirs: `(${x.theirs} ${sign} ${y.theirs} ? ${x.theirs} : ${y.theirs})`,
      })),
    ),
  };
});

/** Our value, with the sizes set by hand, before anything is rounded or kept. */
function ourValue(text: string, values: Record<string, number>): number | null {
  const { plan } = compilePlan(`${FRONT}${SIZES}\n\n<Let name="x" value={${text}} />\n`);
  if (!plan) return null;
  const program = programOf(plan);
  const slots = new Float64Array(program.size);
  for (const name of NAMES) slots[program.slotOf.get(name) ?? 0] = values[name] ?? 0;
  const declared = plan.declarations.find((declaration) => declaration.type === 'let');
  return declared?.type === 'let' ? runOf(declared.value.expression, program)(slots) : null;
}

describe('arithmetic against mathjs', () => {
  it('agrees on random expressions', () => {
    const values = fc.record({
      a: fc.integer({ min: -50, max: 50 }),
      b: fc.integer({ min: -50, max: 50 }),
      c: fc.integer({ min: -50, max: 50 }),
    });
    let compared = 0;
    fc.assert(
      fc.property(expression, values, ({ ours, theirs }, scope) => {
        const wanted: unknown = math.evaluate(theirs, { ...scope });
        const found = ourValue(ours, scope);
        // A constant that is not finite is refused when the plan is compiled.
        if (found === null || typeof wanted !== 'number' || !Number.isFinite(wanted)) return;
        compared += 1;
        // Functions of the two are computed by different means; 1e-9 is a thousandth of a nanometre in a metre.
        expect(Math.abs(found - wanted)).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(wanted)));
      }),
      { numRuns: 300, seed: 11 },
    );
    expect(compared).toBeGreaterThan(200);
  });

  it.each([
    ['2 + 3 * 4 - 5', '2 + 3 * 4 - 5'],
    ['20 / 4 / 5', '20 / 4 / 5'],
    ['7 - 2 - 1', '7 - 2 - 1'],
    ['-2 * -3', '-2 * -3'],
    ['a > 1 && b > 1 || c > 9 ? 1 : 2', 'a > 1 and b > 1 or c > 9 ? 1 : 2'],
    ['a > 5 ? 1 : b > 5 ? 2 : 3', 'a > 5 ? 1 : (b > 5 ? 2 : 3)'],
    ['!(a > 1) ? 1 : 2', 'not (a > 1) ? 1 : 2'],
    ['17 % 5', '17 % 5'],
    ['floor(7.9)', 'floor(7.9)'],
    ['ceil(7.1)', 'ceil(7.1)'],
    ['floor(-7.1)', 'floor(-7.1)'],
  ])('binds %s alike', (ours, theirs) => {
    const scope = { a: 2, b: 3, c: 4 };
    expect(ourValue(ours, scope)).toBe(math.evaluate(theirs, { ...scope }));
  });
});
