import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { withdrawProofInvite } from '#server/publishing/withdraw-proof-invite.ts';

/** Closes the draft to somebody who was invited to build from it. */
export const POST = formEndpoint({
  schema: z.object({ inviteId: z.uuid() }),
  back: (context) => paths.officePlan(context.params['planId'] ?? ''),
  run: async ({ actor, input, context }) => {
    await withdrawProofInvite({ actor, inviteId: input.inviteId });
    return {
      to: paths.officePlan(context.params['planId'] ?? ''),
      notice: 'The draft is closed to that person.',
    };
  },
});
