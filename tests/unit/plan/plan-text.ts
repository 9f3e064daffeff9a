import { compilePlan } from '#lib/plan/compile.ts';
import type { CompiledPlan, Fit } from '#lib/plan/types.ts';

/** Front matter of six lines, so that the first line of a test's own text is line 7. */
export const FRONT = '---\ntitle: T\nsummary: S\nskill: 1\nhours: [1, 2]\n---\n';

/** Five lines of declarations that most tests build on; a test's own text begins on line 12. */
export const BASE = `<Size name="width" label="W" default="900 mm" min="600 mm" max="1200 mm" step="5 mm" />
<Size name="bays" label="B" default={2} min={1} max={4} step={1} />
<Choice name="leg" label="L" default="peg"><Option value="peg" label="p" /><Option value="pad" label="q" /></Choice>
<Material name="ply" label="Ply" kind="sheet" thickness="18 mm" />
<Part mark="A" name="Side" material="ply" qty={2} length={width} width={300*mm} />
`;

/** A plan that must compile: the test's own text behind front matter and base. */
export function planOf(text: string, base = BASE): CompiledPlan {
  const { plan, problems } = compilePlan(`${FRONT}${base}${text}\n`);
  if (!plan) throw new Error(problems.map(({ line, message }) => `${line}: ${message}`).join('\n'));
  return plan;
}

/** A fit in mm with some values set. */
export function fitOf(
  values: Fit['values'] = {},
  measured: Fit['measured'] = {},
  units: Fit['units'] = 'mm',
): Fit {
  return { values, measured, units };
}
