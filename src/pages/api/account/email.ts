import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { emailSchema, typedPasswordSchema } from '#server/accounts/account-schemas.ts';
import { changeEmail } from '#server/accounts/change-email.ts';
import { requireUser } from '#server/accounts/may.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ newEmail: emailSchema, emailPassword: typedPasswordSchema }),
  back: () => paths.account(),
  run: async ({ actor, input, context }) => {
    await changeEmail({
      actor: requireUser(actor),
      newEmail: input.newEmail,
      currentPassword: input.emailPassword,
      headers: context.request.headers,
    });
    return {
      to: paths.account(),
      notice: `We have sent a link to ${input.newEmail}. Your account moves when you open it; until then nothing changes.`,
    };
  },
});
