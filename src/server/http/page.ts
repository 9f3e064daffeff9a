import type { AstroGlobal } from 'astro';
import { paths } from '#lib/paths.ts';
import { AppError } from '../errors.ts';

/**
 * Runs what a page needs. A refusal becomes the page that says so: sign-in with the way back, 404, or 403;
 * anything unexpected goes on to the 500 page.
 */
export async function loadPage<Result>(
  astro: AstroGlobal,
  load: () => Promise<Result>,
): Promise<{ ok: true; data: Result } | { ok: false; response: Response }> {
  try {
    return { ok: true, data: await load() };
  } catch (error) {
    if (!(error instanceof AppError)) throw error;
    if (error.code === 'SIGN_IN_REQUIRED') {
      return {
        ok: false,
        response: astro.redirect(paths.signIn(astro.url.pathname + astro.url.search), 303),
      };
    }
    if (error.status === 404) return { ok: false, response: await astro.rewrite('/404') };
    if (error.status === 403) return { ok: false, response: await astro.rewrite('/403') };
    throw error;
  }
}
