import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { refundOrder } from '#server/checkout/refund-order.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

/** Gives back all that is still paid of an order. */
export const POST = formEndpoint({
  schema: z.object({ orderId: z.uuid(), requestKey: z.uuid() }),
  back: () => paths.staff(),
  run: async ({ actor, input }) => {
    await refundOrder({ actor, orderId: input.orderId, reason: 'by staff', requestKey: input.requestKey });
    return { to: paths.staff(), notice: 'The money is on its way back, and the buyer was told.' };
  },
});
