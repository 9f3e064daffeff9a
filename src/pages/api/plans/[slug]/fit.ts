import * as z from 'zod';
import { fitForVisitor, getPublicRevision } from '#server/catalogue/get-plan-page.ts';
import { readClientAddress } from '#server/accounts/client-address.ts';
import { takeToken } from '#server/accounts/rate-limit.ts';
import { jsonEndpoint } from '#server/http/endpoint.ts';

/** What a visitor may know of a plan at the sizes sent. */
export const POST = jsonEndpoint(z.object({ fit: z.unknown() }), async ({ actor, input, context }) => {
  await takeToken(`fit:${readClientAddress(context.request.headers)}`, { limit: 240, seconds: 60 });
  const revisionId = await getPublicRevision(actor, context.params['slug'] ?? '');
  return fitForVisitor(revisionId, input.fit);
});
