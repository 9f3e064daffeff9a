import { randomUUID } from 'node:crypto';
import { defineMiddleware } from 'astro:middleware';
import { findActor, VISITOR } from '#server/accounts/actor.ts';
import { readAskedUnits, readUnits, rememberUnits } from '#server/accounts/units-preference.ts';

/** A request id that the front made; anything else is not believed. */
const REQUEST_ID = /^[A-Za-z0-9-]{8,64}$/;

/**
 * Settles who is asking and in which units, for every page and endpoint made on demand.
 * What they may do is decided where the thing is known, never here and never by path.
 */
export const onRequest = defineMiddleware(async ({ isPrerendered, locals, request, cookies, url }, next) => {
  const stated = request.headers.get('x-benchleaf-request') ?? '';
  locals.requestId = REQUEST_ID.test(stated) ? stated : randomUUID();
  // A page made at build time has no reader, and its request no headers.
  locals.actor = isPrerendered ? VISITOR : await findActor(request.headers);
  // The title block switches units by a link to the same page, which the browser then keeps to.
  const asked = isPrerendered ? undefined : readAskedUnits(url);
  locals.units = asked ?? (isPrerendered ? 'mm' : readUnits(locals.actor, cookies, request.headers));
  if (asked) rememberUnits(cookies, asked);

  const response = await next();
  if (isPrerendered) return response;
  response.headers.set('x-request-id', locals.requestId);
  if (locals.actor.kind === 'user') {
    // A signed-in person's page is kept by nobody, not even by the browser's history.
    response.headers.set('cache-control', 'private, no-store');
  } else if (!response.headers.has('cache-control')) {
    // The same address shows another page to somebody else, and other units.
    response.headers.set('cache-control', 'private, no-cache');
  }
  if (!response.headers.get('vary')?.includes('cookie'))
    response.headers.append('vary', 'cookie, accept-language');
  return response;
});
