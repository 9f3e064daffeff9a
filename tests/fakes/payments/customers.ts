import type Stripe from 'stripe';
import { isWithin, pageOf } from './list.ts';
import {
  address,
  email,
  emptyable,
  expand,
  metadataOrEmpty,
  paging,
  paramsOf,
  range,
  text,
} from './params.ts';
import { route, type Route } from './route.ts';
import type { Tables } from './tables.ts';
import { emit, makeId, mergeMetadata, now, required, type World } from './world.ts';

const fields = {
  address: emptyable(address()).optional(),
  description: text().optional(),
  email: email().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  name: text(256).optional(),
  phone: text(20).optional(),
};
const createParams = paramsOf<Stripe.CustomerCreateParams>()(fields);
const updateParams = paramsOf<Stripe.CustomerUpdateParams>()(fields);
const listParams = paramsOf<Stripe.CustomerListParams>()({
  ...paging,
  created: range(),
  email: email().optional(),
});
const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });

/** A full address from its given parts. */
export function fullAddress(
  given: Partial<Record<keyof Stripe.Address, string | undefined>>,
): Stripe.Address {
  const { city = null, country = null, line1 = null, line2 = null, postal_code = null, state = null } = given;
  return { city, country, line1, line2, postal_code, state };
}

/** Makes a customer. */
export function createCustomer(
  world: World,
  given: {
    email?: string | undefined;
    name?: string | undefined;
    phone?: string | undefined;
    description?: string | undefined;
    address?: Stripe.Address | null;
    metadata?: Record<string, string>;
  },
): Tables['customer'] {
  const id = makeId('cus', 14);
  const customer = world.store.put('customer', id, {
    id,
    object: 'customer',
    address: given.address ?? null,
    balance: 0,
    created: now(world),
    currency: null,
    default_source: null,
    delinquent: false,
    description: given.description ?? null,
    discount: null,
    email: given.email ?? null,
    invoice_prefix: id.slice(-8).toUpperCase(),
    invoice_settings: {
      custom_fields: null,
      default_payment_method: null,
      footer: null,
      rendering_options: null,
    },
    livemode: false,
    metadata: given.metadata ?? {},
    name: given.name ?? null,
    next_invoice_sequence: 1,
    phone: given.phone ?? null,
    preferred_locales: [],
    shipping: null,
    tax_exempt: 'none',
    test_clock: null,
  });
  emit(world, 'customer.created', customer);
  return customer;
}

export const customerRoutes: Route[] = [
  route('POST', '/v1/customers', createParams, (world, { address: given, metadata, ...rest }) =>
    createCustomer(world, {
      ...rest,
      address: given ? fullAddress(given) : null,
      metadata: mergeMetadata({}, metadata),
    }),
  ),
  route('GET', '/v1/customers', listParams, (world, params) =>
    pageOf(
      world.store
        .all('customer')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.email === undefined || row.email === params.email),
        ),
      params,
      '/v1/customers',
    ),
  ),
  route('GET', '/v1/customers/:id', none, (world, _, id) => required(world, 'customer', id)),
  route(
    'POST',
    '/v1/customers/:id',
    updateParams,
    (world, { address: given, metadata, expand: _, ...rest }, id) => {
      const old = required(world, 'customer', id);
      const customer = world.store.put('customer', id, {
        ...old,
        ...rest,
        address: given === undefined ? (old.address ?? null) : given === '' ? null : fullAddress(given),
        metadata: mergeMetadata(old.metadata, metadata),
      });
      emit(world, 'customer.updated', customer);
      return customer;
    },
  ),
  route('DELETE', '/v1/customers/:id', none, (world, _, id) => {
    const customer = required(world, 'customer', id);
    world.store.remove('customer', id);
    emit(world, 'customer.deleted', customer);
    return { id, object: 'customer', deleted: true };
  }),
];
