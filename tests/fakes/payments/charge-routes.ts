import type Stripe from 'stripe';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import { currency, email, expand, metadataOrEmpty, paging, paramsOf, range, text } from './params.ts';
import { route, type Route } from './route.ts';
import { emit, mergeMetadata, ownerOf, required } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
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
