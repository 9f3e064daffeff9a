import type Stripe from 'stripe';
import { makeCharge, type Payer } from './charges.ts';
import { minimumOf, printAmount } from './currencies.ts';
import { disputeCharge } from './disputes.ts';
import { refuse } from './errors.ts';
import type { Charge, PaymentIntent } from './tables.ts';
import type { TestCard } from './test-cards.ts';
import { emit, makeId, now, type World } from './world.ts';

interface IntentGiven {
  amount: number;
  currency: string;
  customer?: string | null | undefined;
  description?: string | null | undefined;
  metadata?: Record<string, string> | undefined;
  receiptEmail?: string | null | undefined;
  statementDescriptor?: string | null | undefined;
  transferGroup?: string | null | undefined;
  captureMethod?: 'automatic' | 'automatic_async' | undefined;
}

/** Makes a payment intent that waits for a card. */
export function createIntent(world: World, given: IntentGiven): PaymentIntent {
  if (given.amount < minimumOf(given.currency)) {
    refuse(`Amount must be at least ${printAmount(minimumOf(given.currency), given.currency)}`, {
      code: 'amount_too_small',
      param: 'amount',
    });
  }
  const id = makeId('pi');
  const intent = world.store.put('payment_intent', id, {
    id,
    object: 'payment_intent',
    allowed_payment_method_types: null,
    amount: given.amount,
    amount_capturable: 0,
    amount_details: { tip: {} },
    amount_received: 0,
    application: null,
    application_fee_amount: null,
    automatic_payment_methods: null,
    canceled_at: null,
    cancellation_reason: null,
    capture_method: given.captureMethod ?? 'automatic_async',
    client_secret: `${id}_secret_${makeId('', 25).slice(1)}`,
    confirmation_method: 'automatic',
    created: now(world),
    currency: given.currency,
    customer: given.customer ?? null,
    customer_account: null,
    description: given.description ?? null,
    excluded_payment_method_types: null,
    last_payment_error: null,
    latest_charge: null,
    livemode: false,
    managed_payments: { enabled: false },
    metadata: given.metadata ?? {},
    next_action: null,
    on_behalf_of: null,
    payment_method: null,
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_method_types: ['card'],
    payment_record: null,
    processing: null,
    receipt_email: given.receiptEmail ?? null,
    review: null,
    setup_future_usage: null,
    shipping: null,
    source: null,
    statement_descriptor: given.statementDescriptor ?? null,
    statement_descriptor_suffix: null,
    status: 'requires_payment_method',
    transfer_data: null,
    transfer_group: given.transferGroup ?? null,
  });
  emit(world, 'payment_intent.created', intent);
  return intent;
}

export type ConfirmOutcome =
  | { state: 'succeeded'; intent: PaymentIntent; charge: Charge }
  | { state: 'declined'; intent: PaymentIntent; message: string }
  | { state: 'authenticate'; intent: PaymentIntent };

function fail(
  world: World,
  intent: PaymentIntent,
  error: Stripe.PaymentIntent.LastPaymentError,
): PaymentIntent {
  const failed = world.store.put('payment_intent', intent.id, {
    ...intent,
    status: 'requires_payment_method',
    next_action: null,
    payment_method: null,
    last_payment_error: error,
  });
  emit(world, 'payment_intent.payment_failed', failed);
  return failed;
}

/** Charges a card for a payment intent; `isAuthenticated` once the buyer has confirmed the payment with the bank. */
export function confirmIntent(
  world: World,
  given: PaymentIntent,
  card: TestCard,
  payer: Payer,
  isAuthenticated = false,
): ConfirmOutcome {
  const intent: PaymentIntent = {
    ...given,
    payment_method: given.payment_method ?? makeId('pm'),
    last_payment_error: null,
    next_action: null,
  };
  if (card.outcome === 'authenticates' && !isAuthenticated) {
    const waiting = world.store.put('payment_intent', intent.id, {
      ...intent,
      status: 'requires_action',
      next_action: {
        type: 'redirect_to_url',
        redirect_to_url: { return_url: null, url: `${world.publicUrl}/authenticate/${intent.id}` },
      },
    });
    emit(world, 'payment_intent.requires_action', waiting);
    return { state: 'authenticate', intent: waiting };
  }
  const charge = makeCharge(world, intent, card, payer, isAuthenticated);
  if (card.decline) {
    emit(world, 'charge.failed', charge);
    const { code, declineCode, message } = card.decline;
    const failed = fail(
      world,
      { ...intent, latest_charge: charge.id },
      {
        charge: charge.id,
        code:
          code === 'card_declined'
            ? 'card_declined'
            : code === 'expired_card'
              ? 'expired_card'
              : 'incorrect_cvc',
        ...(declineCode ? { decline_code: declineCode } : {}),
        doc_url: `https://stripe.com/docs/error-codes/${code.replaceAll('_', '-')}`,
        message,
        type: 'card_error',
      },
    );
    return { state: 'declined', intent: failed, message };
  }
  const paid = world.store.put('payment_intent', intent.id, {
    ...intent,
    status: 'succeeded',
    amount_received: intent.amount,
    latest_charge: charge.id,
  });
  emit(world, 'charge.succeeded', charge);
  emit(world, 'payment_intent.succeeded', paid);
  if (charge.balance_transaction) emit(world, 'charge.updated', charge);
  if (card.outcome === 'disputed') disputeCharge(world, charge);
  return { state: 'succeeded', intent: paid, charge };
}

/** Records that the buyer did not confirm the payment with the bank. */
export function failAuthentication(
  world: World,
  intent: PaymentIntent,
): { intent: PaymentIntent; message: string } {
  const message =
    'We are unable to authenticate your payment method. Please choose a different payment method and try again.';
  const failed = fail(world, intent, {
    code: 'payment_intent_authentication_failure',
    message,
    type: 'invalid_request_error',
  });
  return { intent: failed, message };
}

/** Gives up a payment intent whose session has ended. */
export function cancelIntent(
  world: World,
  intent: PaymentIntent,
  reason: PaymentIntent['cancellation_reason'],
): PaymentIntent {
  const canceled = world.store.put('payment_intent', intent.id, {
    ...intent,
    status: 'canceled',
    canceled_at: now(world),
    cancellation_reason: reason,
    next_action: null,
  });
  emit(world, 'payment_intent.canceled', canceled);
  return canceled;
}
