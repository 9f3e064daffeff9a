import * as z from 'zod';

/** A month as it stands in an address, e.g. `2026-11`. */
export const monthSchema = z.string().regex(/^20\d{2}-(0[1-9]|1[0-2])$/, 'A month is written like 2026-11.');

/** The first instant of a month and of the month after, in UTC. */
export function monthBounds(month: string): { from: Date; until: Date } {
  const [year, number] = monthSchema.parse(month).split('-').map(Number) as [number, number];
  return { from: new Date(Date.UTC(year, number - 1, 1)), until: new Date(Date.UTC(year, number, 1)) };
}
