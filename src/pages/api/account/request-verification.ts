import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { emailSchema } from '#server/accounts/account-schemas.ts';
import { requestVerification } from '#server/accounts/request-verification.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ email: emailSchema }),
  back: () => paths.verifyEmail(),
  run: async ({ input, context }) => {
    await requestVerification({ ...input, headers: context.request.headers });
    return {
      to: paths.verifyEmail(),
      notice: `If an account waits for ${input.email} to be confirmed, the link is on its way.`,
    };
  },
});
