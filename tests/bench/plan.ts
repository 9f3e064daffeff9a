import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { pathToFileURL } from 'node:url';

import { compilePlan } from '#lib/plan/compile.ts';
import { programOf, runSteps } from '#lib/plan/evaluate.ts';
import { provePlan } from '#lib/plan/prove.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { CompiledPlan, Fit } from '#lib/plan/types.ts';
import { parseLength } from '#lib/units/parse-length.ts';

/**
 * Measures the plan engine on a plan of 60 parts and prints it beside the goals. The yardstick is the same formulas as
 * hand-written closures, so that the ratio means the same on every machine.
 *
 *   tsx tests/bench/plan.ts
 */

const PARTS = 60;
const MM = 1_000_000;

/** The three formulas of part `i`: a chain, a branch and a rounding, as authors write them. */
function partText(i: number): string {
  return `<Part mark="P${i}" name="Part ${i}" material="ply" qty={bays > ${i % 4} ? 2 : 1} length={inner / bays - ${i}*mm - 2*ply.thickness} width={max(roundDown(height / 4, 5*mm), ${20 + i}*mm)} grain="length" along="x y" at={[${i}*mm, 3/4*inch, height / 2]}>
  <Groove face="face" edge="left" inset={plinth + ${i % 20}*mm} width={ply.thickness / 3} depth={ply.thickness / 3} />
</Part>`;
}

const TEXT = `---
title: Bench
summary: Sixty parts.
skill: 3
hours: [10, 20]
---

<Size name="width" label="Width" default="1800 mm" min="1200 mm" max="2400 mm" step="5 mm" />
<Size name="height" label="Height" default="900 mm" min="600 mm" max="1200 mm" step="5 mm" />
<Size name="bays" label="Bays" default={4} min={1} max={5} step={1} />
<Choice name="foot" label="Foot" default="plinth"><Option value="plinth" label="Plinth" /><Option value="pads" label="Pads" /></Choice>

<Material name="ply" label="Ply" kind="sheet" thickness="18 mm" measured sizes={[[2440*mm, 1220*mm]]} price="78.00 EUR" />

<Let name="plinth" value={foot === "plinth" ? 60*mm : 20*mm} />
<Let name="inner" value={width - 2*ply.thickness} />

<Require that={inner / bays >= 150*mm}>A bay must be at least {150*mm} wide.</Require>

${Array.from({ length: PARTS }, (_, i) => partText(i)).join('\n')}

${Array.from({ length: 10 }, (_, i) => `<Step title="Step ${i}" parts="P${i}">\nCut {P${i}.qty} at {P${i}.length} by {P${i}.width}.\n</Step>`).join('\n\n')}
`;

/** The values that hand-written formulas read and set, by name. */
type HandValues = Record<string, number>;
type HandFormula = (v: HandValues) => void;

/**
 * The same formulas as a programmer would write them for this one plan: each its own function over an object of values.
 * They are written to a file and imported, because functions made in a loop share their code and run as one.
 */
async function handWritten(): Promise<HandFormula[]> {
  const lines = [
    'v.ply = 18e6',
    'v.plinth = v.foot === 1 ? 60e6 : 20e6',
    'v.inner = Math.round(v.width - 2 * v.ply)',
    ...Array.from({ length: PARTS }, (_, i) => [
      `v.P${i}_length = Math.round(v.inner / v.bays - ${i} * 1e6 - 2 * v.ply)`,
      `v.P${i}_width = Math.round(Math.max(Math.floor(v.height / 4 / 5e6) * 5e6, ${20 + i} * 1e6))`,
      `v.P${i}_thickness = v.ply`,
      `v.P${i}_qty = v.bays > ${i % 4} ? 2 : 1`,
    ]).flat(),
  ];
  const path = join(mkdtempSync(join(tmpdir(), 'benchleaf-bench-')), 'formulas.mjs');
  writeFileSync(
    path,
    `export const formulas = [\n${lines.map((line) => `  (v) => { ${line}; },`).join('\n')}\n];\n`,
  );
  const module = (await import(pathToFileURL(path).href)) as { formulas: HandFormula[] };
  rmSync(dirname(path), { recursive: true });
  return module.formulas;
}

/** Median time of one call in microseconds, over rounds that are long enough for the clock. */
function medianMicroseconds(run: (turn: number) => void, calls: number, rounds = 31): number {
  for (let turn = 0; turn < calls * 3; turn += 1) run(turn);
  const times = Array.from({ length: rounds }, () => {
    const start = performance.now();
    for (let turn = 0; turn < calls; turn += 1) run(turn);
    return ((performance.now() - start) * 1000) / calls;
  });
  return times.sort((a, b) => a - b)[Math.floor(rounds / 2)] ?? 0;
}

function fitAt(turn: number): Fit {
  return { values: { width: (1500 + (turn % 600)) * MM, bays: 4 }, measured: {}, units: 'mm' };
}

function compiled(text: string): CompiledPlan {
  const { plan, problems } = compilePlan(text);
  if (!plan) throw new Error(problems[0]?.message);
  return plan;
}

const plan = compiled(TEXT);
const program = programOf(plan);
const slots = new Float64Array(program.size);
const byHand = await handWritten();
const byName: HandValues = { width: 0, height: 900 * MM, bays: 4, foot: 1 };

const hand = medianMicroseconds((turn) => {
  byName['width'] = (1500 + (turn % 600)) * MM;
  for (const formula of byHand) formula(byName);
}, 2000);
const [widthSlot, heightSlot, baysSlot] = ['width', 'height', 'bays'].map(
  (name) => program.slotOf.get(name) ?? 0,
);
const steps = medianMicroseconds((turn) => {
  slots[widthSlot ?? 0] = (1500 + (turn % 600)) * MM;
  slots[heightSlot ?? 0] = 900 * MM;
  slots[baysSlot ?? 0] = 4;
  runSteps(program, slots);
}, 2000);
const resolve = medianMicroseconds((turn) => void resolvePlan(plan, fitAt(turn)), 100);
const compile = medianMicroseconds(() => void compilePlan(TEXT), 1, 9);
const near = '17 3/4'.repeat(17_000);
const refuse = medianMicroseconds(() => void parseLength(near, 'in'), 100);

const start = performance.now();
const run = provePlan(plan, { seed: 1, maxTries: 1000 });
let step = run.next();
while (!step.done) step = run.next();
const proof = performance.now() - start;

const formulas = byHand.length;
console.log(`${PARTS} parts, ${formulas} formulas, ${(TEXT.length / 1024).toFixed(1)} kB`);
console.log(`by hand, all ${formulas}:      ${hand.toFixed(1)} µs`);
console.log(
  `kept values, ${program.steps.length}:         ${steps.toFixed(1)} µs, ${(steps / program.steps.length / (hand / formulas)).toFixed(2)} times by hand a formula (goal: at most 3)`,
);
console.log(
  `resolvePlan, everything:   ${resolve.toFixed(0)} µs, ${(resolve / hand).toFixed(1)} times the bare formulas (goal: at most 1000 µs)`,
);
console.log(`compilePlan:               ${(compile / 1000).toFixed(1)} ms`);
console.log(`parseLength of 100 kB:     ${refuse.toFixed(2)} µs (goal: at most 50 000)`);
console.log(
  `provePlan, 1000 tries:     ${proof.toFixed(0)} ms, proved ${step.value.proved.length} claims over ${step.value.tries} tries`,
);
