import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { inviteProofBuilder } from '#server/publishing/invite-proof-builder.ts';

/** Invites somebody to build from the draft. */
export const POST = formEndpoint({
  schema: z.object({ email: z.email('Write a whole e-mail address.').max(254).toLowerCase() }),
  back: (context) => paths.officePlan(context.params['planId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const planId = context.params['planId'] ?? '';
    await inviteProofBuilder({ actor, planId, email: input.email, headers: context.request.headers });
    return { to: paths.officePlan(planId), notice: `An invitation is on its way to ${input.email}.` };
  },
});
