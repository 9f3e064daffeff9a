import type Stripe from 'stripe';
import type * as z from 'zod';
import { availableOf } from './balance.ts';
import { blankCharge } from './charge-shape.ts';
import { bookMovement } from './charges.ts';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import {
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
import type { Transfer, TransferReversal } from './tables.ts';
import { emit, makeId, mergeMetadata, now, required, setOwner, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const transferCreate = paramsOf<Stripe.TransferCreateParams>()({
  amount: whole(1).optional(),
  currency: currency(),
  description: text().optional(),
  destination: text(),
  expand: expand(),
  metadata: metadata(),
  source_transaction: text().optional(),
  transfer_group: text().optional(),
});
const transferUpdate = paramsOf<Stripe.TransferUpdateParams>()({
  description: text().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
});
const transferList = paramsOf<Stripe.TransferListParams>()({
  ...paging,
  created: range(),
  destination: text().optional(),
  transfer_group: text().optional(),
});
const reversalCreate = paramsOf<Stripe.TransferCreateReversalParams>()({
  amount: whole(1).optional(),
  description: text().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
});

/** The payment that a transfer looks like in the book of the account that gets it. */
function receivePayment(
  world: World,
  transfer: { id: string; amount: number; currency: string; group: string | null },
  account: string,
): string {
  const id = makeId('py');
  setOwner(world, id, account);
  const movement = bookMovement(world, {
    amount: transfer.amount,
    currency: transfer.currency,
    type: 'payment',
    category: 'charge',
    source: id,
    account,
  });
  world.store.put('charge', id, {
    ...blankCharge(world, id, transfer.amount, transfer.currency),
    balance_transaction: movement.id,
    source_transfer: transfer.id,
    transfer_group: transfer.group,
  });
  return id;
}

function createTransfer(world: World, params: z.output<typeof transferCreate>): Transfer {
  const account = required(world, 'account', params.destination, 'destination', 400);
  if (account.capabilities?.transfers !== 'active') {
    refuse(
      'Your destination account needs to have at least one of the following capabilities enabled: transfers, crypto_transfers, legacy_payments',
      { code: 'insufficient_capabilities_for_transfer', param: 'destination' },
    );
  }
  const source =
    params.source_transaction === undefined
      ? null
      : required(world, 'charge', params.source_transaction, 'source_transaction', 400);
  if (source && source.currency !== params.currency) {
    refuse(
      `The currency of source_transaction's balance transaction (${source.currency}) must be the same as the transfer currency (${params.currency})`,
      { param: 'currency' },
    );
  }
  const amount = params.amount ?? source?.amount;
  if (amount === undefined)
    return refuse('Missing required param: amount.', { code: 'parameter_missing', param: 'amount' });
  if (source && amount > source.amount) {
    refuse('The transfer amount is greater than the amount of the source_transaction.', { param: 'amount' });
  }
  if (!source && amount > availableOf(world, params.currency, null)) {
    refuse(
      'You have insufficient available funds in your account. In the stand-in, take a payment first or call /_control/top-up.',
      { code: 'balance_insufficient' },
    );
  }
  const id = makeId('tr');
  const group = params.transfer_group ?? source?.transfer_group ?? null;
  const movement = bookMovement(world, {
    amount: -amount,
    currency: params.currency,
    type: 'transfer',
    category: 'transfer',
    source: id,
  });
  const transfer = world.store.put('transfer', id, {
    id,
    object: 'transfer',
    amount,
    amount_reversed: 0,
    balance_transaction: movement.id,
    created: now(world),
    currency: params.currency,
    description: params.description ?? null,
    destination: account.id,
    destination_payment: receivePayment(world, { id, amount, currency: params.currency, group }, account.id),
    livemode: false,
    metadata: mergeMetadata({}, params.metadata),
    reversals: { object: 'list', data: [], has_more: false, url: `/v1/transfers/${id}/reversals` },
    reversed: false,
    source_transaction: source?.id ?? null,
    source_type: 'card',
    transfer_group: group,
  });
  emit(world, 'transfer.created', transfer);
  return transfer;
}

function reverseTransfer(
  world: World,
  params: z.output<typeof reversalCreate>,
  id: string,
): TransferReversal {
  const transfer = required(world, 'transfer', id);
  const left = transfer.amount - transfer.amount_reversed;
  const amount = params.amount ?? left;
  if (left === 0) refuse('This transfer has already been fully reversed.', { param: 'id' });
  if (amount > left)
    refuse(`Reversal amount (${amount}) is greater than unreversed amount on transfer (${left})`, {
      param: 'amount',
    });
  const account = transfer.destination ?? '';
  if (amount > availableOf(world, transfer.currency, account)) {
    refuse('Insufficient funds in the connected account to reverse this transfer.', {
      code: 'balance_insufficient',
    });
  }
  const reversalId = makeId('trr');
  bookMovement(world, {
    amount: -amount,
    currency: transfer.currency,
    type: 'payment_refund',
    category: 'refund',
    source: transfer.destination_payment ?? null,
    account,
  });
  const movement = bookMovement(world, {
    amount,
    currency: transfer.currency,
    type: 'transfer_refund',
    category: 'transfer_reversal',
    source: reversalId,
  });
  const reversal = world.store.put('transfer_reversal', reversalId, {
    id: reversalId,
    object: 'transfer_reversal',
    amount,
    balance_transaction: movement.id,
    created: now(world),
    currency: transfer.currency,
    destination_payment_refund: null,
    metadata: mergeMetadata({}, params.metadata),
    source_refund: null,
    transfer: id,
  });
  const reversed = transfer.amount_reversed + amount;
  const changed = world.store.put('transfer', id, {
    ...transfer,
    amount_reversed: reversed,
    reversed: reversed === transfer.amount,
    reversals: { ...transfer.reversals, data: [{ ...reversal }, ...transfer.reversals.data] },
  });
  emit(world, 'transfer.reversed', changed);
  return reversal;
}

export const transferRoutes: Route[] = [
  route('POST', '/v1/transfers', transferCreate, createTransfer),
  route('GET', '/v1/transfers', transferList, (world, params) =>
    pageOf(
      world.store
        .all('transfer')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.destination === undefined || row.destination === params.destination) &&
            (params.transfer_group === undefined || row.transfer_group === params.transfer_group),
        ),
      params,
      '/v1/transfers',
    ),
  ),
  route('GET', '/v1/transfers/:id', none, (world, _, id) => required(world, 'transfer', id)),
  route('POST', '/v1/transfers/:id', transferUpdate, (world, { description, metadata: change }, id) => {
    const old = required(world, 'transfer', id);
    const transfer = world.store.put('transfer', id, {
      ...old,
      description: description ?? old.description,
      metadata: mergeMetadata(old.metadata, change),
    });
    emit(world, 'transfer.updated', transfer);
    return transfer;
  }),
  route('POST', '/v1/transfers/:id/reversals', reversalCreate, reverseTransfer),
  route(
    'GET',
    '/v1/transfers/:id/reversals',
    paramsOf<Stripe.TransferListReversalsParams>()(paging),
    (world, params, id) => {
      required(world, 'transfer', id);
      return pageOf(
        world.store.all('transfer_reversal').filter((row) => row.transfer === id),
        params,
        `/v1/transfers/${id}/reversals`,
      );
    },
  ),
];
