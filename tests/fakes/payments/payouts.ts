import type Stripe from 'stripe';
import { availableOf } from './balance.ts';
import { bookMovement } from './charges.ts';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import {
  choice,
  currency,
  expand,
  metadata,
  metadataOrEmpty,
  paging,
  paramsOf,
  range,
  text,
  whole,
} from './params.ts';
import { route, type Route } from './route.ts';
import type { Payout } from './tables.ts';
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

const DAY = 24 * 3600;
const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const payoutCreate = paramsOf<Stripe.PayoutCreateParams>()({
  amount: whole(1),
  currency: currency(),
  description: text().optional(),
  expand: expand(),
  metadata: metadata(),
  method: choice('instant', 'standard').optional(),
  statement_descriptor: text(22).optional(),
});
const payoutUpdate = paramsOf<Stripe.PayoutUpdateParams>()({ expand: expand(), metadata: metadataOrEmpty() });
const payoutList = paramsOf<Stripe.PayoutListParams>()({
  ...paging,
  created: range(),
  status: text().optional(),
});

/** Ends a payout on its way: the bank takes it or sends it back. */
export function settlePayout(world: World, payout: Payout, outcome: 'paid' | 'failed'): Payout {
  const account = ownerOf(world, payout.id);
  if (outcome === 'paid') {
    const paid = world.store.put('payout', payout.id, { ...payout, status: 'paid' });
    emit(world, 'payout.paid', paid, account);
    return paid;
  }
  const back = bookMovement(world, {
    amount: payout.amount,
    currency: payout.currency,
    type: 'payout_failure',
    category: 'payout_reversal',
    source: payout.id,
    account,
  });
  const failed = world.store.put('payout', payout.id, {
    ...payout,
    status: 'failed',
    failure_balance_transaction: back.id,
    failure_code: 'account_closed',
    failure_message: 'The bank account has been closed.',
  });
  emit(world, 'payout.failed', failed, account);
  return failed;
}

/** Ends all payouts on their way, as the settings say. The published service takes days; the stand-in about a second. */
export function settleWaitingPayouts(world: World): void {
  for (const payout of world.store.all('payout')) {
    if (payout.status === 'in_transit' && payout.created < now(world))
      settlePayout(world, payout, settingsOf(world).payoutOutcome);
  }
}

export const payoutRoutes: Route[] = [
  route('POST', '/v1/payouts', payoutCreate, (world, params) => {
    if (world.account && !world.store.get('account', world.account)?.payouts_enabled) {
      refuse('Payouts are not enabled for this account.', { code: 'payouts_not_allowed' });
    }
    if (params.amount > availableOf(world, params.currency, world.account)) {
      refuse('You have insufficient funds in your account for this payout.', {
        code: 'balance_insufficient',
      });
    }
    const id = makeId('po');
    setOwner(world, id, world.account);
    const movement = bookMovement(world, {
      amount: -params.amount,
      currency: params.currency,
      type: 'payout',
      category: 'payout',
      source: id,
      account: world.account,
    });
    const payout = world.store.put('payout', id, {
      id,
      object: 'payout',
      amount: params.amount,
      application_fee: null,
      application_fee_amount: null,
      arrival_date: now(world) + 2 * DAY,
      automatic: false,
      balance_transaction: movement.id,
      created: now(world),
      currency: params.currency,
      description: params.description ?? null,
      destination: makeId('ba'),
      failure_balance_transaction: null,
      failure_code: null,
      failure_message: null,
      livemode: false,
      metadata: mergeMetadata({}, params.metadata),
      method: params.method ?? 'standard',
      original_payout: null,
      payout_method: null,
      reconciliation_status: 'not_applicable',
      reversed_by: null,
      source_type: 'card',
      statement_descriptor: params.statement_descriptor ?? null,
      status: 'in_transit',
      trace_id: null,
      type: 'bank_account',
    });
    emit(world, 'payout.created', payout, world.account);
    return payout;
  }),
  route('GET', '/v1/payouts', payoutList, (world, params) =>
    pageOf(
      world.store
        .all('payout')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            ownerOf(world, row.id) === world.account &&
            (params.status === undefined || row.status === params.status),
        ),
      params,
      '/v1/payouts',
    ),
  ),
  route('GET', '/v1/payouts/:id', none, (world, _, id) => required(world, 'payout', id)),
  route('POST', '/v1/payouts/:id', payoutUpdate, (world, { metadata: change }, id) => {
    const old = required(world, 'payout', id);
    const payout = world.store.put('payout', id, { ...old, metadata: mergeMetadata(old.metadata, change) });
    emit(world, 'payout.updated', payout, ownerOf(world, id));
    return payout;
  }),
];
