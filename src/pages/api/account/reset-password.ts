import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { newPasswordSchema, tokenSchema } from '#server/accounts/account-schemas.ts';
import { resetPassword } from '#server/accounts/reset-password.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ password: newPasswordSchema }),
  back: ({ url }) => paths.resetPassword(url.searchParams.get('token') ?? undefined),
  run: async ({ input, context }) => {
    const token = tokenSchema.parse(context.url.searchParams.get('token') ?? '');
    await resetPassword({ ...input, token, headers: context.request.headers });
    return { to: paths.signIn(), notice: 'Your new password is set. Sign in with it.' };
  },
});
