import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { unpublishPlan } from '#server/publishing/publish-revision.ts';
import { republishPlan } from '#server/staff/keep-house.ts';

/** Takes a plan out of the plan chest, or puts it back. */
export const POST = formEndpoint({
  schema: z.object({ planId: z.uuid(), what: z.enum(['take-out', 'put-back']) }),
  back: () => paths.staff(),
  run: async ({ actor, input }) => {
    if (input.what === 'take-out') await unpublishPlan(actor, input.planId);
    else await republishPlan(actor, input.planId);
    return {
      to: paths.staff(),
      notice: input.what === 'take-out' ? 'The plan is out of the chest.' : 'The plan is back in the chest.',
    };
  },
});
