import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { tokenSchema } from '#server/accounts/account-schemas.ts';
import { verifyEmail } from '#server/accounts/verify-email.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({}),
  back: () => paths.verifyEmail(),
  run: async ({ actor, context }) => {
    const token = tokenSchema.parse(context.url.searchParams.get('token') ?? '');
    await verifyEmail({ token, headers: context.request.headers });
    return {
      to: actor.kind === 'user' ? paths.account() : paths.signIn(),
      notice: 'The address is confirmed. You can sign in with it.',
    };
  },
});
