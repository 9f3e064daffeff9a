import type Stripe from 'stripe';
import * as z from 'zod';
import { PaymentsError, refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import {
  choice,
  currency,
  email,
  expand,
  flag,
  metadata,
  metadataOrEmpty,
  paging,
  paramsOf,
  range,
  text,
  url,
  whole,
} from './params.ts';
import { cancelIntent, confirmIntent, createIntent } from './payment-intents.ts';
import { route, type Route } from './route.ts';
import type { PaymentIntent } from './tables.ts';
import { findCard } from './test-cards.ts';
import { mergeMetadata, required, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const intentCreate = paramsOf<Stripe.PaymentIntentCreateParams>()({
  amount: whole(1),
  currency: currency(),
  automatic_payment_methods: z
    .strictObject({ enabled: flag(), allow_redirects: choice('always', 'never').optional() })
    .optional(),
  capture_method: choice('automatic', 'automatic_async').optional(),
  confirm: flag().optional(),
  customer: text().optional(),
  description: text(1000).optional(),
  expand: expand(),
  metadata: metadata(),
  payment_method: text().optional(),
  receipt_email: email().optional(),
  return_url: url().optional(),
  statement_descriptor: text(22).optional(),
  transfer_group: text().optional(),
});
const intentUpdate = paramsOf<Stripe.PaymentIntentUpdateParams>()({
  description: text(1000).optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
});
const intentConfirm = paramsOf<Stripe.PaymentIntentConfirmParams>()({
  expand: expand(),
  payment_method: text().optional(),
  return_url: url().optional(),
});
const intentCancel = paramsOf<Stripe.PaymentIntentCancelParams>()({
  cancellation_reason: choice('abandoned', 'duplicate', 'fraudulent', 'requested_by_customer').optional(),
  expand: expand(),
});
const intentList = paramsOf<Stripe.PaymentIntentListParams>()({
  ...paging,
  created: range(),
  customer: text().optional(),
});

function confirmByToken(world: World, intent: PaymentIntent, token: string | undefined): PaymentIntent {
  if (token === undefined) {
    return refuse(`You cannot confirm this PaymentIntent because it's missing a payment method.`, {
      code: 'payment_intent_unexpected_state',
      param: 'payment_method',
    });
  }
  const card =
    findCard(token) ??
    refuse(`No such PaymentMethod: '${token}'`, { code: 'resource_missing', param: 'payment_method' });
  if (intent.status !== 'requires_payment_method') {
    refuse(`You cannot confirm this PaymentIntent because it has a status of ${intent.status}.`, {
      code: 'payment_intent_unexpected_state',
    });
  }
  const outcome = confirmIntent(world, intent, card, {
    email: intent.receipt_email,
    name: null,
    country: null,
  });
  if (outcome.state === 'declined') {
    const error = outcome.intent.last_payment_error;
    throw new PaymentsError(402, {
      type: 'card_error',
      message: outcome.message,
      code: error?.code ?? 'card_declined',
      decline_code: error?.decline_code,
      charge: outcome.intent.latest_charge ?? undefined,
    });
  }
  return outcome.intent;
}

export const intentRoutes: Route[] = [
  route('POST', '/v1/payment_intents', intentCreate, (world, params) => {
    if (params.customer !== undefined) required(world, 'customer', params.customer, 'customer', 400);
    const intent = createIntent(world, {
      ...params,
      metadata: mergeMetadata({}, params.metadata),
      receiptEmail: params.receipt_email,
      statementDescriptor: params.statement_descriptor,
      transferGroup: params.transfer_group,
      captureMethod: params.capture_method,
    });
    return params.confirm ? confirmByToken(world, intent, params.payment_method) : intent;
  }),
  route('GET', '/v1/payment_intents', intentList, (world, params) =>
    pageOf(
      world.store
        .all('payment_intent')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.customer === undefined || row.customer === params.customer),
        ),
      params,
      '/v1/payment_intents',
    ),
  ),
  route('GET', '/v1/payment_intents/:id', none, (world, _, id) =>
    required(world, 'payment_intent', id, 'intent'),
  ),
  route('POST', '/v1/payment_intents/:id', intentUpdate, (world, { description, metadata: change }, id) => {
    const old = required(world, 'payment_intent', id, 'intent');
    return world.store.put('payment_intent', id, {
      ...old,
      description: description ?? old.description,
      metadata: mergeMetadata(old.metadata, change),
    });
  }),
  route('POST', '/v1/payment_intents/:id/confirm', intentConfirm, (world, params, id) =>
    confirmByToken(world, required(world, 'payment_intent', id, 'intent'), params.payment_method),
  ),
  route('POST', '/v1/payment_intents/:id/cancel', intentCancel, (world, params, id) => {
    const intent = required(world, 'payment_intent', id, 'intent');
    if (intent.status === 'succeeded' || intent.status === 'canceled') {
      refuse(`You cannot cancel this PaymentIntent because it has a status of ${intent.status}.`, {
        code: 'payment_intent_unexpected_state',
      });
    }
    return cancelIntent(world, intent, params.cancellation_reason ?? null);
  }),
];
