import { readFileSync } from 'node:fs';

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import { compilePlan } from '#lib/plan/compile.ts';
import { provePlan } from '#lib/plan/prove.ts';
import type { ProofOptions, ProofOutcome } from '#lib/plan/prove.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { CompiledPlan } from '#lib/plan/types.ts';
import { fitOf, planOf } from './plan-text.ts';

function prove(plan: CompiledPlan, options: Partial<ProofOptions> = {}): ProofOutcome {
  const run = provePlan(plan, { seed: 1, maxTries: 600, ...options });
  let step = run.next();
  while (!step.done) step = run.next();
  return step.value;
}

const { plan: example } = compilePlan(
  readFileSync(new URL('./fixtures/example-plan.mdx', import.meta.url), 'utf8'),
);
if (!example) throw new Error('The example does not compile.');

describe('the range proof', () => {
  it('proves the example by bounds and says what it only tried', () => {
    const outcome = prove(example);
    expect(outcome).toMatchObject({ holds: true, failures: [], tries: 600, wasStopped: false });
    expect(outcome.proved).toEqual([
      'Every value is finite and within 1 km.',
      'Every part has a length, a width and a thickness above zero.',
      'Every part is cut a whole number of times.',
      'Every part with stock sizes can be cut from one of them.',
      'Every groove, rabbet, notch, cutout and hole that bounds can follow lies inside its part.',
    ]);
    expect(outcome.tried.at(-1)).toBe('Bounds could not show the bevel of part E: this was only tried.');
    expect(outcome.allowed + outcome.refused).toBe(600);
  });

  it('shrinks a failure to the simplest sizes and tells it in a sentence', () => {
    const text =
      '<Part mark="D" name="Rail" material="ply" qty={1} length={width - bays*250*mm} width={60*mm} />';
    const { holds, failures } = prove(planOf(text));
    expect(holds).toBe(false);
    expect(failures.map((failure) => failure.sentence)).toEqual([
      'At bays 4, part D “Rail” would be −100 mm long.',
    ]);
    const [failure] = failures;
    expect(failure?.fit).toEqual({
      values: { width: 900_000_000, bays: 4, leg: 'peg' },
      measured: {},
      units: 'mm',
    });
    expect(failure?.problem).toMatchObject({ line: 12, rule: 'part-impossible' });
  });

  it('tells sizes in inches where asked', () => {
    const text =
      '<Part mark="D" name="Rail" material="ply" qty={1} length={width - bays*250*mm} width={60*mm} />';
    expect(prove(planOf(text), { units: 'in' }).failures[0]?.sentence).toBe(
      'At bays 4, part D “Rail” would be −3 15/16" long.',
    );
  });

  it('counts what a requirement excludes as refused politely', () => {
    const text = `<Require that={width - bays*250*mm >= 20*mm}>Fewer bays, please.</Require>

<Part mark="D" name="Rail" material="ply" qty={1} length={width - bays*250*mm} width={60*mm} />`;
    const outcome = prove(planOf(text));
    expect(outcome.holds).toBe(true);
    expect(outcome.refused).toBeGreaterThan(50);
    expect(outcome.proved).toContain('Every part has a length, a width and a thickness above zero.');
  });

  it('finds a failure that is a hair inside the border of what is allowed', () => {
    const text = `<Require that={width >= 700*mm}>Wider, please.</Require>

<Part mark="D" name="Rail" material="ply" qty={1} length={width - 701*mm} width={60*mm} />`;
    expect(prove(planOf(text)).failures[0]?.sentence).toBe(
      'At width 700 mm, part D “Rail” would be −1 mm long.',
    );
  });

  it('finds a failure that shows under one option only', () => {
    const text =
      '<Part mark="D" name="Rail" material="ply" qty={1} length={leg === "pad" ? 0*mm : width} width={60*mm} />';
    expect(prove(planOf(text)).failures[0]?.sentence).toBe('At leg “q”, part D “Rail” would be 0 mm long.');
  });

  it('tries sheets thinner and thicker than they are named', () => {
    const text = `<Material name="mdf" label="MDF" kind="sheet" thickness="18 mm" measured />
<Part mark="D" name="Rail" material="mdf" qty={1} length={width} width={mdf.thickness - 17.5*mm} />`;
    expect(prove(planOf(text)).failures[0]?.sentence).toMatch(
      /^At mdf measured at 1[67](\.\d)? mm, part D “Rail” would be −\d/,
    );
  });

  it('fails a plan whose requirements exclude everything', () => {
    const outcome = prove(planOf('<Require that={width > 2*m}>Never.</Require>'));
    expect(outcome.holds).toBe(false);
    expect(outcome.failures.map((failure) => failure.sentence)).toEqual([
      'None of the 600 fits that were tried passes the plan’s requirements: nobody could build it.',
    ]);
  });

  it('reports a value that is not finite where no requirement stands before it', () => {
    const text = '<Let name="gap" value={width / (bays - 3)} />';
    expect(prove(planOf(text)).failures[0]?.sentence).toBe('At bays 3, “gap” is not a finite number.');
  });

  it('is the same for the same seed', () => {
    expect(prove(example, { seed: 7, maxTries: 200 })).toEqual(prove(example, { seed: 7, maxTries: 200 }));
  });

  it('reports its progress, and stops when asked', () => {
    const shares: number[] = [];
    const outcome = prove(example, {
      maxTries: 2000,
      onProgress: (share) => void shares.push(share),
      shouldStop: () => shares.length >= 5,
    });
    expect(shares).toEqual([...shares].sort((a, b) => a - b));
    expect(outcome).toMatchObject({ holds: false, wasStopped: true });
    expect(outcome.tries).toBeLessThan(2000);
    expect(outcome.tried.at(-1)).toBe('The proof was stopped before its end.');
  });
});

describe('bounds', () => {
  const formulas = [
    'width - bays*200*mm',
    'width / bays - 60*mm',
    'roundDown(width / bays, 50*mm) - 140*mm',
    'roundUp(width / 3, 32*mm) - 200*mm',
    'min(width, 800*mm) - bays*190*mm',
    'max(width - 1*m, 50*mm)',
    'abs(width - 900*mm) + 1*mm',
    'sin(bays*20*deg) * width',
    'cos(bays*25*deg) * width',
    'tan(bays*20*deg) * 10*mm',
    'hypot(width, 200*mm) - width',
    'sqrt(width * 20*mm) - 100*mm',
    'width % (250*mm) + 1*mm',
    '(leg === "pad" ? width : 700*mm) - 650*mm',
    'atan2(width, 1*m) / (1*deg) * 1*mm - 30*mm',
    'width * width / (1*m) - 350*mm',
  ];

  it('never call proved what a try can refute', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...formulas),
        fc.constantFrom(...formulas),
        fc.integer({ min: 0, max: 1000 }),
        (length, width, seed) => {
          const plan = planOf(
            `<Part mark="D" name="Rail" material="ply" qty={1} length={${length}} width={${width}} />`,
          );
          const outcome = prove(plan, { seed, maxTries: 300 });
          const isProved = outcome.proved.includes(
            'Every part has a length, a width and a thickness above zero.',
          );
          const isRefuted = outcome.failures.some((failure) => failure.rule === 'part-impossible');
          expect(isProved && isRefuted).toBe(false);
          for (const failure of outcome.failures) {
            expect(resolvePlan(plan, failure.fit).problems.map((problem) => problem.rule)).toContain(
              failure.rule,
            );
          }
        },
      ),
      { numRuns: 40, seed: 5 },
    );
  });

  it('narrow a formula that uses a size twice to what it truly is', () => {
    const text =
      '<Part mark="D" name="Rail" material="ply" qty={1} length={width - (width - 10*mm) + 1*mm} width={60*mm} />';
    expect(prove(planOf(text)).proved).toContain(
      'Every part has a length, a width and a thickness above zero.',
    );
  });

  it('take a part that is left out as no part', () => {
    const text =
      '<Part mark="D" name="Rail" material="ply" qty={1} length={width - 800*mm} width={60*mm} when={width > 810*mm} />';
    const outcome = prove(planOf(text));
    expect(outcome.holds).toBe(true);
    expect(outcome.proved).toContain('Every part has a length, a width and a thickness above zero.');
    expect(resolvePlan(planOf(text), fitOf({ width: 600_000_000 })).problems).toEqual([]);
  });
});
