import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { publishRevision } from '#server/publishing/publish-revision.ts';

/** Freezes the draft as the next revision and puts it in the plan chest. */
export const POST = formEndpoint({
  schema: z.object({ version: z.coerce.number().int().min(1), notes: z.string().max(2000).default('') }),
  back: (context) => paths.officePublish(context.params['planId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const planId = context.params['planId'] ?? '';
    const { letter } = await publishRevision({ actor, planId, ...input });
    return { to: paths.officePlan(planId), notice: `Revision ${letter} is in the plan chest.` };
  },
});
