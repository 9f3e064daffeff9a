import type Stripe from 'stripe';
import * as z from 'zod';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import {
  choice,
  currency,
  decimal,
  expand,
  flag,
  metadata,
  metadataOrEmpty,
  paging,
  paramsOf,
  range,
  text,
  timestamp,
  whole,
} from './params.ts';
import { route, type Route } from './route.ts';
import type { Coupon, PromotionCode } from './tables.ts';
import { emit, makeId, mergeMetadata, now, required, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const couponCreate = paramsOf<Stripe.CouponCreateParams>()({
  amount_off: whole(1).optional(),
  currency: currency().optional(),
  duration: choice('forever', 'once', 'repeating').optional(),
  duration_in_months: whole(1).optional(),
  expand: expand(),
  id: text().optional(),
  max_redemptions: whole(1).optional(),
  metadata: metadataOrEmpty(),
  name: text(40).optional(),
  percent_off: decimal().optional(),
  redeem_by: timestamp().optional(),
});
const couponUpdate = paramsOf<Stripe.CouponUpdateParams>()({
  expand: expand(),
  metadata: metadataOrEmpty(),
  name: text(40).optional(),
});
const promotionCreate = paramsOf<Stripe.PromotionCodeCreateParams>()({
  promotion: z.strictObject({ type: choice('coupon'), coupon: text().optional() }),
  active: flag().optional(),
  code: text(500).optional(),
  customer: text().optional(),
  expand: expand(),
  expires_at: timestamp().optional(),
  max_redemptions: whole(1).optional(),
  metadata: metadata(),
  restrictions: z
    .strictObject({
      first_time_transaction: flag().optional(),
      minimum_amount: whole(1).optional(),
      minimum_amount_currency: currency().optional(),
    })
    .optional(),
});
const promotionUpdate = paramsOf<Stripe.PromotionCodeUpdateParams>()({
  active: flag().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
});
const promotionList = paramsOf<Stripe.PromotionCodeListParams>()({
  ...paging,
  active: flag().optional(),
  code: text().optional(),
  coupon: text().optional(),
  created: range(),
  customer: text().optional(),
});

/** A coupon as it stands now: one that has run out or is used up is no longer valid. */
function current(world: World, coupon: Coupon): Coupon {
  const isUsedUp = coupon.max_redemptions !== null && coupon.times_redeemed >= coupon.max_redemptions;
  const isOver = coupon.redeem_by !== null && coupon.redeem_by <= now(world);
  return { ...coupon, valid: !isUsedUp && !isOver };
}

/** Whether and why a code or coupon cannot be used for this much; null when it can. */
export function whyNotUsable(
  world: World,
  coupon: Coupon,
  code: PromotionCode | null,
  subtotal: number,
  payCurrency: string,
): string | null {
  if (!current(world, coupon).valid) return `Coupon ${coupon.id} is used up or has run out.`;
  if (coupon.amount_off !== null && coupon.currency !== payCurrency) {
    return `The coupon is in ${coupon.currency}, the prices are in ${payCurrency}.`;
  }
  if (!code) return null;
  const isUsedUp = code.max_redemptions !== null && code.times_redeemed >= code.max_redemptions;
  const isOver = code.expires_at !== null && code.expires_at <= now(world);
  if (!code.active || isUsedUp || isOver) return 'This promotion code is used up or has run out.';
  const { minimum_amount: minimum, minimum_amount_currency: minimumCurrency } = code.restrictions;
  if (minimum !== null && (minimumCurrency !== payCurrency || subtotal < minimum)) {
    return 'This promotion code asks for a larger order.';
  }
  return null;
}

/** Counts one use. */
export function countRedemption(
  world: World,
  discount: { coupon: string; promotionCode: string | null },
): void {
  const coupon = world.store.get('coupon', discount.coupon);
  if (coupon)
    world.store.put(
      'coupon',
      coupon.id,
      current(world, { ...coupon, times_redeemed: coupon.times_redeemed + 1 }),
    );
  const code = discount.promotionCode && world.store.get('promotion_code', discount.promotionCode);
  if (code) {
    const times = code.times_redeemed + 1;
    const active = code.active && (code.max_redemptions === null || times < code.max_redemptions);
    world.store.put('promotion_code', code.id, { ...code, times_redeemed: times, active });
  }
}

export const discountRoutes: Route[] = [
  route('POST', '/v1/coupons', couponCreate, (world, params) => {
    if ((params.amount_off === undefined) === (params.percent_off === undefined)) {
      refuse('You must pass either `percent_off` or `amount_off`.', {
        code: 'parameter_missing',
        param: 'percent_off',
      });
    }
    if (params.percent_off !== undefined && (params.percent_off <= 0 || params.percent_off > 100)) {
      refuse('Invalid percent_off: must be greater than 0 and at most 100', { param: 'percent_off' });
    }
    if (params.amount_off !== undefined && params.currency === undefined) {
      refuse('You must pass currency when passing amount_off', {
        code: 'parameter_missing',
        param: 'currency',
      });
    }
    if (params.duration === 'repeating' && params.duration_in_months === undefined) {
      refuse('You must pass duration_in_months when the duration is repeating', {
        code: 'parameter_missing',
        param: 'duration_in_months',
      });
    }
    const id = params.id ?? makeId('', 8).slice(1);
    if (world.store.get('coupon', id)) {
      refuse('Coupon already exists.', { code: 'resource_already_exists', param: 'id' });
    }
    const coupon = world.store.put('coupon', id, {
      id,
      object: 'coupon',
      amount_off: params.amount_off ?? null,
      created: now(world),
      currency: params.currency ?? null,
      duration: params.duration ?? 'once',
      duration_in_months: params.duration_in_months ?? null,
      livemode: false,
      max_redemptions: params.max_redemptions ?? null,
      metadata: mergeMetadata({}, params.metadata),
      name: params.name ?? null,
      percent_off: params.percent_off ?? null,
      redeem_by: params.redeem_by ?? null,
      times_redeemed: 0,
      valid: true,
    });
    emit(world, 'coupon.created', coupon);
    return coupon;
  }),
  route(
    'GET',
    '/v1/coupons',
    paramsOf<Stripe.CouponListParams>()({ ...paging, created: range() }),
    (world, params) =>
      pageOf(
        world.store
          .all('coupon')
          .filter((row) => isWithin(row.created, params.created))
          .map((row) => current(world, row)),
        params,
        '/v1/coupons',
      ),
  ),
  route('GET', '/v1/coupons/:id', none, (world, _, id) => current(world, required(world, 'coupon', id))),
  route('POST', '/v1/coupons/:id', couponUpdate, (world, { name, metadata: change }, id) => {
    const old = required(world, 'coupon', id);
    const coupon = world.store.put('coupon', id, {
      ...old,
      name: name ?? old.name,
      metadata: mergeMetadata(old.metadata, change),
    });
    emit(world, 'coupon.updated', coupon);
    return coupon;
  }),
  route('DELETE', '/v1/coupons/:id', none, (world, _, id) => {
    const coupon = required(world, 'coupon', id);
    world.store.remove('coupon', id);
    emit(world, 'coupon.deleted', coupon);
    return { id, object: 'coupon', deleted: true };
  }),
  route('POST', '/v1/promotion_codes', promotionCreate, (world, params) => {
    const couponId = params.promotion.coupon;
    if (couponId === undefined) {
      return refuse('Missing required param: promotion[coupon].', {
        code: 'parameter_missing',
        param: 'promotion[coupon]',
      });
    }
    required(world, 'coupon', couponId, 'promotion[coupon]', 400);
    if (params.customer !== undefined) required(world, 'customer', params.customer, 'customer', 400);
    const code = params.code ?? makeId('', 8).slice(1).toUpperCase();
    const isTaken = world.store
      .all('promotion_code')
      .some((row) => row.active && row.code.toUpperCase() === code.toUpperCase());
    if (isTaken) refuse(`An active promotion code with \`code: ${code}\` already exists.`, { param: 'code' });
    const id = makeId('promo');
    const promotion = world.store.put('promotion_code', id, {
      id,
      object: 'promotion_code',
      active: params.active ?? true,
      code,
      created: now(world),
      customer: params.customer ?? null,
      customer_account: null,
      expires_at: params.expires_at ?? null,
      livemode: false,
      max_redemptions: params.max_redemptions ?? null,
      metadata: mergeMetadata({}, params.metadata),
      promotion: { coupon: couponId, type: 'coupon' },
      restrictions: {
        first_time_transaction: params.restrictions?.first_time_transaction ?? false,
        minimum_amount: params.restrictions?.minimum_amount ?? null,
        minimum_amount_currency: params.restrictions?.minimum_amount_currency ?? null,
      },
      times_redeemed: 0,
    });
    emit(world, 'promotion_code.created', promotion);
    return promotion;
  }),
  route('GET', '/v1/promotion_codes', promotionList, (world, params) =>
    pageOf(
      world.store
        .all('promotion_code')
        .filter(
          (row) =>
            isWithin(row.created, params.created) &&
            (params.active === undefined || row.active === params.active) &&
            (params.code === undefined || row.code.toUpperCase() === params.code.toUpperCase()) &&
            (params.coupon === undefined || row.promotion.coupon === params.coupon) &&
            (params.customer === undefined || row.customer === params.customer),
        ),
      params,
      '/v1/promotion_codes',
    ),
  ),
  route('GET', '/v1/promotion_codes/:id', none, (world, _, id) => required(world, 'promotion_code', id)),
  route('POST', '/v1/promotion_codes/:id', promotionUpdate, (world, { active, metadata: change }, id) => {
    const old = required(world, 'promotion_code', id);
    const promotion = world.store.put('promotion_code', id, {
      ...old,
      active: active ?? old.active,
      metadata: mergeMetadata(old.metadata, change),
    });
    emit(world, 'promotion_code.updated', promotion);
    return promotion;
  }),
];
