import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { emailSchema, typedPasswordSchema } from '#server/accounts/account-schemas.ts';
import { safeNext } from '#server/accounts/safe-next.ts';
import { signIn } from '#server/accounts/sign-in.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { redirectWithCookies } from '#server/http/redirect-with-cookies.ts';

export const POST = formEndpoint({
  schema: z.object({ email: emailSchema, password: typedPasswordSchema }),
  back: ({ url }) => paths.signIn(safeNext(url.searchParams.get('next') ?? paths.drawer())),
  run: async ({ input, context }) => {
    const { cookies } = await signIn({ ...input, headers: context.request.headers });
    return redirectWithCookies(safeNext(context.url.searchParams.get('next') ?? paths.drawer()), cookies);
  },
});
