import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { openPaymentAccount, startPayout } from '#server/sales/pay-out.ts';

/** Opens the imprint's payment account, or starts a payout. */
export const POST = formEndpoint({
  schema: z.discriminatedUnion('what', [
    z.object({ what: z.literal('open') }),
    z.object({ what: z.literal('pay'), currency: z.string().regex(/^[A-Z]{3}$/) }),
  ]),
  back: (context) => paths.salesPayouts(context.params['imprint'] ?? ''),
  run: async ({ actor, input, context }) => {
    const slug = context.params['imprint'] ?? '';
    if (input.what === 'open') return { to: await openPaymentAccount(actor, slug) };
    await startPayout({ actor, slug, currency: input.currency });
    return { to: paths.salesPayouts(slug), notice: 'The payout is under way.' };
  },
});
