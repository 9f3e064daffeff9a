import { boundPlan } from './bounds.ts';
import { printValue } from './print-value.ts';
import {
  defaultPoint,
  fitOf,
  nominalThicknesses,
  optionCombinations,
  proofSpace,
  settle,
  stepAt,
} from './proof-points.ts';
import type { Point, ProofSpace } from './proof-points.ts';
import { createRandom } from './random.ts';
import { resolveParts } from './resolve-parts.ts';
import { resolveHardware } from './resolve-stock.ts';
import type { CompiledPlan, Fit, Problem, UnitSystem } from './types.ts';
import { findBrokenRequirement, workOut } from './work-out.ts';

export interface ProofOptions {
  /** Seed of the random points; the same seed tries the same points. */
  seed: number;
  /** The most fits that are tried one by one; the proof by bounds is not counted. */
  maxTries: number;
  /** Units of the sentences; mm when left out. */
  units?: UnitSystem;
  /** Told as the proof goes on, with a share from 0 to 1. */
  onProgress?: (progress: number) => void;
  /** Asked between tries; true stops the proof with what was found so far. */
  shouldStop?: () => boolean;
}

/** A fit that the plan allows and at which it cannot be built. */
export interface ProofFailure {
  /** “At width 600 mm, bays 5, part D “Plinth rail” would be −12 mm long.” */
  sentence: string;
  rule: string;
  /** The simplest fit at which it fails: all else at its default. */
  fit: Fit;
  problem: Problem;
}

export interface ProofOutcome {
  /** True when nothing failed and something is allowed (and the proof was not stopped). */
  holds: boolean;
  /** What was proved over all allowed sizes by bounds, a sentence each. */
  proved: string[];
  /** What was only tried, and how many times, a sentence each. */
  tried: string[];
  failures: ProofFailure[];
  /** Fits tried one by one, those of them that a requirement refused, and those that were allowed. */
  tries: number;
  refused: number;
  allowed: number;
  wasStopped: boolean;
}

/** The most different failures that are told; one is enough to mend the plan, a hundred hide it. */
const MAX_FAILURES = 12;
const MAX_COMBINATIONS = 256;
const YIELD_EVERY = 25;

type Verdict = { state: 'refused' } | { state: 'allowed'; errors: Problem[] };

/** Looks at one point: refused by a requirement, or allowed with the errors that it has. */
function judge(plan: CompiledPlan, space: ProofSpace, point: Point, units: UnitSystem): Verdict {
  const resolving = workOut(plan, fitOf(space, point, units));
  // A value that is not finite may decide a requirement by accident, so it is a fault before any requirement is asked.
  const hasFault = resolving.problems.hasErrors();
  if (!hasFault && findBrokenRequirement(resolving)) return { state: 'refused' };
  if (hasFault && findBrokenRequirement(resolving) && isGuarded(resolving.problems.items))
    return { state: 'refused' };
  resolveParts(resolving);
  resolveHardware(resolving);
  return {
    state: 'allowed',
    errors: resolving.problems.items.filter((problem) => problem.severity === 'error'),
  };
}

/** A requirement that is broken beside a value that is not finite refuses the fit all the same: the buyer reads its sentence. */
function isGuarded(problems: readonly Problem[]): boolean {
  return problems.every((problem) => problem.rule === 'not-finite' || problem.rule === 'beyond-limit');
}

/** What the problem says without the formula behind it, to go on after the sizes. */
function briefOf(problem: Problem): string {
  const brief = problem.message.replace(/ \([a-z]+=\{[^]*$/i, '').replace(/\.$/, '');
  return brief.replace(/^(Part|Hardware|Material) /, (word) => word.toLowerCase());
}

/** The problem that is the same one at other sizes: same rule at the same place. */
function isSameProblem(a: Problem, b: Problem): boolean {
  return a.rule === b.rule && a.line === b.line && a.column === b.column;
}

function sentenceOf(space: ProofSpace, point: Point, problem: Problem, units: UnitSystem): string {
  const told: string[] = [];
  space.choices.forEach((choice, index) => {
    const value = point.options[index];
    if (value === undefined || value === choice.default) return;
    const option = choice.options.find((each) => each.value === value);
    told.push(`${choice.name} “${option?.label ?? String(value)}”`);
  });
  space.dimensions.forEach((dimension, index) => {
    const number = point.numbers[index] ?? dimension.default;
    if (number === dimension.default) return;
    const name = dimension.type === 'measured' ? `${dimension.name} measured at` : dimension.name;
    told.push(`${name} ${printValue(dimension.kind, number, units)}`);
  });
  const list = told.length > 1 ? `${told.slice(0, -1).join(', ')} and ${told.at(-1)}` : told[0];
  return `At ${list ?? 'the default sizes'}, ${briefOf(problem)}.`;
}

/** Values to try in a dimension, from the simplest on: the default, the ends, then round values from coarse to fine. */
function simplerValues(dimension: ProofSpace['dimensions'][number], current: number): number[] {
  const values = [dimension.default, dimension.min, dimension.max];
  const grains =
    dimension.kind === 'length'
      ? [100_000_000, 50_000_000, 10_000_000, 5_000_000, 1_000_000, 100_000]
      : [10, 5, 1];
  for (const grain of grains) values.push(settle(dimension, Math.round(current / grain) * grain));
  return values;
}

/** Moves a failing point to the simplest one at which the same thing still fails. */
function shrink(
  plan: CompiledPlan,
  space: ProofSpace,
  failing: Point,
  problem: Problem,
  units: UnitSystem,
): { point: Point; problem: Problem } {
  let best: { point: Point; problem: Problem } = { point: failing, problem };
  const attempt = (point: Point): boolean => {
    const verdict = judge(plan, space, point, units);
    const same =
      verdict.state === 'allowed' ? verdict.errors.find((each) => isSameProblem(each, problem)) : undefined;
    if (same) best = { point, problem: same };
    return same !== undefined;
  };
  for (let round = 0; round < 2; round += 1) {
    space.choices.forEach((choice, index) => {
      if (best.point.options[index] === choice.default) return;
      attempt({ ...best.point, options: best.point.options.with(index, choice.default) });
    });
    space.dimensions.forEach((dimension, index) => {
      const current = best.point.numbers[index] ?? dimension.default;
      for (const value of simplerValues(dimension, current)) {
        if (value === best.point.numbers[index]) break;
        if (attempt({ ...best.point, numbers: best.point.numbers.with(index, value) })) break;
      }
    });
  }
  return best;
}

/** A share of the way between two points, settled to values that can be set; options are those of the first. */
function between(space: ProofSpace, a: Point, b: Point, share: number): Point {
  return {
    options: a.options,
    numbers: space.dimensions.map((dimension, index) => {
      const [from, to] = [a.numbers[index] ?? dimension.default, b.numbers[index] ?? dimension.default];
      return settle(dimension, from + (to - from) * share);
    }),
  };
}

/** All points that the proof tries, without those at the sides of requirements, which depend on what was found. */
function* pointsToTry(
  space: ProofSpace,
  combinations: readonly (number | string)[][],
  maxTries: number,
  random: () => number,
): Generator<Point> {
  const initial = defaultPoint(space);
  yield initial;
  for (const options of combinations) yield { ...initial, options };
  const corners = 2 ** space.dimensions.length;
  const perCombination = Math.max(2, Math.floor(maxTries / 2 / combinations.length));
  for (const options of combinations) {
    const count = Math.min(corners, perCombination);
    for (let each = 0; each < count; each += 1) {
      // All corners where there are few enough, else the two extremes and a random selection.
      const isAll = corners <= perCombination;
      yield {
        options,
        numbers: space.dimensions.map((dimension, index) => {
          const isHigh =
            isAll || each < 2
              ? isAll
                ? Math.floor(each / 2 ** index) % 2 === 1
                : each === 1
              : random() < 0.5;
          return isHigh ? settle(dimension, dimension.max) : dimension.min;
        }),
      };
    }
  }
  for (;;) {
    const options = combinations[Math.floor(random() * combinations.length)] ?? initial.options;
    // Half of the points stand on the steps that the control offers, half anywhere.
    const isStepped = random() < 0.5;
    yield {
      options,
      numbers: space.dimensions.map((dimension) =>
        isStepped
          ? stepAt(dimension, random())
          : settle(dimension, dimension.min + random() * (dimension.max - dimension.min)),
      ),
    };
  }
}

/**
 * Tries a plan over everything that it allows. First by bounds: what interval and affine arithmetic can show for all sizes at
 * once is proved. Then one by one: the defaults under every choice, the corners of the size box, random points inside (seeded),
 * and both sides of the border between allowed and refused. Measured thicknesses are tried 6 % thinner and thicker.
 *
 * A fit that a requirement refuses counts as refused politely. A fit that is allowed and cannot be built is a failure, shrunk
 * to the simplest sizes at which it still fails. A plan whose allowed region is empty fails. Yields its progress between
 * tries, so that a worker can report and stop it; the return value is the outcome. Deterministic for a seed.
 */
export function* provePlan(
  plan: CompiledPlan,
  options: ProofOptions,
): Generator<{ progress: number }, ProofOutcome> {
  const { seed, maxTries, units = 'mm', onProgress, shouldStop } = options;
  const random = createRandom(seed);
  const opening = workOut(plan, { values: {}, measured: {}, units });
  const space = proofSpace(plan, nominalThicknesses(plan, opening.slots));
  const combinations = optionCombinations(space, MAX_COMBINATIONS, random);
  const outcome: ProofOutcome = {
    holds: false,
    proved: [],
    tried: [],
    failures: [],
    tries: 0,
    refused: 0,
    allowed: 0,
    wasStopped: false,
  };
  const known: Problem[] = [];
  let lastAllowed: Point | null = null;
  let lastRefused: Point | null = null;
  let borders = 0;

  const look = (point: Point): Verdict => {
    outcome.tries += 1;
    const verdict = judge(plan, space, point, units);
    if (verdict.state === 'refused') {
      outcome.refused += 1;
      lastRefused = point;
      return verdict;
    }
    outcome.allowed += 1;
    lastAllowed = point;
    for (const problem of verdict.errors) {
      if (known.length >= MAX_FAILURES || known.some((each) => isSameProblem(each, problem))) continue;
      known.push(problem);
      const simplest = shrink(plan, space, point, problem, units);
      outcome.failures.push({
        sentence: sentenceOf(space, simplest.point, simplest.problem, units),
        rule: problem.rule,
        fit: fitOf(space, simplest.point, units),
        problem: simplest.problem,
      });
    }
    return verdict;
  };

  /** Halves the way between an allowed and a refused point; the last allowed one stands at the side of a requirement. */
  const walkToBorder = (allowed: Point, refused: Point): void => {
    let near = allowed;
    let far = { ...refused, options: allowed.options };
    for (let turn = 0; turn < 12 && outcome.tries < maxTries; turn += 1) {
      const middle = between(space, near, far, 0.5);
      if (look(middle).state === 'allowed') near = middle;
      else far = middle;
    }
    borders += 1;
  };

  const bounds = boundPlan(plan, space, combinations);
  let bounded = bounds.next();
  while (!bounded.done) {
    onProgress?.(bounded.value * 0.3);
    yield { progress: bounded.value * 0.3 };
    if (shouldStop?.()) {
      outcome.wasStopped = true;
      break;
    }
    bounded = bounds.next();
  }
  let unproved: string[] = [];
  if (bounded.done) ({ proved: outcome.proved, unproved } = bounded.value);

  let sinceBorder = 0;
  for (const point of pointsToTry(space, combinations, maxTries, random)) {
    if (outcome.wasStopped || outcome.tries >= maxTries) break;
    const before = lastAllowed;
    const verdict = look(point);
    sinceBorder += 1;
    if (sinceBorder >= 20 && verdict.state === 'refused' && before) {
      sinceBorder = 0;
      walkToBorder(before, point);
    } else if (sinceBorder >= 20 && verdict.state === 'allowed' && lastRefused) {
      sinceBorder = 0;
      walkToBorder(point, lastRefused);
    }
    if (outcome.tries % YIELD_EVERY === 0) {
      const progress = 0.3 + 0.7 * Math.min(1, outcome.tries / maxTries);
      onProgress?.(progress);
      yield { progress };
      if (shouldStop?.()) outcome.wasStopped = true;
    }
  }
  if (outcome.allowed === 0 && !outcome.wasStopped) {
    outcome.failures.push({
      sentence: `None of the ${outcome.tries} fits that were tried passes the plan’s requirements: nobody could build it.`,
      rule: 'empty-region',
      fit: fitOf(space, defaultPoint(space), units),
      problem: {
        line: 1,
        column: 1,
        length: 1,
        rule: 'empty-region',
        severity: 'error',
        message: 'The requirements exclude every size that the plan allows.',
        hint: 'Loosen a <Require>, or widen the limits of a <Size>.',
      },
    });
  }
  outcome.tried = describeTries(space, combinations.length, outcome, borders, unproved);
  outcome.holds = outcome.failures.length === 0 && !outcome.wasStopped;
  return outcome;
}

function describeTries(
  space: ProofSpace,
  combinations: number,
  outcome: ProofOutcome,
  borders: number,
  unproved: readonly string[],
): string[] {
  const { tries, allowed, refused } = outcome;
  const of = `${space.dimensions.length} ${space.dimensions.length === 1 ? 'size' : 'sizes'} and ${combinations} ${
    combinations === 1 ? 'combination' : 'combinations'
  } of choices`;
  const told = [
    `${tries} fits were worked out in full, over ${of}: ${allowed} allowed, ${refused} refused by a requirement.`,
  ];
  if (borders > 0) told.push(`The border of the allowed sizes was approached ${borders} times.`);
  if (unproved.length > 0) told.push(`Bounds could not show ${unproved.join('; ')}: this was only tried.`);
  if (outcome.wasStopped) told.push('The proof was stopped before its end.');
  return told;
}
