import { createHash } from 'node:crypto';
import type { Fit } from '#lib/plan/types.ts';

/** Raised when the way a book is set changes, so that older unstamped books are not used for new copies. */
export const BOOK_FORMAT = 1;

const sorted = (record: Record<string, number | string>) =>
  Object.entries(record).sort(([a], [b]) => (a < b ? -1 : 1));

/**
 * Names an unstamped book by everything that shapes it: the same revision, sizes, measured thicknesses, prices, units and paper
 * give the same key, in whatever order they were written.
 */
export function contentKeyOf(content: { revisionId: string; fit: Fit; paper: 'a4' | 'letter' }): string {
  const { revisionId, fit, paper } = content;
  const text = JSON.stringify([
    BOOK_FORMAT,
    revisionId,
    sorted(fit.values),
    sorted(fit.measured),
    sorted(fit.prices ?? {}),
    fit.units,
    paper,
  ]);
  return createHash('sha256').update(text).digest('hex');
}
