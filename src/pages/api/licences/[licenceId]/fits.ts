import * as z from 'zod';
import { jsonEndpoint } from '#server/http/endpoint.ts';
import { getLicence } from '#server/licences/get-licence.ts';
import { saveFit } from '#server/licences/save-fit.ts';

/** Keeps a fit for the plan of a licence. */
export const POST = jsonEndpoint(
  z.object({
    fitId: z.uuid().optional(),
    name: z.string().trim().min(1, 'Give the fit a name.').max(120),
    fit: z.unknown(),
  }),
  async ({ actor, input, context }) => {
    const { plan } = await getLicence(actor, context.params['licenceId'] ?? '');
    return saveFit({ actor, planId: plan.id, fitId: input.fitId, name: input.name, fit: input.fit });
  },
);
