import type Stripe from 'stripe';
import * as z from 'zod';
import { refuse, refuseMissing } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import {
  choice,
  currency,
  emptyable,
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
import { route, type Route } from './route.ts';
import type { Price, Tables } from './tables.ts';
import { emit, makeId, mergeMetadata, now, required, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const taxBehavior = choice('exclusive', 'inclusive', 'unspecified');

const productCreate = paramsOf<Stripe.ProductCreateParams>()({
  name: text(250),
  active: flag().optional(),
  description: text().optional(),
  expand: expand(),
  id: text().optional(),
  images: z.array(url()).max(8).optional(),
  metadata: metadata(),
  shippable: flag().optional(),
  tax_code: text().optional(),
  unit_label: text(12).optional(),
  url: url().optional(),
});
const productUpdate = paramsOf<Stripe.ProductUpdateParams>()({
  name: text(250).optional(),
  active: flag().optional(),
  default_price: text().optional(),
  description: emptyable(text()).optional(),
  expand: expand(),
  images: emptyable(z.array(url()).max(8)).optional(),
  metadata: metadataOrEmpty(),
  tax_code: emptyable(text()).optional(),
  unit_label: emptyable(text(12)).optional(),
  url: emptyable(url()).optional(),
});
const productList = paramsOf<Stripe.ProductListParams>()({
  ...paging,
  active: flag().optional(),
  created: range(),
  ids: z.array(text()).optional(),
});

/** A product as it is described inside a price. */
export const productData = () =>
  z.strictObject({
    name: text(250),
    description: text().optional(),
    images: z.array(url()).max(8).optional(),
    metadata: metadata(),
    tax_code: text().optional(),
    unit_label: text(12).optional(),
  });

const priceCreate = paramsOf<Stripe.PriceCreateParams>()({
  currency: currency(),
  active: flag().optional(),
  expand: expand(),
  lookup_key: text(200).optional(),
  metadata: metadata(),
  nickname: text().optional(),
  product: text().optional(),
  product_data: z
    .strictObject({
      name: text(250),
      active: flag().optional(),
      id: text().optional(),
      metadata: metadata(),
      tax_code: text().optional(),
      unit_label: text(12).optional(),
    })
    .optional(),
  tax_behavior: taxBehavior.optional(),
  transfer_lookup_key: flag().optional(),
  unit_amount: whole(0).optional(),
});
const priceUpdate = paramsOf<Stripe.PriceUpdateParams>()({
  active: flag().optional(),
  expand: expand(),
  lookup_key: text(200).optional(),
  metadata: metadataOrEmpty(),
  nickname: text().optional(),
  tax_behavior: taxBehavior.optional(),
  transfer_lookup_key: flag().optional(),
});
const priceList = paramsOf<Stripe.PriceListParams>()({
  ...paging,
  active: flag().optional(),
  created: range(),
  currency: currency().optional(),
  lookup_keys: z.array(text()).max(10).optional(),
  product: text().optional(),
  type: choice('one_time', 'recurring').optional(),
});

interface ProductGiven {
  name: string;
  id?: string | undefined;
  active?: boolean | undefined;
  description?: string | undefined;
  images?: string[] | undefined;
  metadata?: Record<string, string> | undefined;
  shippable?: boolean | undefined;
  tax_code?: string | undefined;
  unit_label?: string | undefined;
  url?: string | undefined;
}

/** Makes a product. A product that exists only inside a price is inactive, as published. */
export function createProduct(world: World, given: ProductGiven): Tables['product'] {
  const id = given.id ?? makeId('prod', 14);
  if (world.store.get('product', id)) {
    refuse(`Product already exists with the id '${id}'.`, { code: 'resource_already_exists', param: 'id' });
  }
  const product = world.store.put('product', id, {
    id,
    object: 'product',
    active: given.active ?? true,
    created: now(world),
    default_price: null,
    description: given.description ?? null,
    images: given.images ?? [],
    livemode: false,
    marketing_features: [],
    metadata: mergeMetadata({}, given.metadata),
    name: given.name,
    package_dimensions: null,
    shippable: given.shippable ?? null,
    statement_descriptor: null,
    tax_code: given.tax_code ?? null,
    tax_details: null,
    type: 'service',
    unit_label: given.unit_label ?? null,
    updated: now(world),
    url: given.url ?? null,
  });
  emit(world, 'product.created', product);
  return product;
}

interface PriceGiven {
  currency: string;
  unit_amount: number;
  product: string;
  active?: boolean | undefined;
  lookup_key?: string | undefined;
  metadata?: Record<string, string> | undefined;
  nickname?: string | undefined;
  tax_behavior?: 'exclusive' | 'inclusive' | 'unspecified' | undefined;
}

/** Makes a price for one payment. */
export function createPrice(world: World, given: PriceGiven): Price {
  const id = makeId('price');
  const price = world.store.put('price', id, {
    id,
    object: 'price',
    active: given.active ?? true,
    billing_scheme: 'per_unit',
    created: now(world),
    currency: given.currency,
    custom_unit_amount: null,
    livemode: false,
    lookup_key: given.lookup_key ?? null,
    metadata: mergeMetadata({}, given.metadata),
    nickname: given.nickname ?? null,
    product: given.product,
    recurring: null,
    tax_behavior: given.tax_behavior ?? 'unspecified',
    tiers_mode: null,
    transform_quantity: null,
    type: 'one_time',
    unit_amount: given.unit_amount,
    unit_amount_decimal: String(given.unit_amount),
  });
  emit(world, 'price.created', price);
  return price;
}

function requireFreeLookupKey(world: World, key: string | undefined, mayTake: boolean | undefined): void {
  const holder = key && world.store.all('price').find((row) => row.lookup_key === key);
  if (!holder) return;
  if (!mayTake) refuse(`A price (\`${holder.id}\`) already uses that lookup key.`, { param: 'lookup_key' });
  world.store.put('price', holder.id, { ...holder, lookup_key: null });
}

export const catalogueRoutes: Route[] = [
  route('POST', '/v1/products', productCreate, createProduct),
  route('GET', '/v1/products', productList, (world, params) =>
    pageOf(
      world.store
        .all('product')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.active === undefined || row.active === params.active) &&
            (params.ids === undefined || params.ids.includes(row.id)),
        ),
      params,
      '/v1/products',
    ),
  ),
  route('GET', '/v1/products/:id', none, (world, _, id) => required(world, 'product', id)),
  route('POST', '/v1/products/:id', productUpdate, (world, { expand: _, metadata: change, ...rest }, id) => {
    const old = required(world, 'product', id);
    if (rest.default_price !== undefined) required(world, 'price', rest.default_price, 'default_price', 400);
    const product = world.store.put('product', id, {
      ...old,
      ...rest,
      description: rest.description === '' ? null : (rest.description ?? old.description),
      images: rest.images === '' ? [] : (rest.images ?? old.images),
      tax_code: rest.tax_code === '' ? null : (rest.tax_code ?? old.tax_code ?? null),
      unit_label: rest.unit_label === '' ? null : (rest.unit_label ?? old.unit_label ?? null),
      url: rest.url === '' ? null : (rest.url ?? old.url),
      metadata: mergeMetadata(old.metadata, change),
      updated: now(world),
    });
    emit(world, 'product.updated', product);
    return product;
  }),
  route('DELETE', '/v1/products/:id', none, (world, _, id) => {
    const product = required(world, 'product', id);
    if (world.store.all('price').some((row) => row.product === id)) {
      refuse('This product cannot be deleted because it has one or more user-created prices.', {
        param: 'id',
      });
    }
    world.store.remove('product', id);
    emit(world, 'product.deleted', product);
    return { id, object: 'product', deleted: true };
  }),
  route(
    'POST',
    '/v1/prices',
    priceCreate,
    (world, { product, product_data: data, unit_amount: amount, ...rest }) => {
      if (amount === undefined) {
        return refuse('Missing required param: unit_amount.', {
          code: 'parameter_missing',
          param: 'unit_amount',
        });
      }
      if ((product === undefined) === (data === undefined)) {
        return refuse('You must specify either `product` or `product_data` when creating a price.', {
          code: 'parameter_missing',
          param: 'product',
        });
      }
      requireFreeLookupKey(world, rest.lookup_key, rest.transfer_lookup_key);
      if (product !== undefined && !world.store.get('product', product))
        refuseMissing('product', product, 'product', 400);
      const productId = product ?? createProduct(world, data ?? { name: '' }).id;
      return createPrice(world, { ...rest, product: productId, unit_amount: amount });
    },
  ),
  route('GET', '/v1/prices', priceList, (world, params) =>
    pageOf(
      world.store
        .all('price')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.active === undefined || row.active === params.active) &&
            (params.currency === undefined || row.currency === params.currency) &&
            (params.product === undefined || row.product === params.product) &&
            (params.type === undefined || row.type === params.type) &&
            (params.lookup_keys === undefined || params.lookup_keys.includes(row.lookup_key ?? '')),
        ),
      params,
      '/v1/prices',
    ),
  ),
  route('GET', '/v1/prices/:id', none, (world, _, id) => required(world, 'price', id)),
  route(
    'POST',
    '/v1/prices/:id',
    priceUpdate,
    (world, { expand: _, metadata: change, transfer_lookup_key: mayTake, ...rest }, id) => {
      const old = required(world, 'price', id);
      if (rest.lookup_key !== old.lookup_key) requireFreeLookupKey(world, rest.lookup_key, mayTake);
      const price = world.store.put('price', id, {
        ...old,
        ...rest,
        metadata: mergeMetadata(old.metadata, change),
      });
      emit(world, 'price.updated', price);
      return price;
    },
  ),
];
