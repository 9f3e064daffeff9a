import { describeKind, isNumericKind, isSameKind } from './kinds.ts';
import type { Kind } from './types.ts';

/** A function of the plan language: how it is written, what it gives, and how its kind follows from its arguments. */
export interface PlanFunction {
  /** How an author writes it; shown in hints and in the reference. */
  usage: string;
  doc: string;
  least: number;
  most: number;
  /** The kind of the result, or a sentence about what was wanted instead. */
  kindOf: (args: readonly Kind[]) => Kind | { wanted: string };
  /** Works on plain doubles: nanometres, degrees, kilograms. */
  run: (args: readonly number[]) => number;
}

/**
 * Relative slack of rounding and comparing. A quotient such as 0.3/0.1 misses its whole number by one unit in the last
 * place (1.1e−16 relative); 1e−12 absorbs a long chain of such steps and is far below any graduation.
 */
export const RELATIVE_SLACK = 1e-12;

function snapToWhole(quotient: number): number {
  const whole = Math.round(quotient);
  return Math.abs(quotient - whole) <= RELATIVE_SLACK * Math.max(1, Math.abs(quotient)) ? whole : quotient;
}

/** The next lower multiple of `step`; a value within slack of a multiple is that multiple. */
export function roundDownTo(value: number, step: number): number {
  return Math.floor(snapToWhole(value / Math.abs(step))) * Math.abs(step);
}

/** The next higher multiple of `step`; a value within slack of a multiple is that multiple. */
export function roundUpTo(value: number, step: number): number {
  return Math.ceil(snapToWhole(value / Math.abs(step))) * Math.abs(step) + 0;
}

/** The nearest multiple of `step`, halves away from zero. */
export function roundTo(value: number, step: number): number {
  const quotient = value / Math.abs(step);
  const size = Math.floor(snapToWhole(Math.abs(quotient) + 0.5));
  return (quotient < 0 ? -size : size) * Math.abs(step);
}

/** Sines and cosines of the angles that people write come out exact: 0, ±1/2, ±1. */
function snapSine(value: number): number {
  for (const exact of [0, 0.5, -0.5, 1, -1]) if (Math.abs(value - exact) < 1e-15) return exact;
  return value;
}

const RADIANS = Math.PI / 180;
const sine = (degrees: number): number => snapSine(Math.sin(degrees * RADIANS));
const cosine = (degrees: number): number => snapSine(Math.cos(degrees * RADIANS));

function numericAlike(args: readonly Kind[]): Kind | { wanted: string } {
  const first = args[0] ?? 'number';
  if (!isNumericKind(first)) return { wanted: 'numbers or measures of one kind' };
  const other = args.find((kind) => !isSameKind(kind, first));
  return other === undefined ? first : { wanted: `${describeKind(first)} in every place` };
}

function roundedKind(args: readonly Kind[]): Kind | { wanted: string } {
  const [value, step] = args;
  if (value === undefined || !isNumericKind(value)) return { wanted: 'a number or a measure' };
  if (step === undefined)
    return value === 'number' ? 'number' : { wanted: `a step that is ${describeKind(value)}` };
  return isSameKind(value, step) ? value : { wanted: `a step that is ${describeKind(value)}` };
}

const toNumber =
  (wanted: 'angle' | 'number', result: Kind) =>
  (args: readonly Kind[]): Kind | { wanted: string } =>
    args[0] === wanted ? result : { wanted: wanted === 'angle' ? 'an angle (30*deg)' : 'a number' };

const rounding = (
  usage: string,
  doc: string,
  run: (value: number, step: number) => number,
  least = 1,
): PlanFunction => ({
  usage,
  doc,
  least,
  most: 2,
  kindOf: roundedKind,
  run: (args) => run(args[0] ?? NaN, args[1] ?? 1),
});

/** Every function by name. A Map, so that no name reaches a prototype. */
export const FUNCTIONS: ReadonlyMap<string, PlanFunction> = new Map<string, PlanFunction>([
  [
    'min',
    {
      usage: 'min(a, b)',
      doc: 'the least of its values',
      least: 1,
      most: 50,
      kindOf: numericAlike,
      run: (args) => Math.min(...args),
    },
  ],
  [
    'max',
    {
      usage: 'max(a, b)',
      doc: 'the greatest of its values',
      least: 1,
      most: 50,
      kindOf: numericAlike,
      run: (args) => Math.max(...args),
    },
  ],
  [
    'abs',
    {
      usage: 'abs(a)',
      doc: 'the value without its sign',
      least: 1,
      most: 1,
      kindOf: numericAlike,
      run: (args) => Math.abs(args[0] ?? NaN),
    },
  ],
  [
    'floor',
    rounding(
      'floor(a, 5*mm)',
      'rounds down to a multiple of the step, a plain number to a whole one',
      roundDownTo,
    ),
  ],
  [
    'ceil',
    rounding(
      'ceil(a, 5*mm)',
      'rounds up to a multiple of the step, a plain number to a whole one',
      roundUpTo,
    ),
  ],
  [
    'round',
    rounding('round(a, 5*mm)', 'rounds to the nearest multiple of the step, halves away from zero', roundTo),
  ],
  ['roundUp', rounding('roundUp(a, 5*mm)', 'rounds up to a multiple of the step', roundUpTo)],
  ['roundDown', rounding('roundDown(a, 5*mm)', 'rounds down to a multiple of the step', roundDownTo)],
  [
    'sqrt',
    {
      usage: 'sqrt(a)',
      doc: 'the square root; of an area it is a length',
      least: 1,
      most: 1,
      kindOf: ([kind]) =>
        kind === 'number' ? 'number' : kind === 'area' ? 'length' : { wanted: 'a number or an area' },
      run: (args) => Math.sqrt(args[0] ?? NaN),
    },
  ],
  [
    'hypot',
    {
      usage: 'hypot(a, b)',
      doc: 'the diagonal over its values',
      least: 1,
      most: 3,
      kindOf: numericAlike,
      run: (args) => Math.hypot(...args),
    },
  ],
  [
    'sin',
    {
      usage: 'sin(30*deg)',
      doc: 'sine of an angle',
      least: 1,
      most: 1,
      kindOf: toNumber('angle', 'number'),
      run: (args) => sine(args[0] ?? NaN),
    },
  ],
  [
    'cos',
    {
      usage: 'cos(30*deg)',
      doc: 'cosine of an angle',
      least: 1,
      most: 1,
      kindOf: toNumber('angle', 'number'),
      run: (args) => cosine(args[0] ?? NaN),
    },
  ],
  [
    'tan',
    {
      usage: 'tan(30*deg)',
      doc: 'tangent of an angle; at a right angle it is not finite',
      least: 1,
      most: 1,
      kindOf: toNumber('angle', 'number'),
      run: (args) => {
        const degrees = args[0] ?? NaN;
        const across = cosine(degrees);
        const tangent = Math.tan(degrees * RADIANS);
        if (across === 0) return Infinity;
        return sine(degrees) === 0
          ? 0
          : Math.abs(Math.abs(tangent) - 1) < 1e-15
            ? Math.sign(tangent)
            : tangent;
      },
    },
  ],
  [
    'asin',
    {
      usage: 'asin(a)',
      doc: 'the angle of a sine',
      least: 1,
      most: 1,
      kindOf: toNumber('number', 'angle'),
      run: (args) => Math.asin(args[0] ?? NaN) / RADIANS,
    },
  ],
  [
    'acos',
    {
      usage: 'acos(a)',
      doc: 'the angle of a cosine',
      least: 1,
      most: 1,
      kindOf: toNumber('number', 'angle'),
      run: (args) => Math.acos(args[0] ?? NaN) / RADIANS,
    },
  ],
  [
    'atan',
    {
      usage: 'atan(a)',
      doc: 'the angle of a tangent',
      least: 1,
      most: 1,
      kindOf: toNumber('number', 'angle'),
      run: (args) => Math.atan(args[0] ?? NaN) / RADIANS,
    },
  ],
  [
    'atan2',
    {
      usage: 'atan2(rise, run)',
      doc: 'the angle of a slope from its rise and run',
      least: 2,
      most: 2,
      kindOf: (args) => {
        const alike = numericAlike(args);
        return typeof alike === 'object' && 'wanted' in alike ? alike : 'angle';
      },
      run: (args) => Math.atan2(args[0] ?? NaN, args[1] ?? NaN) / RADIANS,
    },
  ],
]);

/** Unit constants: the value of one, and its kind. */
export const UNITS: ReadonlyMap<string, { kind: Kind; value: number }> = new Map<
  string,
  { kind: Kind; value: number }
>([
  ['mm', { kind: 'length', value: 1_000_000 }],
  ['cm', { kind: 'length', value: 10_000_000 }],
  ['m', { kind: 'length', value: 1_000_000_000 }],
  ['inch', { kind: 'length', value: 25_400_000 }],
  ['foot', { kind: 'length', value: 304_800_000 }],
  ['deg', { kind: 'angle', value: 1 }],
  ['kg', { kind: 'mass', value: 1 }],
  ['lb', { kind: 'mass', value: 0.45359237 }],
]);
