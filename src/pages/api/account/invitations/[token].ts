import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { acceptInvitation } from '#server/accounts/accept-invitation.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({}),
  back: ({ params }) => paths.invitation(params['token'] ?? ''),
  run: async ({ actor, context }) => {
    const secret = context.params['token'] ?? '';
    const invitation = await acceptInvitation({ actor, secret, headers: context.request.headers });
    return invitation.kind === 'imprint'
      ? { to: paths.office() }
      : {
          to: paths.proofPlan(invitation.planId),
          notice: `The draft of “${invitation.plan}” is open to you.`,
        };
  },
});
