import { RELATIVE_SLACK } from './functions.ts';
import type { Kind } from './types.ts';

/** How two values of a kind are told apart: lengths by the nanometre, everything else by a relative slack. */
function slackOf(kind: Kind, a: number, b: number): number {
  return kind === 'length' ? 0.5 : RELATIVE_SLACK * Math.max(1, Math.abs(a), Math.abs(b));
}

/**
 * Compares two numbers as a maker would: lengths that round to the same nanometre are equal, so that three thirds of a
 * width are the width. NaN compares false with everything.
 */
export function compareNumbers(sign: string, kind: Kind, a: number, b: number): boolean {
  const slack = slackOf(kind, a, b);
  switch (sign) {
    case '<':
      return a - b <= -slack;
    case '<=':
      return a - b < slack;
    case '>':
      return a - b >= slack;
    case '>=':
      return a - b > -slack;
    case '===':
      return Math.abs(a - b) < slack;
    case '!==':
      return Math.abs(a - b) >= slack;
    default:
      throw new Error(`No comparison is written ${sign}.`);
  }
}

/** The arithmetic operators on doubles. Division by zero gives a value that is not finite, which is refused where it is kept. */
export function calculate(sign: string, a: number, b: number): number {
  switch (sign) {
    case '+':
      return a + b;
    case '-':
      return a - b;
    case '*':
      return a * b;
    case '/':
      return a / b;
    case '%':
      return a % b;
    default:
      throw new Error(`No operator is written ${sign}.`);
  }
}

export const ARITHMETIC: ReadonlySet<string> = new Set(['+', '-', '*', '/', '%']);
export const ORDERING: ReadonlySet<string> = new Set(['<', '<=', '>', '>=']);
export const EQUALITY: ReadonlySet<string> = new Set(['===', '!==']);
