import { readFileSync } from 'node:fs';

import { describe, expect, it } from 'vitest';
import * as z from 'zod';

import { compilePlan } from '#lib/plan/compile.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { Fit } from '#lib/plan/types.ts';

const fixture = (name: string): string =>
  readFileSync(new URL(`./fixtures/${name}`, import.meta.url), 'utf8');

const outcomeSchema = z.object({
  values: z.record(z.string(), z.number()),
  parts: z.array(
    z.object({
      mark: z.string(),
      qty: z.number(),
      length: z.number(),
      width: z.number(),
      thickness: z.number(),
    }),
  ),
  requirements: z.array(z.boolean()),
});

/** Worked out by hand and by exact fractions, apart from this program. */
const expected = z.record(z.string(), outcomeSchema).parse(JSON.parse(fixture('example-plan.expected.json')));

const fits: Record<string, Fit> = {
  defaults: { values: {}, measured: {}, units: 'mm' },
  narrow: {
    values: { width: 900_000_000, bays: 2, foot: 'pads', slide: 250_000_000 },
    measured: { ply: 17_600_000, thin: 5_800_000 },
    units: 'mm',
  },
  refused: { values: { width: 600_000_000, bays: 5 }, measured: {}, units: 'mm' },
};

describe('the example plan', () => {
  const { plan, problems } = compilePlan(fixture('example-plan.mdx'));

  it('compiles without a problem', () => {
    expect(problems).toEqual([]);
  });

  it.each(Object.keys(fits))('resolves to the values worked out by hand at the fit “%s”', (name) => {
    const fit = fits[name];
    if (!plan || !fit) throw new Error('The example does not compile.');
    const resolved = resolvePlan(plan, fit);
    expect({
      values: Object.fromEntries(resolved.values.map((value) => [value.name, value.value])),
      parts: resolved.parts.map(({ mark, qty, length, width, thickness }) => ({
        mark,
        qty,
        length,
        width,
        thickness,
      })),
      requirements: resolved.requirements.map((requirement) => requirement.holds),
    }).toEqual(expected[name]);
    expect(resolved.problems).toEqual([]);
  });
});
