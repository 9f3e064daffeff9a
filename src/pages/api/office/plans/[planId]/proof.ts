import * as z from 'zod';
import { jsonEndpoint } from '#server/http/endpoint.ts';
import { readProof, requestProof } from '#server/publishing/prove-revision.ts';

/** How far the range proof of the draft is. */
export const GET = jsonEndpoint(z.object({}), async ({ actor, context }) => ({
  proof: await readProof(actor, context.params['planId'] ?? ''),
}));

/** Asks for a range proof of the draft as it is saved now. */
export const POST = jsonEndpoint(z.object({}), async ({ actor, context }) => ({
  proof: await requestProof(actor, context.params['planId'] ?? ''),
}));
