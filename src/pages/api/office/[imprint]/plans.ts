import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { createPlan } from '#server/publishing/create-plan.ts';
import { requireImprint } from '#server/sales/require-imprint.ts';

/** Lays a new plan on the board. */
export const POST = formEndpoint({
  schema: z.object({ title: z.string().trim().min(3, 'Give the plan a title.').max(120) }),
  back: (context) => paths.officeImprint(context.params['imprint'] ?? ''),
  run: async ({ actor, input, context }) => {
    const imprint = await requireImprint(actor, context.params['imprint'] ?? '', 'imprint:read');
    const { planId } = await createPlan({ actor, imprintId: imprint.id, title: input.title });
    return { to: paths.officePlan(planId) };
  },
});
