import { InboxEvent } from '#db/models/index.ts';
import { log } from '../log.ts';
import { payments } from '../payments/client.ts';
import { settlePaymentAccount } from '../sales/settle-payment-account.ts';
import type { WebhookEvent } from './webhook-events.ts';
import { settleFee } from './settle-fee.ts';
import { settleOrder } from './settle-order.ts';
import { settleRefunds } from './settle-refunds.ts';

async function settleCharge(chargeId: string): Promise<void> {
  const charge = await payments.charges.retrieve(chargeId);
  const intent =
    typeof charge.payment_intent === 'string' ? charge.payment_intent : charge.payment_intent?.id;
  if (intent) await settleRefunds(intent);
}

async function settleRefund(refundId: string): Promise<void> {
  const refund = await payments.refunds.retrieve(refundId);
  const intent =
    typeof refund.payment_intent === 'string' ? refund.payment_intent : refund.payment_intent?.id;
  if (intent) await settleRefunds(intent);
}

async function settleDispute(disputeId: string): Promise<void> {
  const dispute = await payments.disputes.retrieve(disputeId);
  log.warn({ disputeId, status: dispute.status }, 'a payment is disputed');
  const intent =
    typeof dispute.payment_intent === 'string' ? dispute.payment_intent : dispute.payment_intent?.id;
  if (intent) await settleRefunds(intent);
}

/** What each kind of event makes us ask the payment service about. Others are kept in the inbox and need nothing. */
const WORK: Record<WebhookEvent, (objectId: string) => Promise<unknown>> = {
  'checkout.session.completed': settleOrder,
  'checkout.session.async_payment_succeeded': settleOrder,
  'checkout.session.async_payment_failed': settleOrder,
  'checkout.session.expired': settleOrder,
  'charge.updated': settleFee,
  'charge.refunded': settleCharge,
  'refund.created': settleRefund,
  'refund.updated': settleRefund,
  'charge.dispute.created': settleDispute,
  'charge.dispute.closed': settleDispute,
  'account.updated': settlePaymentAccount,
};

const isOurs = (type: string): type is WebhookEvent => Object.hasOwn(WORK, type);

/**
 * Works off one stored event. Whatever the order and number of events, the outcome is what the payment service says at the end.
 * @throws when the payment service or the database fails, so that the job is tried again
 */
export async function workInboxEvent(eventId: string): Promise<void> {
  const event = await InboxEvent.findByPk(eventId);
  if (!event || event.processedAt) return;
  try {
    if (isOurs(event.type)) await WORK[event.type](event.objectId);
  } catch (error) {
    await event.update({
      attempts: event.attempts + 1,
      error: error instanceof Error ? error.message.slice(0, 500) : 'unknown',
    });
    throw error;
  }
  await event.update({ processedAt: new Date(), attempts: event.attempts + 1, error: null });
}
