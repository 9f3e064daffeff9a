import { roundNm } from '#lib/units/length.ts';

import { keptValues, namesRead } from './dependencies.ts';
import type { KeptValue } from './dependencies.ts';
import { FUNCTIONS, roundDownTo, roundTo, roundUpTo } from './functions.ts';
import { ARITHMETIC, calculate, compareNumbers } from './operators.ts';
import type {
  ChoiceDeclaration,
  CompiledPlan,
  Expression,
  Formula,
  Kind,
  SizeDeclaration,
  Value,
} from './types.ts';

/** Works a formula out over the slots: lengths in nm, angles in degrees, yes as 1, a text as its number in `texts`. */
export type Run = (slots: Float64Array) => number;

/** A size or choice and the slot that it is set in. */
interface Input {
  declaration: SizeDeclaration | ChoiceDeclaration;
  slot: number;
}

/** A kept value and how it is worked out; `run` is null for a list. */
export interface Step extends KeptValue {
  slot: number;
  kind: Kind;
  run: Run | null;
  /** Slots that it reads, so that a fault is reported where it arises and not again behind it. */
  reads: number[];
}

/** A plan made ready to be worked out many times: every formula compiled once to closures over numeric slots. */
export interface Program {
  inputs: Input[];
  steps: Step[];
  slotOf: ReadonlyMap<string, number>;
  size: number;
  texts: string[];
  textNumber: (text: string) => number;
  /** Formulas by identity, compiled at their first use. */
  runs: Map<Expression, Run>;
  /** Lists kept under a name, as expressions, since a slot holds one number. */
  lists: ReadonlyMap<string, Expression>;
}

const programs = new WeakMap<CompiledPlan, Program>();

/** The program of a plan, compiled at its first use and kept as long as the plan is. */
export function programOf(plan: CompiledPlan): Program {
  let program = programs.get(plan);
  if (program === undefined) {
    program = makeProgram(plan);
    programs.set(plan, program);
  }
  return program;
}

function makeProgram(plan: CompiledPlan): Program {
  const slotOf = new Map<string, number>();
  const texts: string[] = [];
  const numbers = new Map<string, number>();
  const textNumber = (text: string): number => {
    const known = numbers.get(text);
    if (known !== undefined) return known;
    numbers.set(text, texts.length);
    return texts.push(text) - 1;
  };
  const inputs: Input[] = [];
  for (const declaration of plan.declarations) {
    if (declaration.type !== 'size' && declaration.type !== 'choice') continue;
    slotOf.set(declaration.name, slotOf.size);
    inputs.push({ declaration, slot: slotOf.size - 1 });
  }
  const byKey = new Map(keptValues(plan.declarations).map((value) => [value.key, value]));
  for (const key of plan.order) slotOf.set(key, slotOf.size);
  const lists = new Map<string, Expression>();
  const program: Program = {
    inputs,
    steps: [],
    slotOf,
    size: slotOf.size,
    texts,
    textNumber,
    runs: new Map(),
    lists,
  };
  for (const key of plan.order) {
    const value = byKey.get(key);
    if (!value) throw new Error(`The plan orders ${key}, which it does not declare.`);
    const { kind } = value.formula.expression;
    const isList = typeof kind !== 'string';
    if (isList) lists.set(key, value.formula.expression);
    program.steps.push({
      ...value,
      slot: slotOf.get(key) ?? 0,
      kind,
      run: isList ? null : compileRun(value.formula.expression, program),
      reads: namesRead(value.formula.expression).flatMap((name) => slotOf.get(name) ?? []),
    });
  }
  return program;
}

function slotFor(key: string, program: Program): number {
  const slot = program.slotOf.get(key);
  if (slot === undefined) throw new Error(`Nothing is kept under ${key}.`);
  return slot;
}

/** A number that is written out, or undefined. */
function constantOf(expression: Expression): number | undefined {
  return expression.op === 'value' && typeof expression.value === 'number' ? expression.value : undefined;
}

/** The slot that an expression is nothing but a reading of, or undefined. */
function slotOf(expression: Expression, program: Program): number | undefined {
  if (expression.op === 'name') return slotFor(expression.name, program);
  if (expression.op === 'member') return slotFor(`${expression.name}.${expression.member}`, program);
  return undefined;
}

/**
 * One closure for the pairs that formulas are mostly made of (a kept value and a constant, two kept values), which saves
 * two calls for each; null for other pairs.
 */
function compileShortArithmetic(
  sign: string,
  leftOf: Expression,
  rightOf: Expression,
  program: Program,
): Run | null {
  const [from, to] = [slotOf(leftOf, program), slotOf(rightOf, program)];
  const [before, after] = [constantOf(leftOf), constantOf(rightOf)];
  if (from !== undefined && after !== undefined) {
    if (sign === '+') return (s) => (s[from] as number) + after;
    if (sign === '-') return (s) => (s[from] as number) - after;
    if (sign === '*') return (s) => (s[from] as number) * after;
    if (sign === '/') return (s) => (s[from] as number) / after;
  }
  if (before !== undefined && to !== undefined && sign === '*') return (s) => before * (s[to] as number);
  if (from !== undefined && to !== undefined) {
    if (sign === '+') return (s) => (s[from] as number) + (s[to] as number);
    if (sign === '-') return (s) => (s[from] as number) - (s[to] as number);
    if (sign === '*') return (s) => (s[from] as number) * (s[to] as number);
    if (sign === '/') return (s) => (s[from] as number) / (s[to] as number);
  }
  return null;
}

function compileArithmetic(expression: Expression & { op: 'binary' }, program: Program): Run {
  const { sign } = expression;
  const short = compileShortArithmetic(sign, expression.left, expression.right, program);
  if (short) return short;
  const left = compileRun(expression.left, program);
  const right = compileRun(expression.right, program);
  const constant = constantOf(expression.right);
  const factor = constantOf(expression.left);
  switch (sign) {
    case '+':
      return constant === undefined ? (s) => left(s) + right(s) : (s) => left(s) + constant;
    case '-':
      return constant === undefined ? (s) => left(s) - right(s) : (s) => left(s) - constant;
    case '*':
      if (factor !== undefined) return (s) => factor * right(s);
      return constant === undefined ? (s) => left(s) * right(s) : (s) => left(s) * constant;
    case '/':
      return constant === undefined ? (s) => left(s) / right(s) : (s) => left(s) / constant;
    default:
      return (s) => calculate(sign, left(s), right(s));
  }
}

/** Lengths are compared by the nanometre; spelled out for each sign, because comparisons stand in inner loops. */
function compileComparison(sign: string, kind: Kind, left: Run, right: Run): Run {
  if (kind === 'length') {
    switch (sign) {
      case '<':
        return (s) => (left(s) - right(s) <= -0.5 ? 1 : 0);
      case '<=':
        return (s) => (left(s) - right(s) < 0.5 ? 1 : 0);
      case '>':
        return (s) => (left(s) - right(s) >= 0.5 ? 1 : 0);
      case '>=':
        return (s) => (left(s) - right(s) > -0.5 ? 1 : 0);
    }
  }
  return (s) => (compareNumbers(sign, kind, left(s), right(s)) ? 1 : 0);
}

function compileBinary(expression: Expression & { op: 'binary' }, program: Program): Run {
  if (ARITHMETIC.has(expression.sign)) return compileArithmetic(expression, program);
  const left = compileRun(expression.left, program);
  const right = compileRun(expression.right, program);
  switch (expression.sign) {
    case '&&':
      return (s) => (left(s) !== 0 && right(s) !== 0 ? 1 : 0);
    case '||':
      return (s) => (left(s) !== 0 || right(s) !== 0 ? 1 : 0);
    default:
      return compileComparison(expression.sign, expression.left.kind, left, right);
  }
}

function compileCall(expression: Expression & { op: 'call' }, program: Program): Run {
  const args = expression.args.map((arg) => compileRun(arg, program));
  const [first, second] = args;
  if (!first) throw new Error(`${expression.name} has no values.`);
  if (second && args.length === 2) {
    switch (expression.name) {
      case 'min':
        return (s) => Math.min(first(s), second(s));
      case 'max':
        return (s) => Math.max(first(s), second(s));
      case 'floor':
      case 'roundDown':
        return (s) => roundDownTo(first(s), second(s));
      case 'ceil':
      case 'roundUp':
        return (s) => roundUpTo(first(s), second(s));
      case 'round':
        return (s) => roundTo(first(s), second(s));
    }
  }
  const called = FUNCTIONS.get(expression.name);
  if (!called) throw new Error(`There is no function ${expression.name}.`);
  return (s) => called.run(args.map((arg) => arg(s)));
}

/** Compiles a checked expression of one value to a closure. No text is ever turned into code. */
function compileRun(expression: Expression, program: Program): Run {
  switch (expression.op) {
    case 'value': {
      const { value } = expression;
      const number =
        typeof value === 'number'
          ? value
          : typeof value === 'string'
            ? program.textNumber(value)
            : value === true
              ? 1
              : 0;
      return () => number;
    }
    case 'name': {
      const slot = slotFor(expression.name, program);
      return (s) => s[slot] as number;
    }
    case 'member': {
      const slot = slotFor(`${expression.name}.${expression.member}`, program);
      return (s) => s[slot] as number;
    }
    case 'unary': {
      const of = compileRun(expression.of, program);
      if (expression.sign === '!') return (s) => (of(s) === 0 ? 1 : 0);
      return expression.sign === '-' ? (s) => -of(s) : of;
    }
    case 'binary':
      return compileBinary(expression, program);
    case 'if': {
      const test = compileRun(expression.test, program);
      const then = compileRun(expression.then, program);
      const otherwise = compileRun(expression.otherwise, program);
      return (s) => (test(s) !== 0 ? then(s) : otherwise(s));
    }
    case 'call':
      return compileCall(expression, program);
    case 'list':
      throw new Error('A list is no single value.');
  }
}

/** The closure of a formula's expression, compiled at its first use. */
export function runOf(expression: Expression, program: Program): Run {
  let run = program.runs.get(expression);
  if (run === undefined) {
    run = compileRun(expression, program);
    program.runs.set(expression, run);
  }
  return run;
}

/** Rounds as kept values are: lengths, areas and volumes to the whole unit, once; other kinds stay as they are. */
export function roundKept(kind: Kind, value: number): number {
  if (kind === 'length') return roundNm(value);
  return kind === 'area' || kind === 'volume' ? Math.round(value) + 0 : value;
}

/** The value of an expression of any kind, lists too, as plain data; lengths are rounded to the nanometre. */
export function valueOf(expression: Expression, program: Program, slots: Float64Array): Value {
  if (typeof expression.kind === 'string') {
    const number = runOf(expression, program)(slots);
    if (expression.kind === 'text') return program.texts[number] ?? '';
    if (expression.kind === 'yesno') return number !== 0;
    return roundKept(expression.kind, number);
  }
  switch (expression.op) {
    case 'list':
      return expression.items.map((item) => valueOf(item, program, slots));
    case 'if':
      return valueOf(
        runOf(expression.test, program)(slots) !== 0 ? expression.then : expression.otherwise,
        program,
        slots,
      );
    case 'name': {
      const named = program.lists.get(expression.name);
      return named ? valueOf(named, program, slots) : [];
    }
    default:
      return [];
  }
}

/** True where a component's `when` is absent or holds. */
export function isIncluded(when: Formula | undefined, program: Program, slots: Float64Array): boolean {
  return when === undefined || runOf(when.expression, program)(slots) !== 0;
}

/** Works every kept value out into the slots; the inputs must be set already. `measured` overrides thicknesses by slot. */
export function runSteps(
  program: Program,
  slots: Float64Array,
  measured?: ReadonlyMap<number, number>,
): void {
  const isMeasured = measured !== undefined && measured.size > 0;
  for (const { slot, run, kind } of program.steps) {
    if (run === null) continue;
    if (isMeasured) {
      const given = measured.get(slot);
      if (given !== undefined) {
        slots[slot] = given;
        continue;
      }
    }
    const value = run(slots);
    // Lengths are nearly always positive; roundNm takes the others, and NaN.
    if (kind === 'length') slots[slot] = value > 0 ? Math.round(value) : roundNm(value);
    else slots[slot] = kind === 'number' ? value : roundKept(kind, value);
  }
}
