import type Stripe from 'stripe';
import { bookMovement } from './charges.ts';
import { printAmount } from './currencies.ts';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import { choice, expand, metadataOrEmpty, paging, paramsOf, range, text, whole } from './params.ts';
import { route, type Route } from './route.ts';
import type { Charge, Refund } from './tables.ts';
import { emit, makeId, mergeMetadata, now, required, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const refundCreate = paramsOf<Stripe.RefundCreateParams>()({
  amount: whole(1).optional(),
  charge: text().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  payment_intent: text().optional(),
  reason: choice('duplicate', 'fraudulent', 'requested_by_customer').optional(),
});
const refundUpdate = paramsOf<Stripe.RefundUpdateParams>()({ expand: expand(), metadata: metadataOrEmpty() });
const refundList = paramsOf<Stripe.RefundListParams>()({
  ...paging,
  charge: text().optional(),
  created: range(),
  payment_intent: text().optional(),
});

function chargeToRefund(
  world: World,
  params: { charge?: string | undefined; payment_intent?: string | undefined },
): Charge {
  if (params.charge !== undefined && params.payment_intent !== undefined) {
    refuse('You may only specify one of these parameters: charge, payment_intent.', { param: 'charge' });
  }
  if (params.charge !== undefined) return required(world, 'charge', params.charge, 'charge', 400);
  if (params.payment_intent === undefined) {
    return refuse(
      'One of the following params should be provided for this request: payment_intent or charge.',
      {
        code: 'parameter_missing',
        param: 'payment_intent',
      },
    );
  }
  const intent = required(world, 'payment_intent', params.payment_intent, 'payment_intent', 400);
  const charge =
    intent.status === 'succeeded' && intent.latest_charge
      ? world.store.get('charge', intent.latest_charge)
      : undefined;
  return (
    charge ??
    refuse(`This PaymentIntent (${intent.id}) does not have a successful charge to refund.`, {
      param: 'payment_intent',
    })
  );
}

/** Gives money back. The fee of the payment stays paid, as published. */
function createRefund(
  world: World,
  params: {
    amount?: number | undefined;
    charge?: string | undefined;
    payment_intent?: string | undefined;
    reason?: Refund['reason'] | undefined;
    metadata?: '' | Record<string, string> | undefined;
  },
): Refund {
  const charge = chargeToRefund(world, params);
  if (charge.status !== 'succeeded') refuse(`Charge ${charge.id} was not paid.`, { param: 'charge' });
  if (charge.disputed)
    refuse(`Charge ${charge.id} has been charged back; cannot issue a refund.`, { code: 'charge_disputed' });
  const left = charge.amount - charge.amount_refunded;
  if (left === 0)
    refuse(`Charge ${charge.id} has already been refunded.`, { code: 'charge_already_refunded' });
  const amount = params.amount ?? left;
  if (amount > left) {
    refuse(
      `Refund amount (${printAmount(amount, charge.currency)}) is greater than unrefunded amount on charge (${printAmount(left, charge.currency)})`,
      { param: 'amount' },
    );
  }
  const id = makeId('re');
  const movement = bookMovement(world, {
    amount: -amount,
    currency: charge.currency,
    type: 'refund',
    category: 'refund',
    source: id,
    description: `REFUND FOR CHARGE${charge.description ? ` (${charge.description})` : ''}`,
  });
  const refund = world.store.put('refund', id, {
    id,
    object: 'refund',
    amount,
    balance_transaction: movement.id,
    charge: charge.id,
    created: now(world),
    currency: charge.currency,
    customer: charge.customer,
    customer_account: null,
    destination_details: { card: { type: 'refund' }, type: 'card' },
    metadata: mergeMetadata({}, params.metadata),
    payment_intent: charge.payment_intent,
    payment_method: charge.payment_method,
    reason: params.reason ?? null,
    receipt_number: null,
    source_transfer_reversal: null,
    status: 'succeeded',
    transfer_reversal: null,
  });
  const refunded = charge.amount_refunded + amount;
  const changed = world.store.put('charge', charge.id, {
    ...charge,
    amount_refunded: refunded,
    refunded: refunded === charge.amount,
  });
  emit(world, 'refund.created', refund);
  emit(world, 'charge.refunded', changed);
  return refund;
}

export const refundRoutes: Route[] = [
  route('POST', '/v1/refunds', refundCreate, createRefund),
  route('GET', '/v1/refunds', refundList, (world, params) =>
    pageOf(
      world.store
        .all('refund')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.charge === undefined || row.charge === params.charge) &&
            (params.payment_intent === undefined || row.payment_intent === params.payment_intent),
        ),
      params,
      '/v1/refunds',
    ),
  ),
  route('GET', '/v1/refunds/:id', none, (world, _, id) => required(world, 'refund', id)),
  route('POST', '/v1/refunds/:id', refundUpdate, (world, { metadata }, id) => {
    const old = required(world, 'refund', id);
    const refund = world.store.put('refund', id, { ...old, metadata: mergeMetadata(old.metadata, metadata) });
    emit(world, 'refund.updated', refund);
    return refund;
  }),
];
