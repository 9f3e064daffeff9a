import type { APIRoute } from 'astro';
import { paths } from '#lib/paths.ts';
import { downloadCopy } from '#server/copies/download-copy.ts';
import { toRefusal } from '#server/http/problem.ts';
import { rememberForm } from '#server/http/form-memory.ts';

/** Sends the reader to a link that lives five minutes, made after the licence was checked on this very request. */
export const GET: APIRoute = async ({ params, locals, redirect, cookies, request }) => {
  try {
    const url = await downloadCopy(locals.actor, params['copyId'] ?? '');
    return new Response(null, {
      status: 303,
      headers: { location: url, 'cache-control': 'private, no-store', 'referrer-policy': 'no-referrer' },
    });
  } catch (error) {
    const refusal = toRefusal(error, locals.requestId);
    if (refusal.code === 'SIGN_IN_REQUIRED')
      return redirect(paths.signIn(new URL(request.url).pathname), 303);
    if (refusal.status === 404) return new Response(null, { status: 404 });
    await rememberForm(cookies, { problem: refusal.detail, values: {}, errors: {} });
    return new Response(refusal.detail, {
      status: refusal.status,
      headers: { 'content-type': 'text/plain; charset=utf-8', 'cache-control': 'no-store' },
    });
  }
};
