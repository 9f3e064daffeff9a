import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { safeNext } from '#server/accounts/safe-next.ts';
import { signOut } from '#server/accounts/sign-out.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { redirectWithCookies } from '#server/http/redirect-with-cookies.ts';

export const POST = formEndpoint({
  schema: z.object({}),
  back: () => paths.account(),
  run: async ({ context }) => {
    const { cookies } = await signOut(context.request.headers);
    return redirectWithCookies(safeNext(context.url.searchParams.get('next')), cookies);
  },
});
