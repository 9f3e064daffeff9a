import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { reportProofBuild } from '#server/publishing/proof-build.ts';

/** Reports on a proof build. */
export const POST = formEndpoint({
  schema: z.object({
    verdict: z.enum(['holds', 'mend']),
    body: z.string().trim().min(1, 'Write what you found.').max(8000),
  }),
  back: (context) => paths.proofPlan(context.params['planId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const planId = context.params['planId'] ?? '';
    await reportProofBuild({ actor, planId, ...input });
    return { to: paths.proofPlan(planId), notice: 'The report is with the author. Thank you.' };
  },
});
