import { Order, OrderLine, Plan } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { log } from '../log.ts';
import { payments } from '../payments/client.ts';
import { settleRefunds } from './settle-refunds.ts';

export interface RefundRequest {
  actor: Actor;
  orderId: string;
  /** Minor units; left out for all that is still paid. */
  amountMinor?: number;
  reason: string;
  /** Made once for each time the form is shown, so that a double click gives money back once. */
  requestKey: string;
}

/**
 * Gives money back through the payment service and records it. The imprint's owner may do so for its own sales, staff for all.
 * @throws NOT_FOUND, FORBIDDEN, BAD_INPUT for more than is left, PAYMENT_UNAVAILABLE
 */
export async function refundOrder(request: RefundRequest): Promise<void> {
  const order = await Order.findByPk(request.orderId, {
    include: [{ model: OrderLine, as: 'lines', include: [{ model: Plan, as: 'plan' }] }],
  });
  const imprintIds = [...new Set((order?.lines ?? []).map((line) => line.plan?.imprintId ?? ''))];
  if (!order) return refuse('NOT_FOUND');
  requireMay(request.actor, 'order:refund', { imprintIds });
  if (!order.paymentIntentId) return refuse('BAD_INPUT', { detail: 'Nothing was paid for this order.' });
  const left = order.totalMinor - order.refundedMinor;
  const amount = request.amountMinor ?? left;
  if (amount <= 0 || amount > left) {
    refuse('BAD_INPUT', {
      detail: 'That is more than is left of this order.',
      fields: { amount: 'More than is left of this order.' },
    });
  }
  try {
    await payments.refunds.create(
      {
        payment_intent: order.paymentIntentId,
        amount,
        reason: 'requested_by_customer',
        metadata: { order_id: order.id, reason: request.reason.slice(0, 400) },
      },
      { idempotencyKey: `refund-${order.id}-${request.requestKey}` },
    );
  } catch (cause) {
    log.warn({ orderId: order.id, err: cause }, 'refund was not taken');
    refuse('PAYMENT_UNAVAILABLE', {
      detail: 'The payment service did not take the refund. Nothing was given back; try again.',
      cause,
    });
  }
  await writeAudit({
    actor: request.actor,
    action: 'order:refund',
    thing: { kind: 'order', id: order.id },
    details: { amount },
  });
  await settleRefunds(order.paymentIntentId);
}
