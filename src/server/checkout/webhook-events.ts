/** The kinds of event that our webhook endpoint asks the payment service for; each has its work in work-inbox-event.ts. */
export const WEBHOOK_EVENTS = [
  'checkout.session.completed',
  'checkout.session.async_payment_succeeded',
  'checkout.session.async_payment_failed',
  'checkout.session.expired',
  'charge.updated',
  'charge.refunded',
  'refund.created',
  'refund.updated',
  'charge.dispute.created',
  'charge.dispute.closed',
  'account.updated',
] as const;

export type WebhookEvent = (typeof WEBHOOK_EVENTS)[number];
