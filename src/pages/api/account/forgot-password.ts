import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { emailSchema } from '#server/accounts/account-schemas.ts';
import { requestPasswordReset } from '#server/accounts/request-password-reset.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ email: emailSchema }),
  back: () => paths.forgotPassword(),
  run: async ({ input, context }) => {
    await requestPasswordReset({ ...input, headers: context.request.headers });
    return {
      to: paths.forgotPassword(),
      notice: `If ${input.email} has an account, the link is on its way.`,
    };
  },
});
