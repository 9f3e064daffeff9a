import type { AstroCookies } from 'astro';
import type { UnitSystem } from '#lib/plan/types.ts';
import type { Actor } from './actor.ts';

/** Remembers the units that a browser chose; no secret, and readable by the page. */
const UNITS_COOKIE = 'benchleaf_units';

/** The units that a link to this page asks for, if it does. */
export function readAskedUnits(url: URL): UnitSystem | undefined {
  const asked = url.searchParams.get('units');
  return asked === 'mm' || asked === 'in' ? asked : undefined;
}

/** Keeps the units for this browser's next pages: for a year, readable by the page. */
export function rememberUnits(cookies: AstroCookies, units: UnitSystem): void {
  cookies.set(UNITS_COOKIE, units, { path: '/', sameSite: 'lax', maxAge: 365 * 86_400 });
}

/**
 * The units to show: what this browser chose last, else what the account says, else what its language suggests
 * (American English reads inches, everybody else millimetres).
 */
export function readUnits(actor: Actor, cookies: AstroCookies, headers: Headers): UnitSystem {
  const chosen = cookies.get(UNITS_COOKIE)?.value;
  if (chosen === 'mm' || chosen === 'in') return chosen;
  if (actor.kind === 'user') return actor.units;
  const first = headers.get('accept-language')?.split(',')[0]?.split(';')[0]?.trim().toLowerCase();
  return first === 'en-us' ? 'in' : 'mm';
}
