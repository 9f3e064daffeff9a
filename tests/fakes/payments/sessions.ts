import type Stripe from 'stripe';
import { createSession } from './create-session.ts';
import { refuse } from './errors.ts';
import { isWithin, pageOf, slice } from './list.ts';
import { expand, paging, paramsOf } from './params.ts';
import { route, type Route } from './route.ts';
import { sessionCreate, sessionList, sessionUpdate } from './session-params.ts';
import { expireSession } from './session-state.ts';
import { mergeMetadata, required } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });

export const sessionRoutes: Route[] = [
  route('POST', '/v1/checkout/sessions', sessionCreate, createSession),
  route('GET', '/v1/checkout/sessions', sessionList, (world, params) =>
    pageOf(
      world.store
        .all('checkout.session')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.customer === undefined || row.customer === params.customer) &&
            (params.customer_details === undefined ||
              row.customer_details?.email === params.customer_details.email) &&
            (params.payment_intent === undefined || row.payment_intent === params.payment_intent) &&
            (params.status === undefined || row.status === params.status),
        ),
      params,
      '/v1/checkout/sessions',
    ),
  ),
  route('GET', '/v1/checkout/sessions/:id', none, (world, _, id) => required(world, 'checkout.session', id)),
  route('POST', '/v1/checkout/sessions/:id', sessionUpdate, (world, { metadata }, id) => {
    const session = required(world, 'checkout.session', id);
    return world.store.put('checkout.session', id, {
      ...session,
      metadata: mergeMetadata(session.metadata, metadata),
    });
  }),
  route('POST', '/v1/checkout/sessions/:id/expire', none, (world, _, id) => {
    const session = required(world, 'checkout.session', id);
    if (session.status !== 'open') {
      refuse(
        `Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of ${session.status}.`,
      );
    }
    return expireSession(world, session);
  }),
  route(
    'GET',
    '/v1/checkout/sessions/:id/line_items',
    paramsOf<Stripe.Checkout.SessionListLineItemsParams>()(paging),
    (world, params, id) => {
      required(world, 'checkout.session', id);
      return slice(
        world.store.get('session_file', id)?.lines ?? [],
        params,
        `/v1/checkout/sessions/${id}/line_items`,
      );
    },
  ),
];
