import type Stripe from 'stripe';
import type { Charge } from './tables.ts';
import type { TestCard } from './test-cards.ts';
import { now, type World } from './world.ts';

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

/** What a charge tells of the card that was used. */
export function cardDetails(
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
