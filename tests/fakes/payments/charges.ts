import { blankCharge, cardDetails } from './charge-shape.ts';
import type { BalanceTransaction, Charge, PaymentIntent } from './tables.ts';
import type { TestCard } from './test-cards.ts';
import { emit, makeId, now, setOwner, settingsOf, type World } from './world.ts';

/** The fee on a card payment: 2.9 % and 30 minor units, rounded half up. One published tariff for all currencies. */
function feeOf(amount: number): number {
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
function bookCharge(world: World, charge: Charge): Charge {
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
