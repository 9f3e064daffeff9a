import type Stripe from 'stripe';
import * as z from 'zod';
import { bookMovement } from './charges.ts';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import { expand, flag, metadataOrEmpty, paging, paramsOf, range, text } from './params.ts';
import { route, type Route } from './route.ts';
import type { BalanceTransaction, Charge, Dispute } from './tables.ts';
import { emit, makeId, mergeMetadata, now, required, type World } from './world.ts';

/** The fee for a dispute, in minor units. */
const DISPUTE_FEE = 1500;
const WEEK = 7 * 24 * 3600;

const NO_EVIDENCE: Stripe.Dispute.Evidence = {
  access_activity_log: null,
  billing_address: null,
  cancellation_policy: null,
  cancellation_policy_disclosure: null,
  cancellation_rebuttal: null,
  customer_communication: null,
  customer_email_address: null,
  customer_name: null,
  customer_purchase_ip: null,
  customer_signature: null,
  duplicate_charge_documentation: null,
  duplicate_charge_explanation: null,
  duplicate_charge_id: null,
  enhanced_evidence: {},
  product_description: null,
  receipt: null,
  refund_policy: null,
  refund_policy_disclosure: null,
  refund_refusal_explanation: null,
  service_date: null,
  service_documentation: null,
  shipping_address: null,
  shipping_carrier: null,
  shipping_date: null,
  shipping_documentation: null,
  shipping_tracking_number: null,
  uncategorized_file: null,
  uncategorized_text: null,
};

/** A movement as it stands inside a dispute, where the published type holds whole objects. */
function inDispute(movement: BalanceTransaction): Stripe.BalanceTransaction {
  return { ...movement };
}

/** The buyer's bank takes the money back until the dispute is decided. */
export function disputeCharge(world: World, charge: Charge): Dispute {
  const id = makeId('du');
  world.store.put('charge', charge.id, { ...charge, disputed: true });
  const movement = bookMovement(world, {
    amount: -charge.amount,
    currency: charge.currency,
    type: 'adjustment',
    category: 'dispute',
    source: id,
    description: `Chargeback withdrawal for ${charge.id}`,
    fee: DISPUTE_FEE,
    feeText: 'Dispute fee',
  });
  const dispute = world.store.put('dispute', id, {
    id,
    object: 'dispute',
    amount: charge.amount,
    balance_transactions: [inDispute(movement)],
    charge: charge.id,
    created: now(world),
    currency: charge.currency,
    enhanced_eligibility_types: [],
    evidence: NO_EVIDENCE,
    evidence_details: {
      due_by: now(world) + WEEK,
      enhanced_eligibility: {},
      has_evidence: false,
      past_due: false,
      submission_count: 0,
      submission_method: 'not_submitted',
    },
    intended_submission_method: null,
    is_charge_refundable: false,
    livemode: false,
    metadata: {},
    payment_intent: charge.payment_intent,
    payment_method_details: {
      card: { brand: 'visa', case_type: 'chargeback', network: 'visa', network_reason_code: '10.4' },
      type: 'card',
    },
    reason: 'fraudulent',
    status: 'needs_response',
  });
  emit(world, 'charge.dispute.created', dispute);
  emit(world, 'charge.dispute.funds_withdrawn', dispute);
  return dispute;
}

/** Decides a dispute: won gives the money back, lost leaves it with the buyer. */
export function closeDispute(world: World, dispute: Dispute, outcome: 'won' | 'lost'): Dispute {
  if (dispute.status === 'won' || dispute.status === 'lost')
    refuse('This dispute is already closed.', { param: 'dispute' });
  const back =
    outcome === 'won'
      ? [
          inDispute(
            bookMovement(world, {
              amount: dispute.amount,
              currency: dispute.currency,
              type: 'adjustment',
              category: 'dispute_reversal',
              source: dispute.id,
              description: `Chargeback reversal for ${dispute.charge}`,
              fee: -DISPUTE_FEE,
              feeText: 'Dispute fee refund',
            }),
          ),
        ]
      : [];
  const closed = world.store.put('dispute', dispute.id, {
    ...dispute,
    status: outcome,
    balance_transactions: [...dispute.balance_transactions, ...back],
  });
  emit(world, 'charge.dispute.closed', closed);
  if (outcome === 'won') emit(world, 'charge.dispute.funds_reinstated', closed);
  return closed;
}

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const disputeList = paramsOf<Stripe.DisputeListParams>()({
  ...paging,
  charge: text().optional(),
  created: range(),
  payment_intent: text().optional(),
});
const disputeUpdate = paramsOf<Stripe.DisputeUpdateParams>()({
  evidence: z
    .strictObject({
      uncategorized_text: text(20_000).optional(),
      product_description: text(20_000).optional(),
    })
    .optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  submit: flag().optional(),
});

export const disputeRoutes: Route[] = [
  route('GET', '/v1/disputes', disputeList, (world, params) =>
    pageOf(
      world.store
        .all('dispute')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.charge === undefined || row.charge === params.charge) &&
            (params.payment_intent === undefined || row.payment_intent === params.payment_intent),
        ),
      params,
      '/v1/disputes',
    ),
  ),
  route('GET', '/v1/disputes/:id', none, (world, _, id) => required(world, 'dispute', id)),
  route('POST', '/v1/disputes/:id', disputeUpdate, (world, { evidence, metadata, submit = true }, id) => {
    const old = required(world, 'dispute', id);
    const isSubmitted = evidence !== undefined && submit;
    const dispute = world.store.put('dispute', id, {
      ...old,
      evidence: { ...old.evidence, ...evidence },
      evidence_details: {
        ...old.evidence_details,
        has_evidence: old.evidence_details.has_evidence || evidence !== undefined,
        submission_count: old.evidence_details.submission_count + (isSubmitted ? 1 : 0),
      },
      metadata: mergeMetadata(old.metadata, metadata),
      status: isSubmitted ? 'under_review' : old.status,
    });
    emit(world, 'charge.dispute.updated', dispute);
    return dispute;
  }),
  route('POST', '/v1/disputes/:id/close', none, (world, _, id) =>
    closeDispute(world, required(world, 'dispute', id), 'lost'),
  ),
];
