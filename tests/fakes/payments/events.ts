import type Stripe from 'stripe';
import * as z from 'zod';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import { emptyable, expand, flag, metadataOrEmpty, paging, paramsOf, range, text, url } from './params.ts';
import { route, type Route } from './route.ts';
import type { EventRecord } from './tables.ts';
import { API_VERSION, makeId, mergeMetadata, now, required, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const eventList = paramsOf<Stripe.EventListParams>()({
  ...paging,
  created: range(),
  delivery_success: flag().optional(),
  type: text().optional(),
  types: z.array(text()).max(20).optional(),
});

/** Whether a pattern such as `*` or `charge.*` or a plain type covers a type. */
export function covers(pattern: string, type: string): boolean {
  return (
    pattern === '*' || pattern === type || (pattern.endsWith('.*') && type.startsWith(pattern.slice(0, -1)))
  );
}

/** An event as it is sent: with the number of endpoints that have not taken it yet. */
export function withPending(world: World, event: EventRecord): EventRecord {
  const pending = world.store
    .all('delivery')
    .filter(
      (delivery) =>
        delivery.event === event.id && (delivery.state === 'pending' || delivery.state === 'held'),
    );
  return { ...event, pending_webhooks: pending.length };
}

// Any kind of event may be asked for: the list of kinds in the SDK is open, and so is this.
const kinds = () =>
  z
    .array(
      z.custom<Stripe.WebhookEndpointCreateParams.EnabledEvent>(
        (value) => typeof value === 'string' && /^(?:\*|[a-z_0-9.]+)$/.test(value),
      ),
    )
    .min(1);
const endpointCreate = paramsOf<Stripe.WebhookEndpointCreateParams>()({
  connect: flag().optional(),
  description: emptyable(text(5000)).optional(),
  enabled_events: kinds(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  url: url(),
});
const endpointUpdate = paramsOf<Stripe.WebhookEndpointUpdateParams>()({
  description: emptyable(text(5000)).optional(),
  disabled: flag().optional(),
  enabled_events: kinds().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  url: url().optional(),
});

interface EndpointGiven {
  url: string;
  enabledEvents: string[];
  isConnect?: boolean;
  secret?: string;
  description?: string | null;
  metadata?: Record<string, string>;
}

/** Makes a webhook endpoint; the secret is shown only in this answer, as published. */
export function createEndpoint(world: World, given: EndpointGiven): Stripe.WebhookEndpoint {
  const id = makeId('we');
  const secret = given.secret ?? makeId('whsec', 32);
  world.store.put('endpoint_file', id, { secret, isConnect: given.isConnect ?? false });
  const endpoint = world.store.put('webhook_endpoint', id, {
    id,
    object: 'webhook_endpoint',
    api_version: API_VERSION,
    application: null,
    created: now(world),
    description: given.description ?? null,
    enabled_events: given.enabledEvents,
    livemode: false,
    metadata: given.metadata ?? {},
    status: 'enabled',
    url: given.url,
  });
  return { ...endpoint, secret };
}

export const eventRoutes: Route[] = [
  route('GET', '/v1/events', eventList, (world, params) => {
    if (params.type !== undefined && params.types !== undefined) {
      refuse('You may only specify one of these parameters: type, types.', { param: 'type' });
    }
    const patterns = params.types ?? (params.type === undefined ? ['*'] : [params.type]);
    const rows = world.store
      .all('event')
      .filter((row) => (row.account ?? null) === world.account)
      .filter(
        (row) =>
          isWithin(row.created, params.created) && patterns.some((pattern) => covers(pattern, row.type)),
      )
      .map((row) => withPending(world, row))
      .filter(
        (row) =>
          params.delivery_success === undefined || params.delivery_success === (row.pending_webhooks === 0),
      );
    return pageOf(rows, params, '/v1/events');
  }),
  route('GET', '/v1/events/:id', none, (world, _, id) => withPending(world, required(world, 'event', id))),
  route('POST', '/v1/webhook_endpoints', endpointCreate, (world, params) =>
    createEndpoint(world, {
      url: params.url,
      enabledEvents: params.enabled_events,
      isConnect: params.connect ?? false,
      description: params.description || null,
      metadata: mergeMetadata({}, params.metadata),
    }),
  ),
  route(
    'GET',
    '/v1/webhook_endpoints',
    paramsOf<Stripe.WebhookEndpointListParams>()(paging),
    (world, params) => pageOf(world.store.all('webhook_endpoint'), params, '/v1/webhook_endpoints'),
  ),
  route('GET', '/v1/webhook_endpoints/:id', none, (world, _, id) => required(world, 'webhook_endpoint', id)),
  route('POST', '/v1/webhook_endpoints/:id', endpointUpdate, (world, params, id) => {
    const old = required(world, 'webhook_endpoint', id);
    return world.store.put('webhook_endpoint', id, {
      ...old,
      description: params.description === undefined ? old.description : params.description || null,
      enabled_events: params.enabled_events ?? old.enabled_events,
      metadata: mergeMetadata(old.metadata, params.metadata),
      status: params.disabled === undefined ? old.status : params.disabled ? 'disabled' : 'enabled',
      url: params.url ?? old.url,
    });
  }),
  route('DELETE', '/v1/webhook_endpoints/:id', none, (world, _, id) => {
    required(world, 'webhook_endpoint', id);
    world.store.remove('webhook_endpoint', id);
    world.store.remove('endpoint_file', id);
    return { id, object: 'webhook_endpoint', deleted: true };
  }),
];
