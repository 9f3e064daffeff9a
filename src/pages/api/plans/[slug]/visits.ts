import * as z from 'zod';
import { readClientAddress } from '#server/accounts/client-address.ts';
import { takeToken } from '#server/accounts/rate-limit.ts';
import { jsonEndpoint } from '#server/http/endpoint.ts';
import { countVisit } from '#server/sales/manage-sources.ts';

/** Counts a visit of a plan's page. */
export const POST = jsonEndpoint(
  z.object({ from: z.string().max(40).default('') }),
  async ({ input, context }) => {
    await takeToken(`visit:${readClientAddress(context.request.headers)}`, { limit: 60, seconds: 60 });
    await countVisit(context.params['slug'] ?? '', input.from || null);
  },
);
