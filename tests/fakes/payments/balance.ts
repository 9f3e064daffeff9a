import type Stripe from 'stripe';
import { expand, paramsOf } from './params.ts';
import { route, type Route } from './route.ts';
import { ownerOf, type World } from './world.ts';

/** What can be sent on from a book, in minor units; `account` null for the platform's own. */
export function availableOf(world: World, currency: string, account: string | null): number {
  return world.store
    .all('balance_transaction')
    .filter((row) => row.currency === currency && ownerOf(world, row.id) === account)
    .reduce((sum, row) => sum + row.net, 0);
}

export const balanceRoutes: Route[] = [
  route(
    'GET',
    '/v1/balance',
    paramsOf<Stripe.BalanceRetrieveParams>()({ expand: expand() }),
    (world): Stripe.Balance => {
      const own = world.store
        .all('balance_transaction')
        .filter((row) => ownerOf(world, row.id) === world.account);
      const currencies = [...new Set(own.map((row) => row.currency))].sort();
      if (currencies.length === 0) currencies.push('usd');
      return {
        object: 'balance',
        available: currencies.map((currency) => {
          const amount = availableOf(world, currency, world.account);
          return { amount, currency, source_types: { card: amount } };
        }),
        connect_reserved: currencies.map((currency) => ({ amount: 0, currency })),
        livemode: false,
        pending: currencies.map((currency) => ({ amount: 0, currency, source_types: { card: 0 } })),
      };
    },
  ),
];
