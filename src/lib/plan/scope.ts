import { FUNCTIONS, UNITS } from './functions.ts';
import type { ChoiceOption, Kind } from './types.ts';

export type Member = 'thickness' | 'width' | 'length' | 'qty';
export const MATERIAL_MEMBERS: readonly Member[] = ['thickness', 'width', 'length'];
export const PART_MEMBERS: readonly Member[] = ['length', 'width', 'thickness', 'qty'];

/** What a name stands for. A null kind belongs to a declaration that is itself in error: its uses are not reported again. */
export type Meaning =
  | { type: 'size'; kind: Kind | null }
  | { type: 'choice'; kind: Kind | null; options: readonly ChoiceOption[] }
  | { type: 'let'; kind: Kind | null }
  | { type: 'material'; members: ReadonlySet<Member> }
  | { type: 'part' };

/** All names that a plan declares. A Map, so that `constructor` and `__proto__` are names like any other. */
export type Scope = Map<string, Meaning>;

const WORDS_OF_THE_LANGUAGE = [
  'true false null undefined NaN Infinity this new typeof void delete in of instanceof if else for while do switch case',
  'break continue return function class const let var import export default await async yield try catch finally throw',
  'with super enum debugger eval arguments globalThis constructor prototype toString valueOf hasOwnProperty',
  'isPrototypeOf propertyIsEnumerable toLocaleString',
].flatMap((line) => line.split(' '));

const RESERVED_NAMES: ReadonlySet<string> = new Set([...FUNCTIONS.keys(), ...WORDS_OF_THE_LANGUAGE]);

/**
 * True for names that a declaration may not take: functions, words that mean something to a parser, and units. Only a choice
 * may be called like a unit, and only when its options are texts (a choice of `foot`): no formula can mistake the two.
 */
export function isReservedName(name: string, component: string | null | undefined): boolean {
  return RESERVED_NAMES.has(name) || (UNITS.has(name) && component !== 'Choice');
}

/** True for a name that a formula can use: a letter, then letters, digits or underscores, 40 at most. */
export function isName(text: string): boolean {
  return /^[A-Za-z][A-Za-z0-9_]{0,39}$/.test(text);
}

/** True for a mark: one or two letters, then at most three digits. */
export function isMark(text: string): boolean {
  return /^[A-Za-z]{1,2}[0-9]{0,3}$/.test(text);
}
