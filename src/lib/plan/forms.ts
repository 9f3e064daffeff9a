import { roundDownTo, roundTo, roundUpTo } from './functions.ts';

/**
 * A number that is not known but bounded: `mid + Σ slopes·x ± rest`, where each x runs from −1 to 1 over one dimension of the
 * box, together with a plain interval. Affine arithmetic (Comba and Stolfi 1993) keeps what two values have in common, so that
 * `width − 2·t − (width − 3·t)` is as narrow as it truly is; the interval takes over where a formula is not affine.
 * Yes-or-no is 0 to 1, a text is its number.
 */
export interface Form {
  mid: number;
  slopes: Float64Array;
  rest: number;
  low: number;
  high: number;
  /** True when every value in it is a whole number. */
  isWhole: boolean;
}

/** Rounding errors of doubles, generously: what each operation may add to the bounds. */
const NOISE = 1e-12;

/** A value that may be anything, not finite included. */
export function unbounded(size: number): Form {
  return {
    mid: 0,
    slopes: new Float64Array(size),
    rest: Infinity,
    low: -Infinity,
    high: Infinity,
    isWhole: false,
  };
}

/** Exactly one value. */
export function exactly(value: number, size: number): Form {
  if (!Number.isFinite(value)) return unbounded(size);
  return {
    mid: value,
    slopes: new Float64Array(size),
    rest: 0,
    low: value,
    high: value,
    isWhole: Number.isInteger(value),
  };
}

/** Any value from `low` to `high`, with nothing known in common with others. */
export function range(low: number, high: number, size: number, isWhole = false): Form {
  if (!Number.isFinite(low) || !Number.isFinite(high)) return unbounded(size);
  const mid = low / 2 + high / 2;
  return {
    mid,
    slopes: new Float64Array(size),
    rest: (high - low) / 2 + NOISE * Math.abs(mid),
    low,
    high,
    isWhole,
  };
}

/** The values of one dimension of the box. */
export function variable(low: number, high: number, dimension: number, size: number, isWhole: boolean): Form {
  const form = exactly(low / 2 + high / 2, size);
  form.slopes[dimension] = (high - low) / 2;
  form.low = low;
  form.high = high;
  form.isWhole = isWhole;
  return form;
}

export function isBounded(form: Form): boolean {
  return Number.isFinite(form.low) && Number.isFinite(form.high);
}

function isExact(form: Form): boolean {
  return form.low === form.high;
}

function reach(form: Form): number {
  let sum = form.rest;
  for (const slope of form.slopes) sum += Math.abs(slope);
  return sum;
}

/** Draws the interval in to what the affine part allows; both hold, so their overlap does. */
function tighten(form: Form): Form {
  if (!Number.isFinite(form.mid) || !Number.isFinite(form.rest)) return unbounded(form.slopes.length);
  const span = reach(form);
  const pad = NOISE * (Math.abs(form.mid) + span);
  form.low = Math.max(form.low, form.mid - span - pad);
  form.high = Math.min(form.high, form.mid + span + pad);
  return form;
}

export function add(a: Form, b: Form, sign: 1 | -1 = 1): Form {
  if (!isBounded(a) || !isBounded(b)) return unbounded(a.slopes.length);
  const mid = a.mid + sign * b.mid;
  const rest = a.rest + b.rest + NOISE * (Math.abs(a.mid) + Math.abs(b.mid));
  const slopes = a.slopes.map((slope, index) => slope + sign * (b.slopes[index] ?? 0));
  const [low, high] = sign === 1 ? [a.low + b.low, a.high + b.high] : [a.low - b.high, a.high - b.low];
  return tighten({
    mid,
    slopes,
    rest: isExact(a) && isExact(b) ? 0 : rest,
    low,
    high,
    isWhole: a.isWhole && b.isWhole,
  });
}

function scale(form: Form, factor: number): Form {
  if (!isBounded(form) || !Number.isFinite(factor)) return unbounded(form.slopes.length);
  const [low, high] =
    factor < 0 ? [form.high * factor, form.low * factor] : [form.low * factor, form.high * factor];
  return {
    mid: form.mid * factor,
    slopes: form.slopes.map((slope) => slope * factor),
    rest: form.rest * Math.abs(factor),
    low,
    high,
    isWhole: form.isWhole && Number.isInteger(factor),
  };
}

export function negate(form: Form): Form {
  return scale(form, -1);
}

export function multiply(a: Form, b: Form): Form {
  if (isExact(a)) return scale(b, a.low);
  if (isExact(b)) return scale(a, b.low);
  if (!isBounded(a) || !isBounded(b)) return unbounded(a.slopes.length);
  const products = [a.low * b.low, a.low * b.high, a.high * b.low, a.high * b.high];
  return tighten({
    mid: a.mid * b.mid,
    slopes: a.slopes.map((slope, index) => slope * b.mid + (b.slopes[index] ?? 0) * a.mid),
    rest: a.rest * Math.abs(b.mid) + b.rest * Math.abs(a.mid) + reach(a) * reach(b),
    low: Math.min(...products),
    high: Math.max(...products),
    isWhole: a.isWhole && b.isWhole,
  });
}

export function divide(a: Form, b: Form): Form {
  if (!isBounded(a) || !isBounded(b) || (b.low <= 0 && b.high >= 0)) return unbounded(a.slopes.length);
  if (isExact(b)) {
    const quotient = scale(a, 1 / b.low);
    // 1/b is itself rounded, and a whole number over another is rarely whole.
    quotient.isWhole = false;
    quotient.low = Math.min(a.low / b.low, a.high / b.low);
    quotient.high = Math.max(a.low / b.low, a.high / b.low);
    quotient.rest += NOISE * Math.abs(quotient.mid);
    return quotient;
  }
  const quotients = [a.low / b.low, a.low / b.high, a.high / b.low, a.high / b.high];
  return range(Math.min(...quotients), Math.max(...quotients), a.slopes.length);
}

export function remainder(a: Form, b: Form): Form {
  if (!isBounded(a) || !isBounded(b) || (b.low <= 0 && b.high >= 0)) return unbounded(a.slopes.length);
  const most = Math.max(Math.abs(b.low), Math.abs(b.high));
  // Closer to zero than the divisor, on the dividend's side, and never beyond the dividend.
  return range(
    a.low < 0 ? Math.max(a.low, -most) : 0,
    a.high > 0 ? Math.min(a.high, most) : 0,
    a.slopes.length,
    a.isWhole && b.isWhole,
  );
}

/** The smallest form around two: for branches of which either may be taken. */
export function hull(a: Form, b: Form): Form {
  if (a === b) return a;
  if (!isBounded(a) || !isBounded(b)) return unbounded(a.slopes.length);
  return range(Math.min(a.low, b.low), Math.max(a.high, b.high), a.slopes.length, a.isWhole && b.isWhole);
}

export function least(forms: readonly Form[]): Form {
  return forms.reduce((a, b) => {
    if (!isBounded(a) || !isBounded(b)) return unbounded(a.slopes.length);
    if (a.high <= b.low) return a;
    if (b.high <= a.low) return b;
    return range(Math.min(a.low, b.low), Math.min(a.high, b.high), a.slopes.length, a.isWhole && b.isWhole);
  });
}

export function greatest(forms: readonly Form[]): Form {
  return negate(least(forms.map(negate)));
}

export function absolute(form: Form): Form {
  if (form.low >= 0) return form;
  if (form.high <= 0) return negate(form);
  return range(0, Math.max(-form.low, form.high), form.slopes.length, form.isWhole);
}

const ROUNDINGS = { down: roundDownTo, up: roundUpTo, near: roundTo } as const;

/** Rounds to multiples of a step: monotone, so the interval's ends round; the affine part gains the step as its rest. */
export function roundForm(form: Form, step: Form, way: keyof typeof ROUNDINGS): Form {
  if (!isBounded(form) || !isBounded(step) || (step.low <= 0 && step.high >= 0))
    return unbounded(form.slopes.length);
  const size = Math.max(Math.abs(step.low), Math.abs(step.high));
  if (!isExact(step)) return range(form.low - size, form.high + size, form.slopes.length);
  const round = ROUNDINGS[way];
  const shift = way === 'down' ? -size / 2 : way === 'up' ? size / 2 : 0;
  return tighten({
    mid: form.mid + shift,
    slopes: form.slopes.slice(),
    rest: form.rest + size / 2,
    low: round(form.low, size),
    high: round(form.high, size),
    isWhole: Number.isInteger(size),
  });
}

/** Through a function that rises everywhere between the bounds. */
export function rising(form: Form, run: (value: number) => number): Form {
  return isBounded(form)
    ? range(run(form.low), run(form.high), form.slopes.length)
    : unbounded(form.slopes.length);
}

export function sineForm(form: Form): Form {
  if (!isBounded(form)) return unbounded(form.slopes.length);
  const { low, high } = form;
  const has = (peak: number): boolean => Math.floor((high - peak) / 360) >= Math.ceil((low - peak) / 360);
  const ends = [Math.sin((low * Math.PI) / 180), Math.sin((high * Math.PI) / 180)];
  return range(
    has(270) ? -1 : Math.min(...ends) - NOISE,
    has(90) ? 1 : Math.max(...ends) + NOISE,
    form.slopes.length,
  );
}

export function tangentForm(form: Form): Form {
  if (!isBounded(form)) return unbounded(form.slopes.length);
  const branch = Math.floor((form.low + 90) / 180);
  const isOneBranch = branch === Math.floor((form.high + 90) / 180) && (form.low + 90) % 180 !== 0;
  return isOneBranch
    ? rising(form, (degrees) => Math.tan((degrees * Math.PI) / 180))
    : unbounded(form.slopes.length);
}

/** Yes, no, or maybe, as a form from 0 to 1. */
export function verdict(isTrue: boolean, isFalse: boolean, size: number): Form {
  return isTrue ? exactly(1, size) : isFalse ? exactly(0, size) : range(0, 1, size, true);
}
