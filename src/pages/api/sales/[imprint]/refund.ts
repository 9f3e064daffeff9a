import * as z from 'zod';
import { parseAmount } from '#lib/money/format-money.ts';
import { paths } from '#lib/paths.ts';
import { refuse } from '#server/errors.ts';
import { refundOrder } from '#server/checkout/refund-order.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { getSoldOrder } from '#server/sales/get-sold-order.ts';

const schema = z.object({
  orderId: z.uuid(),
  amount: z.string().max(20),
  reason: z.string().max(300).default(''),
  requestKey: z.uuid(),
});

/** Gives money back for an order of the imprint. */
export const POST = formEndpoint({
  schema,
  back: (context, typed) => paths.salesOrder(context.params['imprint'] ?? '', String(typed['orderId'] ?? '')),
  run: async ({ actor, input, context }) => {
    const slug = context.params['imprint'] ?? '';
    const order = await getSoldOrder(actor, slug, input.orderId);
    const amountMinor = parseAmount(input.amount, order.currency);
    if (amountMinor === null) {
      return refuse('BAD_INPUT', { fields: { amount: 'Write the amount like 12.50, with a point.' } });
    }
    await refundOrder({
      actor,
      orderId: input.orderId,
      amountMinor,
      reason: input.reason,
      requestKey: input.requestKey,
    });
    return {
      to: paths.salesOrder(slug, input.orderId),
      notice: 'The money is on its way back, and the buyer was told.',
    };
  },
});
