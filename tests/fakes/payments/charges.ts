import type Stripe from 'stripe';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import { currency, email, expand, metadataOrEmpty, paging, paramsOf, range, text } from './params.ts';
import { route, type Route } from './route.ts';
import type { BalanceTransaction, Charge, PaymentIntent } from './tables.ts';
import type { TestCard } from './test-cards.ts';
import {
  emit,
  makeId,
  mergeMetadata,
  now,
  ownerOf,
  required,
  setOwner,
  settingsOf,
  type World,
} from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });

/** The fee on a card payment: 2.9 % and 30 minor units, rounded half up. One published tariff for all currencies. */
export function feeOf(amount: number): number {
  return Math.round((amount * 29) / 1000) + 30;
}

interface Movement {
  amount: number;
  currency: string;
  type: BalanceTransaction['type'];
  category: string;
  source: string | null;
  description?: string | null;
  fee?: number;
  feeText?: string;
  account?: string | null;
}

/** Books a movement of money; what is booked can be used at once, where the published service lets days pass. */
export function bookMovement(world: World, movement: Movement): BalanceTransaction {
  const {
    amount,
    currency: code,
    type,
    category,
    source,
    description = null,
    fee = 0,
    feeText = 'Payment processing fees',
    account = null,
  } = movement;
  const id = makeId('txn');
  setOwner(world, id, account);
  return world.store.put('balance_transaction', id, {
    id,
    object: 'balance_transaction',
    amount,
    available_on: now(world),
    balance_type: 'payments',
    created: now(world),
    currency: code,
    description,
    exchange_rate: null,
    fee,
    fee_details:
      fee === 0
        ? []
        : [{ amount: fee, application: null, currency: code, description: feeText, type: 'stripe_fee' }],
    net: amount - fee,
    reporting_category: category,
    source,
    status: 'available',
    type,
  });
}

export interface Payer {
  email: string | null;
  name: string | null;
  country: string | null;
}

/** A paid charge of which nothing but its amount is known; the ground on which the others are made. */
export function blankCharge(world: World, id: string, amount: number, code: string): Charge {
  return {
    id,
    object: 'charge',
    amount,
    amount_captured: amount,
    amount_refunded: 0,
    application: null,
    application_fee: null,
    application_fee_amount: null,
    balance_transaction: null,
    billing_details: {
      address: { city: null, country: null, line1: null, line2: null, postal_code: null, state: null },
      email: null,
      name: null,
      phone: null,
      tax_id: null,
    },
    calculated_statement_descriptor: 'BENCHLEAF',
    captured: true,
    created: now(world),
    currency: code,
    customer: null,
    description: null,
    disputed: false,
    failure_balance_transaction: null,
    failure_code: null,
    failure_message: null,
    fraud_details: {},
    livemode: false,
    metadata: {},
    on_behalf_of: null,
    outcome: null,
    paid: true,
    payment_intent: null,
    payment_method: null,
    payment_method_details: null,
    receipt_email: null,
    receipt_number: null,
    receipt_url: null,
    refunded: false,
    review: null,
    shipping: null,
    source: null,
    source_transfer: null,
    statement_descriptor: null,
    statement_descriptor_suffix: null,
    status: 'succeeded',
    transfer_data: null,
    transfer_group: null,
  };
}

/** Charges a payment intent's card. A declined one leaves a failed charge and no movement of money. */
export function makeCharge(
  world: World,
  intent: PaymentIntent,
  card: TestCard,
  payer: Payer,
  isAuthenticated: boolean,
): Charge {
  const id = makeId('ch');
  const isPaid = card.outcome !== 'declined';
  const blank = blankCharge(world, id, intent.amount, intent.currency);
  const charge: Charge = {
    ...blank,
    amount_captured: isPaid ? intent.amount : 0,
    billing_details: {
      ...blank.billing_details,
      address: {
        city: null,
        country: payer.country,
        line1: null,
        line2: null,
        postal_code: null,
        state: null,
      },
      email: payer.email,
      name: payer.name,
    },
    captured: isPaid,
    customer: intent.customer,
    description: intent.description,
    failure_code: card.decline?.code ?? null,
    failure_message: card.decline?.message ?? null,
    metadata: intent.metadata,
    outcome: {
      advice_code: null,
      network_advice_code: null,
      network_decline_code: null,
      network_status: isPaid ? 'approved_by_network' : 'declined_by_network',
      reason: card.decline?.declineCode ?? null,
      risk_level: 'normal',
      seller_message: isPaid
        ? 'Payment complete.'
        : 'The bank did not return any further details with this decline.',
      type: isPaid ? 'authorized' : 'issuer_declined',
    },
    paid: isPaid,
    payment_intent: intent.id,
    payment_method: intent.payment_method,
    payment_method_details: {
      card: cardDetails(card, intent.amount, payer.country, isAuthenticated),
      type: 'card',
    },
    receipt_email: intent.receipt_email,
    receipt_url: isPaid ? `${world.publicUrl}/receipts/${id}` : null,
    statement_descriptor: intent.statement_descriptor,
    status: isPaid ? 'succeeded' : 'failed',
    transfer_group: intent.transfer_group,
  };
  world.store.put('charge', id, charge);
  return isPaid && settingsOf(world).balanceDelayMs === 0 ? bookCharge(world, charge) : charge;
}

/** Gives a paid charge its balance transaction. */
export function bookCharge(world: World, charge: Charge): Charge {
  const movement = bookMovement(world, {
    amount: charge.amount,
    currency: charge.currency,
    type: 'charge',
    category: 'charge',
    source: charge.id,
    description: charge.description,
    fee: feeOf(charge.amount),
  });
  return world.store.put('charge', charge.id, { ...charge, balance_transaction: movement.id });
}

/** Books the charges whose wait is over; the change is told by charge.updated. */
export function bookWaitingCharges(world: World): void {
  const { balanceDelayMs } = settingsOf(world);
  for (const charge of world.store.all('charge')) {
    if (charge.status !== 'succeeded' || charge.balance_transaction !== null) continue;
    if ((now(world) - charge.created) * 1000 < balanceDelayMs) continue;
    emit(world, 'charge.updated', bookCharge(world, charge));
  }
}

function cardDetails(
  card: TestCard,
  amount: number,
  country: string | null,
  isAuthenticated: boolean,
): Stripe.Charge.PaymentMethodDetails.Card {
  return {
    amount_authorized: amount,
    authorization_code: null,
    brand: card.brand,
    checks: { address_line1_check: null, address_postal_code_check: null, cvc_check: 'pass' },
    country: country ?? 'US',
    electronic_commerce_indicator: null,
    exp_month: 12,
    exp_year: 2034,
    extended_authorization: { status: 'disabled' },
    fingerprint: `standin${card.number.slice(-8)}`,
    funding: 'credit',
    incremental_authorization: { status: 'unavailable' },
    installments: null,
    last4: card.number.slice(-4),
    mandate: null,
    multicapture: { status: 'unavailable' },
    network: card.brand,
    network_token: { used: false },
    network_transaction_id: null,
    overcapture: { maximum_amount_capturable: amount, status: 'unavailable' },
    regulated_status: 'unregulated',
    three_d_secure: isAuthenticated
      ? {
          authentication_flow: 'challenge',
          electronic_commerce_indicator: '05',
          exemption_indicator: null,
          result: 'authenticated',
          result_reason: null,
          transaction_id: null,
          version: '2.2.0',
        }
      : null,
    transaction_link_id: null,
    wallet: null,
  };
}

const chargeList = paramsOf<Stripe.ChargeListParams>()({
  ...paging,
  created: range(),
  customer: text().optional(),
  payment_intent: text().optional(),
  transfer_group: text().optional(),
});
const chargeUpdate = paramsOf<Stripe.ChargeUpdateParams>()({
  description: text().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  receipt_email: email().optional(),
  transfer_group: text().optional(),
});
const movementList = paramsOf<Stripe.BalanceTransactionListParams>()({
  ...paging,
  created: range(),
  currency: currency().optional(),
  payout: text().optional(),
  source: text().optional(),
  type: text().optional(),
});

export const chargeRoutes: Route[] = [
  route('GET', '/v1/charges', chargeList, (world, params) =>
    pageOf(
      world.store
        .all('charge')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            ownerOf(world, row.id) === world.account &&
            (params.customer === undefined || row.customer === params.customer) &&
            (params.payment_intent === undefined || row.payment_intent === params.payment_intent) &&
            (params.transfer_group === undefined || row.transfer_group === params.transfer_group),
        ),
      params,
      '/v1/charges',
    ),
  ),
  route('GET', '/v1/charges/:id', none, (world, _, id) => required(world, 'charge', id)),
  route('POST', '/v1/charges/:id', chargeUpdate, (world, { expand: _, metadata, ...rest }, id) => {
    const old = required(world, 'charge', id);
    if (
      rest.transfer_group !== undefined &&
      old.transfer_group !== null &&
      old.transfer_group !== rest.transfer_group
    ) {
      refuse('The transfer_group of a charge can only be set once.', { param: 'transfer_group' });
    }
    const charge = world.store.put('charge', id, {
      ...old,
      ...rest,
      metadata: mergeMetadata(old.metadata, metadata),
    });
    emit(world, 'charge.updated', charge);
    return charge;
  }),
  route('GET', '/v1/balance_transactions', movementList, (world, params) =>
    pageOf(
      world.store
        .all('balance_transaction')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            ownerOf(world, row.id) === world.account &&
            (params.currency === undefined || row.currency === params.currency) &&
            (params.source === undefined || row.source === params.source) &&
            (params.payout === undefined || row.source === params.payout) &&
            (params.type === undefined || row.type === params.type),
        ),
      params,
      '/v1/balance_transactions',
    ),
  ),
  route('GET', '/v1/balance_transactions/:id', none, (world, _, id) =>
    required(world, 'balance_transaction', id),
  ),
];
