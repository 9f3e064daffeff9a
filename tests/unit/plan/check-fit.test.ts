import { describe, expect, it } from 'vitest';

import { checkFit, defaultFit } from '#lib/plan/check-fit.ts';
import { planOf } from './plan-text.ts';

const plan = planOf(
  '<Size name="tilt" label="Tilt" default="5°" min="0°" max="15°" step="1°" />\n<Material name="oak" label="Oak" kind="board" thickness="20 mm" measured />',
);
const check = (input: unknown): unknown => checkFit(plan, input);
const valid = { values: {}, measured: {}, units: 'mm' };

describe('a fit from outside', () => {
  it('is taken as it is when the plan allows it', () => {
    const fit = {
      values: { width: 1_000_000_000, bays: 3, leg: 'pad', tilt: 7.25 },
      measured: { oak: 19_600_000 },
      units: 'in',
      prices: { oak: 900 },
    };
    expect(check(fit)).toEqual({ ok: true, fit });
  });

  it('keeps a length between two steps: a room is not built in steps', () => {
    expect(check({ ...valid, values: { width: 901_234_567 } })).toMatchObject({ ok: true });
  });

  it.each<[object, object]>([
    [
      { values: { width: 1_300_000_000 } },
      {
        name: 'width',
        rule: 'out-of-limits',
        message: 'W can be 600 mm to 1200 mm, not 1300 mm.',
        hint: 'The nearest is 1200 mm.',
      },
    ],
    [
      { values: { bays: 2.5 } },
      {
        name: 'bays',
        rule: 'off-step',
        message: 'B goes in steps of 1 from 1, and 2.5 is none of them.',
        hint: 'The nearest is 3.',
      },
    ],
    [
      { values: { bays: 'two' } },
      { name: 'bays', rule: 'wrong-kind', message: 'B is a text, and a number is wanted.' },
    ],
    [
      { values: { width: 900_000_000.5 } },
      { name: 'width', rule: 'wrong-kind', message: 'W must be a whole number of nanometres.' },
    ],
    [
      { values: { leg: 'pegs' } },
      { name: 'leg', rule: 'not-an-option', message: 'L has no such option.', hint: 'Its options are p, q.' },
    ],
    [
      { values: { widht: 1 } },
      {
        name: 'widht',
        rule: 'unknown-name',
        message: 'This plan has no size or choice “widht”.',
        hint: 'Did you mean width?',
      },
    ],
    [
      { values: { constructor: 1 } },
      {
        name: 'constructor',
        rule: 'unknown-name',
        message: 'This plan has no size or choice “constructor”.',
      },
    ],
    [
      { measured: { ply: 17_600_000 } },
      { name: 'ply', rule: 'not-measured', message: 'The thickness of Ply is fixed in this plan.' },
    ],
    [
      { measured: { oak: 400_000_000 } },
      { name: 'oak', rule: 'out-of-limits', message: 'The thickness of Oak can be 0.1 mm to 300 mm.' },
    ],
    [
      { prices: { oka: 1 } },
      {
        name: 'oka',
        rule: 'unknown-name',
        message: 'This plan has no material “oka”.',
        hint: 'Did you mean oak?',
      },
    ],
  ])('is refused: %j', (part, problem) => {
    expect(check({ ...valid, ...part })).toEqual({ ok: false, problems: [problem] });
  });

  it.each([
    null,
    'x',
    [],
    {},
    { units: 'cm' },
    { ...valid, values: { width: Number.NaN } },
    { ...valid, values: { width: Number.POSITIVE_INFINITY } },
    { ...valid, values: { width: 1e300 } },
    { ...valid, values: { width: { nm: 1 } } },
    { ...valid, extra: 1 },
    { ...valid, prices: { oak: -1 } },
    { ...valid, prices: { oak: 1.5 } },
  ])('is refused when it is malformed: %j', (input) => {
    const checked = checkFit(plan, input);
    expect(checked.ok).toBe(false);
    if (!checked.ok) expect(checked.problems.every((problem) => problem.rule === 'malformed')).toBe(true);
  });

  it('opens with every default, which passes its own check', () => {
    const fit = defaultFit(plan, 'in');
    expect(fit).toEqual({
      values: { width: 900_000_000, bays: 2, leg: 'peg', tilt: 5 },
      measured: {},
      units: 'in',
    });
    expect(check(fit)).toEqual({ ok: true, fit });
  });
});
