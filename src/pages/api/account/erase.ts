import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { typedPasswordSchema } from '#server/accounts/account-schemas.ts';
import { eraseAccount } from '#server/accounts/erase-account.ts';
import { requireUser } from '#server/accounts/may.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({
    erasePassword: typedPasswordSchema,
    isSure: z.literal('yes', 'Tick the box: it cannot be taken back.'),
  }),
  back: () => paths.account(),
  run: async ({ actor, input, context }) => {
    await eraseAccount({
      actor: requireUser(actor),
      currentPassword: input.erasePassword,
      headers: context.request.headers,
    });
    return { to: paths.signIn(), notice: 'Your account is erased.' };
  },
});
