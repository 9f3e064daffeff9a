import { claimsOf } from './claims.ts';
import type { Claim, ClaimTopic } from './claims.ts';
import { programOf } from './evaluate.ts';
import type { Program } from './evaluate.ts';
import {
  absolute,
  add,
  divide,
  exactly,
  greatest,
  hull,
  isBounded,
  least,
  multiply,
  negate,
  range,
  remainder,
  rising,
  roundForm,
  sineForm,
  tangentForm,
  unbounded,
  variable,
  verdict,
} from './forms.ts';
import type { Form } from './forms.ts';
import { RELATIVE_SLACK } from './functions.ts';
import type { Dimension, ProofSpace } from './proof-points.ts';
import { faultOf } from './resolving.ts';
import type { CompiledPlan, Expression } from './types.ts';

/** What was shown for all allowed fits at once, and what was not. */
export interface Bounds {
  /** A sentence for each topic of which something was proved. */
  proved: string[];
  /** What bounds could not show, in a few words each: it is only tried. */
  unproved: string[];
}

/** Boxes that are looked at in all; each costs about as much as working the plan out a few times. */
const MAX_BOXES = 3000;
const MAX_COMBINATIONS = 64;

interface Box {
  low: number[];
  high: number[];
}

/** The values of all names over one box. */
interface Values {
  forms: (Form | undefined)[];
  size: number;
  program: Program;
}

function compareForms(sign: string, isLength: boolean, a: Form, b: Form): Form {
  const size = a.slopes.length;
  if (!isBounded(a) || !isBounded(b)) return range(0, 1, size, true);
  const difference = add(a, b, -1);
  const reach = Math.max(1, Math.abs(a.low), Math.abs(a.high), Math.abs(b.low), Math.abs(b.high));
  const slack = isLength ? 0.5 : RELATIVE_SLACK * reach;
  // Between sure and impossible lies a margin, so that rounding noise never turns a maybe into a proof.
  const margin = isLength ? 1e-3 : 2 * RELATIVE_SLACK * reach;
  const { low, high } = difference;
  switch (sign) {
    case '<':
      return verdict(high <= -slack - margin, low > -slack + margin, size);
    case '<=':
      return verdict(high < slack - margin || high <= 0, low >= slack + margin, size);
    case '>':
      return verdict(low >= slack + margin, high < slack - margin, size);
    case '>=':
      return verdict(low > -slack + margin || low >= 0, high <= -slack - margin, size);
    case '===':
      return verdict(low === 0 && high === 0, low >= slack + margin || high <= -slack - margin, size);
    default:
      return verdict(low >= slack + margin || high <= -slack - margin, low === 0 && high === 0, size);
  }
}

function callForm(name: string, args: Form[], size: number): Form {
  const [first = unbounded(size), second] = args;
  const one = exactly(1, size);
  switch (name) {
    case 'min':
      return least(args);
    case 'max':
      return greatest(args);
    case 'abs':
      return absolute(first);
    case 'floor':
    case 'roundDown':
      return roundForm(first, second ?? one, 'down');
    case 'ceil':
    case 'roundUp':
      return roundForm(first, second ?? one, 'up');
    case 'round':
      return roundForm(first, second ?? one, 'near');
    case 'sqrt':
      return first.low < 0 ? unbounded(size) : rising(first, Math.sqrt);
    case 'hypot': {
      if (!args.every(isBounded)) return unbounded(size);
      const sizes = args.map(absolute);
      return range(
        Math.hypot(...sizes.map((form) => form.low)),
        Math.hypot(...sizes.map((form) => form.high)),
        size,
      );
    }
    case 'sin':
      return sineForm(first);
    case 'cos':
      return sineForm(add(first, exactly(90, size)));
    case 'tan':
      return tangentForm(first);
    case 'asin':
      return first.low < -1 || first.high > 1
        ? unbounded(size)
        : rising(first, (value) => (Math.asin(value) * 180) / Math.PI);
    case 'acos':
      return first.low < -1 || first.high > 1
        ? unbounded(size)
        : negate(rising(first, (value) => (-Math.acos(value) * 180) / Math.PI));
    case 'atan':
      return rising(first, (value) => (Math.atan(value) * 180) / Math.PI);
    case 'atan2': {
      if (!second || !isBounded(first) || !isBounded(second)) return unbounded(size);
      if (second.low <= 0) return range(-180, 180, size);
      const corners = [first.low, first.high].flatMap((rise) =>
        [second.low, second.high].map((run) => (Math.atan2(rise, run) * 180) / Math.PI),
      );
      return range(Math.min(...corners), Math.max(...corners), size);
    }
    default:
      return unbounded(size);
  }
}

/** Bounds of an expression over a box. Sound: no value that it can take there lies outside. */
function formOf(expression: Expression, values: Values): Form {
  const { size, program } = values;
  const named = (key: string): Form => values.forms[program.slotOf.get(key) ?? -1] ?? unbounded(size);
  switch (expression.op) {
    case 'value':
      if (typeof expression.value === 'number') return exactly(expression.value, size);
      if (typeof expression.value === 'string') return exactly(program.textNumber(expression.value), size);
      return exactly(expression.value === true ? 1 : 0, size);
    case 'name':
      return named(expression.name);
    case 'member':
      return named(`${expression.name}.${expression.member}`);
    case 'unary': {
      const of = formOf(expression.of, values);
      if (expression.sign === '!') return verdict(of.high === 0, of.low > 0, size);
      return expression.sign === '-' ? negate(of) : of;
    }
    case 'binary': {
      const left = formOf(expression.left, values);
      const right = formOf(expression.right, values);
      switch (expression.sign) {
        case '+':
          return add(left, right);
        case '-':
          return add(left, right, -1);
        case '*':
          return multiply(left, right);
        case '/':
          return divide(left, right);
        case '%':
          return remainder(left, right);
        case '&&':
          return verdict(left.low > 0 && right.low > 0, left.high === 0 || right.high === 0, size);
        case '||':
          return verdict(left.low > 0 || right.low > 0, left.high === 0 && right.high === 0, size);
        default:
          return compareForms(expression.sign, expression.left.kind === 'length', left, right);
      }
    }
    case 'if': {
      const test = formOf(expression.test, values);
      if (test.low > 0) return formOf(expression.then, values);
      if (test.high === 0) return formOf(expression.otherwise, values);
      return hull(formOf(expression.then, values), formOf(expression.otherwise, values));
    }
    case 'call':
      return callForm(
        expression.name,
        expression.args.map((arg) => formOf(arg, values)),
        size,
      );
    case 'list':
      return unbounded(size);
  }
}

function valuesOver(
  program: Program,
  space: ProofSpace,
  options: readonly (number | string)[] | null,
  box: Box,
): Values {
  const size = space.dimensions.length;
  const forms: (Form | undefined)[] = Array.from({ length: program.size }, () => undefined);
  const values: Values = { forms, size, program };
  const measured = new Map<number, Form>();
  space.dimensions.forEach((dimension, index) => {
    const form = variable(box.low[index] ?? 0, box.high[index] ?? 0, index, size, dimension.kind !== 'angle');
    const slot =
      program.slotOf.get(dimension.type === 'size' ? dimension.name : `${dimension.name}.thickness`) ?? -1;
    if (dimension.type === 'size') forms[slot] = form;
    else measured.set(slot, form);
  });
  space.choices.forEach((choice, index) => {
    const numbers = (
      options ? [options[index] ?? choice.default] : choice.options.map((option) => option.value)
    ).map((value) => (typeof value === 'string' ? program.textNumber(value) : value));
    const isWhole = numbers.every((number) => Number.isInteger(number));
    const [low, high] = [Math.min(...numbers), Math.max(...numbers)];
    forms[program.slotOf.get(choice.name) ?? -1] =
      low === high ? exactly(low, size) : range(low, high, size, isWhole);
  });
  for (const { slot, kind, formula } of program.steps) {
    const given = measured.get(slot);
    if (given) forms[slot] = given;
    else if (typeof kind === 'string') {
      const form = formOf(formula.expression, values);
      // Kept lengths are rounded to the nanometre, which moves them by half of one at most.
      forms[slot] = kind === 'length' && !form.isWhole ? roundForm(form, exactly(1, size), 'near') : form;
    }
  }
  return values;
}

/** Splits a box where it is widest against the whole; numbers that count come first, because they bend formulas most. */
function splitBox(space: ProofSpace, box: Box): [Box, Box] | null {
  let widest = -1;
  let most = 0;
  space.dimensions.forEach((dimension, index) => {
    const width = (box.high[index] ?? 0) - (box.low[index] ?? 0);
    const whole = dimension.max - dimension.min;
    if (width <= 0 || whole <= 0 || (dimension.kind === 'length' && width < 100_000)) return;
    const weight = width / whole + (dimension.kind === 'number' ? 2 : 0);
    if (weight > most) [widest, most] = [index, weight];
  });
  const dimension: Dimension | undefined = space.dimensions[widest];
  if (!dimension) return null;
  const [low, high] = [box.low[widest] ?? 0, box.high[widest] ?? 0];
  const isCounted = dimension.kind === 'number';
  const middle = isCounted || dimension.kind === 'length' ? Math.floor((low + high) / 2) : (low + high) / 2;
  return [
    { low: box.low, high: box.high.with(widest, middle) },
    { low: box.low.with(widest, isCounted ? middle + 1 : middle), high: box.high },
  ];
}

/** A claim over one box: shown, or not (it may hold all the same). */
function isShown(claim: Claim, values: Values): boolean {
  if (formOf(claim.that, values).low <= 0) return false;
  return claim.whole === undefined || formOf(claim.whole, values).isWhole;
}

const TOPICS: readonly (readonly [ClaimTopic, all: string, some: string])[] = [
  [
    'sizes',
    'Every part has a length, a width and a thickness above zero.',
    'have a length, a width and a thickness above zero',
  ],
  ['quantities', 'Every part is cut a whole number of times.', 'are cut a whole number of times'],
  [
    'stock',
    'Every part with stock sizes can be cut from one of them.',
    'can be cut from one of their stock sizes',
  ],
  [
    'shapes',
    'Every groove, rabbet, notch, cutout and hole that bounds can follow lies inside its part.',
    'keep their shapes inside',
  ],
];

/**
 * Proves what can be proved for all allowed fits at once: boxes of sizes are bounded by affine and interval arithmetic, thrown
 * away where a requirement surely refuses them, and split where bounds are not yet narrow enough (branch and bound). Choices are
 * taken one combination after another, or together where there are more than 64. Yields its share of progress.
 */
export function* boundPlan(
  plan: CompiledPlan,
  space: ProofSpace,
  combinations: readonly (number | string)[][],
): Generator<number, Bounds> {
  const program = programOf(plan);
  const { claims, onlyTried } = claimsOf(plan);
  const requirements = plan.declarations.filter((declaration) => declaration.type === 'require');
  const total = space.choices.reduce((product, choice) => product * choice.options.length, 1);
  const cases: (readonly (number | string)[] | null)[] =
    total <= MAX_COMBINATIONS ? [...combinations] : [null];
  const open = new Set<Claim>(claims);
  let isFinite = true;
  let looked = 0;

  const isRefused = (values: Values): boolean =>
    requirements.some(({ that, when }) => {
      if (when && formOf(when.expression, values).low <= 0) return false;
      return formOf(that.expression, values).high === 0;
    });

  const budget = Math.max(50, Math.floor(MAX_BOXES / cases.length));
  for (const [index, options] of cases.entries()) {
    const whole: Box = {
      low: space.dimensions.map((each) => each.min),
      high: space.dimensions.map((each) => each.max),
    };
    const boxes: Box[] = [whole];
    let spent = 0;
    for (let box = boxes.pop(); box !== undefined; box = boxes.pop()) {
      spent += 1;
      looked += 1;
      if (looked % 50 === 0) yield Math.min(1, (index + spent / budget) / cases.length);
      const values = valuesOver(program, space, options, box);
      if (isRefused(values)) continue;
      const hidden = [...open].filter((claim) => !isShown(claim, values));
      const isEveryFinite = program.steps.every(({ slot, kind, run }) => {
        const form = values.forms[slot];
        return (
          run === null ||
          (form !== undefined && isBounded(form) && !faultOf(kind, form.low) && !faultOf(kind, form.high))
        );
      });
      if (hidden.length === 0 && (isEveryFinite || !isFinite)) continue;
      const halves = spent < budget ? splitBox(space, box) : null;
      if (halves) {
        boxes.push(halves[1], halves[0]);
        continue;
      }
      // Too small or too many: what is not shown here stays unproved.
      for (const claim of hidden) open.delete(claim);
      if (!isEveryFinite) isFinite = false;
    }
  }
  return describe(claims, open, isFinite, onlyTried);
}

function list(marks: readonly string[]): string {
  const unique = [...new Set(marks)];
  return unique.length > 1 ? `${unique.slice(0, -1).join(', ')} and ${unique.at(-1)}` : (unique[0] ?? '');
}

function describe(
  claims: readonly Claim[],
  shown: ReadonlySet<Claim>,
  isFinite: boolean,
  onlyTried: readonly string[],
): Bounds {
  const proved: string[] = [];
  const unproved: string[] = [...new Set(onlyTried)];
  if (isFinite) proved.push('Every value is finite and within 1 km.');
  else unproved.push('that every value is finite');
  for (const [topic, whenAll, whenSome] of TOPICS) {
    const about = claims.filter((claim) => claim.topic === topic);
    const missing = about.filter((claim) => !shown.has(claim));
    if (about.length === 0) continue;
    if (missing.length === 0) proved.push(whenAll);
    else {
      const left = new Set(missing.map((claim) => claim.mark));
      const sure = [...new Set(about.map((claim) => claim.mark))].filter((mark) => !left.has(mark));
      if (sure.length > 0) proved.push(`${sure.length === 1 ? 'Part' : 'Parts'} ${list(sure)} ${whenSome}.`);
      unproved.push(
        `${topic === 'sizes' ? 'the sizes' : topic === 'stock' ? 'the stock' : `the ${topic}`} of ${list([...left])}`,
      );
    }
  }
  return { proved, unproved };
}
