import { readFileSync } from 'node:fs';

import { describe, expect, it } from 'vitest';

import { comparePlans } from '#lib/plan/compare.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import type { Fit } from '#lib/plan/types.ts';
import { fitOf } from './plan-text.ts';

const original = readFileSync(new URL('./fixtures/example-plan.mdx', import.meta.url), 'utf8');

function changes(edits: readonly (readonly [string, string])[], fit: Fit = fitOf()): string[] {
  let text = original;
  for (const [from, to] of edits) {
    if (!text.includes(from)) throw new Error(`The example has no ${from}.`);
    text = text.replace(from, to);
  }
  const [before, after] = [compilePlan(original), compilePlan(text)];
  if (!before.plan || !after.plan) throw new Error(after.problems[0]?.message);
  return comparePlans(before.plan, after.plan, fit).map((change) => change.sentence);
}

describe('what a correction changes', () => {
  it('is nothing for a plan that is the same, or only set out in another order', () => {
    expect(changes([])).toEqual([]);
    const [first = '', second = ''] = [
      '<Caution about="dust" />\n',
      '<Tool name="6 mm brad-point bit" note="for the slide\'s locating hole" />\n\n',
    ];
    expect(
      changes([
        [first, ''],
        [second, `${first}\n${second}`],
      ]),
    ).toEqual([]);
  });

  it('is told by how much, for the buyer’s own sizes and in the buyer’s units', () => {
    const edit = [['length={bay - 42*mm}', 'length={bay - 44*mm}']] as const;
    expect(changes(edit)).toEqual(['Part F “Tray bottom”: length 300.7 mm → 298.7 mm (−2 mm).']);
    // 564/5 … at five bays of 600 mm: bay 98.4 mm, so 56.4 and 54.4 mm.
    expect(changes(edit, fitOf({ width: 600_000_000, bays: 5 }))).toEqual([
      'Part F “Tray bottom”: length 56.4 mm → 54.4 mm (−2 mm).',
    ]);
    expect(changes(edit, fitOf({}, {}, 'in'))).toEqual([
      'Part F “Tray bottom”: length 11 27/32−" → 11 49/64−" (−5/64").',
    ]);
  });

  it('covers values, shapes, hardware, steps and cautions', () => {
    expect(
      changes([
        [
          '<Hole at={[slide - 7*mm, 11*mm]} diameter={6*mm} depth={10*mm} />',
          '<Hole at={[slide - 7*mm, 11*mm]} diameter={6*mm} depth={12*mm} />',
        ],
        ['qty={8*bays + 8}', 'qty={8*bays + 30}'],
        ['two coats, sanding between', 'three coats, sanding between'],
        ['<Caution about="dust" />', '<Caution about="blade" />'],
        ['plinth" ? 60*mm', 'plinth" ? 70*mm'],
      ]),
    ).toEqual([
      'Value plinth: value 60 mm → 70 mm (+10 mm).',
      'Part A “Side”: groove face left, inset 80 mm → 90 mm (+10 mm).',
      'Part C “Divider”: length 372 mm → 362 mm (−10 mm); place 360.7 mm, 19.1 mm, 60 mm → 360.7 mm, 19.1 mm, 70 mm.',
      'Part D “Plinth rail”: width 60 mm → 70 mm (+10 mm).',
      'Part G “Tray side”: hole, depth 10 mm → 12 mm (+2 mm).',
      'Hardware “Screw 4 x 40”: quantity 32 → 54 (+22); packs 1 → 2 (+1).',
      'Caution “dust” removed.',
      'Caution “blade” added.',
      'Step “Groove the sides”: text reworded.',
      'Step “Finish before the oak”: text reworded.',
    ]);
  });

  it('tells what was added and removed', () => {
    expect(
      changes([
        [
          '<Part mark="F" name="Tray bottom" material="thin" qty={1} length={bay - 42*mm} width={slide} />',
          '',
        ],
        [
          '<Caution about="dust" />',
          '<Part mark="H" name="Cleat" material="ply" qty={2} length={100*mm} width={20*mm} />\n\n<Caution about="dust" />',
        ],
      ]).filter((sentence) => sentence.startsWith('Part')),
    ).toEqual(['Part F “Tray bottom” removed.', 'Part H “Cleat” added: 100 mm × 20 mm × 18 mm.']);
  });
});
