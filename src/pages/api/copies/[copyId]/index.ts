import * as z from 'zod';
import { readCopy } from '#server/copies/download-copy.ts';
import { jsonEndpoint } from '#server/http/endpoint.ts';

/** How far a copy is. */
export const GET = jsonEndpoint(z.object({}), ({ actor, context }) =>
  readCopy(actor, context.params['copyId'] ?? ''),
);
