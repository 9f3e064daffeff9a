import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { requireUser } from '#server/accounts/may.ts';
import { revokeOtherSessions, revokeSession } from '#server/accounts/sessions.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ sessionId: z.union([z.literal('others'), z.uuid()]) }),
  back: () => paths.account(),
  run: async ({ actor, input }) => {
    const user = requireUser(actor);
    if (input.sessionId === 'others') await revokeOtherSessions(user);
    else await revokeSession({ actor: user, sessionId: input.sessionId });
    return { to: paths.account(), notice: 'Signed out there.' };
  },
});
