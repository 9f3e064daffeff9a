import type { APIRoute } from 'astro';
import { findPicture } from '#server/catalogue/find-picture.ts';
import { resizePicture } from '#server/catalogue/resize-picture.ts';

/** A picture for those who may see it; `?w=` asks for one of a few widths. Its address is its content, so it never changes. */
export const GET: APIRoute = async ({ params, url, locals }) => {
  const picture = await findPicture(locals.actor, params['sha256'] ?? '');
  if (!picture) return new Response(null, { status: 404, headers: { 'cache-control': 'no-store' } });
  const shown = await resizePicture(picture, url.searchParams.get('w'));
  return new Response(new Uint8Array(shown.bytes), {
    headers: {
      'content-type': shown.contentType,
      'cache-control': picture.isPublic ? 'public, max-age=3600' : 'private, max-age=600',
      'content-security-policy': "default-src 'none'; sandbox",
      'content-disposition': 'inline',
    },
  });
};
