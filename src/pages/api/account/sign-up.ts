import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { emailSchema, nameSchema, newPasswordSchema } from '#server/accounts/account-schemas.ts';
import { safeNext } from '#server/accounts/safe-next.ts';
import { signUp } from '#server/accounts/sign-up.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ name: nameSchema, email: emailSchema, password: newPasswordSchema }),
  back: ({ url }) => paths.signUp(safeNext(url.searchParams.get('next') ?? paths.drawer())),
  run: async ({ input, context }) => {
    await signUp({ ...input, headers: context.request.headers });
    return {
      to: paths.signIn(safeNext(context.url.searchParams.get('next') ?? paths.drawer())),
      notice: `We have sent a link to ${input.email}. Open it to confirm the address, then sign in here.`,
    };
  },
});
