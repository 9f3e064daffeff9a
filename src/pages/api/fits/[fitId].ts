import * as z from 'zod';
import { jsonEndpoint } from '#server/http/endpoint.ts';
import { removeFit } from '#server/licences/save-fit.ts';

/** Removes one of the reader's own fits. */
export const DELETE = jsonEndpoint(z.object({}), ({ actor, context }) =>
  removeFit(actor, context.params['fitId'] ?? ''),
);
