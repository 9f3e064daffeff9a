import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { setImprintState } from '#server/staff/keep-house.ts';

/** Admits or suspends an imprint. */
export const POST = formEndpoint({
  schema: z.object({ imprintId: z.uuid(), state: z.enum(['active', 'suspended']) }),
  back: () => paths.staff(),
  run: async ({ actor, input }) => {
    await setImprintState(actor, input.imprintId, input.state);
    return {
      to: paths.staff(),
      notice: input.state === 'active' ? 'The imprint is admitted.' : 'The imprint is suspended.',
    };
  },
});
