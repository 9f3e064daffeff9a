import type { Kind } from './types.ts';

/** Kinds that can be added, compared and rounded. */
export type NumericKind = 'length' | 'area' | 'volume' | 'mass' | 'angle' | 'number';

const NUMERIC: ReadonlySet<string> = new Set(['length', 'area', 'volume', 'mass', 'angle', 'number']);

const WORDS: Readonly<Record<Exclude<Kind, object>, [one: string, many: string]>> = {
  length: ['a length', 'lengths'],
  area: ['an area', 'areas'],
  volume: ['a volume', 'volumes'],
  mass: ['a mass', 'masses'],
  angle: ['an angle', 'angles'],
  number: ['a number', 'numbers'],
  text: ['text', 'texts'],
  yesno: ['yes or no', 'yes-or-nos'],
};

/** True for kinds that are numbers with a dimension (or none). */
export function isNumericKind(kind: Kind): kind is NumericKind {
  return typeof kind === 'string' && NUMERIC.has(kind);
}

/** A kind in words: `a length`, `a list of lengths`. */
export function describeKind(kind: Kind | 'any'): string {
  if (typeof kind === 'string') return kind === 'any' ? 'anything' : WORDS[kind][0];
  const inner = kind.list;
  if (inner === 'any') return 'a list';
  return typeof inner === 'string'
    ? `a list of ${WORDS[inner][1]}`
    : `a list of ${describeKind(inner).replace(/^a list/, 'lists')}`;
}

/** True when two kinds are the same; `any` inside a list agrees with everything. */
export function isSameKind(a: Kind | 'any', b: Kind | 'any'): boolean {
  if (a === 'any' || b === 'any') return true;
  if (typeof a === 'string' || typeof b === 'string') return a === b;
  return isSameKind(a.list, b.list);
}

/** Powers of length that a kind stands for, where multiplication can make or undo it. */
const POWERS: ReadonlyMap<Kind, number> = new Map<Kind, number>([
  ['number', 0],
  ['length', 1],
  ['area', 2],
  ['volume', 3],
]);
const BY_POWER: readonly NumericKind[] = ['number', 'length', 'area', 'volume'];

/** The kind of a product, or null where there is none (mass × length, length⁴). */
export function multiplyKinds(a: Kind, b: Kind): NumericKind | null {
  const left = POWERS.get(a);
  const right = POWERS.get(b);
  if (left !== undefined && right !== undefined) return BY_POWER[left + right] ?? null;
  if (a === 'number' && isNumericKind(b)) return b;
  if (b === 'number' && isNumericKind(a)) return a;
  return null;
}

/** The kind of a quotient, or null where there is none (number ÷ length). */
export function divideKinds(a: Kind, b: Kind): NumericKind | null {
  const left = POWERS.get(a);
  const right = POWERS.get(b);
  if (left !== undefined && right !== undefined)
    return left >= right ? (BY_POWER[left - right] ?? null) : null;
  if (isNumericKind(a) && b === 'number') return a;
  if (isNumericKind(a) && a === b) return 'number';
  return null;
}
