import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { newPasswordSchema, typedPasswordSchema } from '#server/accounts/account-schemas.ts';
import { changePassword } from '#server/accounts/change-password.ts';
import { requireUser } from '#server/accounts/may.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { rememberForm } from '#server/http/form-memory.ts';
import { redirectWithCookies } from '#server/http/redirect-with-cookies.ts';

export const POST = formEndpoint({
  schema: z.object({ currentPassword: typedPasswordSchema, newPassword: newPasswordSchema }),
  back: () => paths.account(),
  run: async ({ actor, input, context }) => {
    const { cookies } = await changePassword({
      actor: requireUser(actor),
      ...input,
      headers: context.request.headers,
    });
    const notice = 'Your password is changed, and every other browser is signed out.';
    await rememberForm(context.cookies, { notice, values: {}, errors: {} });
    return redirectWithCookies(paths.account(), cookies);
  },
});
