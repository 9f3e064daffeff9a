import * as z from 'zod';
import { fitForVisitor, getPublicRevision } from '#server/catalogue/get-plan-page.ts';
import { takeToken } from '#server/accounts/rate-limit.ts';
import { jsonEndpoint } from '#server/http/endpoint.ts';

/** What a visitor may know of a plan at the sizes sent. */
export const POST = jsonEndpoint(
  z.object({ fit: z.unknown(), units: z.enum(['mm', 'in']) }),
  async ({ actor, input, context }) => {
    await takeToken(`fit:${context.clientAddress}`, { limit: 240, seconds: 60 });
    const revisionId = await getPublicRevision(actor, context.params['slug'] ?? '');
    return fitForVisitor(revisionId, input.fit ?? null, input.units);
  },
);
