import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { nameSchema } from '#server/accounts/account-schemas.ts';
import { requireUser } from '#server/accounts/may.ts';
import { rememberUnits } from '#server/accounts/units-preference.ts';
import { updateProfile } from '#server/accounts/update-profile.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

export const POST = formEndpoint({
  schema: z.object({ name: nameSchema, units: z.enum(['mm', 'in'], 'Choose inches or millimetres.') }),
  back: () => paths.account(),
  run: async ({ actor, input, context }) => {
    await updateProfile({ actor: requireUser(actor), ...input });
    rememberUnits(context.cookies, input.units);
    return { to: paths.account(), notice: 'Your name and units are kept.' };
  },
});
