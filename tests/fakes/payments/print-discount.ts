import { printAmount } from './currencies.ts';
import type { SessionFile } from './tables.ts';
import type { World } from './world.ts';

/** A discount as the payment page calls it, such as `SPRING (20 % off)`. */
export function printDiscountName(world: World, discount: NonNullable<SessionFile['discount']>): string {
  const coupon = world.store.get('coupon', discount.coupon);
  const code = discount.promotionCode ? world.store.get('promotion_code', discount.promotionCode) : undefined;
  const name = code?.code ?? coupon?.name ?? discount.coupon;
  const off =
    coupon?.percent_off !== null && coupon?.percent_off !== undefined
      ? `${coupon.percent_off} % off`
      : `${printAmount(coupon?.amount_off ?? 0, coupon?.currency ?? 'usd')} off`;
  return `${name} (${off})`;
}
