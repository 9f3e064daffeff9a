import type Stripe from 'stripe';
import type { Coupon, Session, SessionFile } from './tables.ts';
import { totalUp } from './totals.ts';
import { emit, now, type World } from './world.ts';

/** The coupon that a session's file names. */
export function couponOf(world: World, file: SessionFile): Coupon | null {
  return (file.discount && world.store.get('coupon', file.discount.coupon)) ?? null;
}

/** Works a session out again, for a country or discount that changed, and keeps both halves of it. */
export function reckon(
  world: World,
  session: Session,
  file: SessionFile,
  country: string | null,
): { session: Session; file: SessionFile } {
  const isTaxed = session.automatic_tax.enabled;
  const totals = totalUp(file.lines, couponOf(world, file), isTaxed ? country : null);
  const next: SessionFile = {
    ...file,
    lines: totals.lines,
    taxes: totals.taxes,
    discountAmount: totals.discount,
  };
  world.store.put('session_file', session.id, next);
  return {
    file: next,
    session: world.store.put('checkout.session', session.id, {
      ...session,
      amount_subtotal: totals.subtotal,
      amount_total: totals.total,
      automatic_tax: {
        ...session.automatic_tax,
        status: !isTaxed ? null : country ? 'complete' : 'requires_location_inputs',
      },
      discounts: file.discount
        ? [
            file.discount.promotionCode
              ? { coupon: null, promotion_code: file.discount.promotionCode }
              : { coupon: file.discount.coupon, promotion_code: null },
          ]
        : [],
      total_details: { amount_discount: totals.discount, amount_shipping: 0, amount_tax: totals.tax },
      payment_status:
        session.status === 'complete'
          ? session.payment_status
          : totals.total === 0
            ? 'no_payment_required'
            : 'unpaid',
    }),
  };
}

/** Details of a buyer of whom little is known yet. */
export function emptyDetails(
  email: string | null,
  name: string | null,
): Stripe.Checkout.Session.CustomerDetails {
  return {
    address: null,
    business_name: null,
    email,
    individual_name: null,
    name,
    phone: null,
    tax_exempt: 'none',
    tax_ids: null,
  };
}

/** Ends an open session unpaid. */
export function expireSession(world: World, session: Session): Session {
  const expired = world.store.put('checkout.session', session.id, {
    ...session,
    status: 'expired',
    url: null,
  });
  emit(world, 'checkout.session.expired', expired);
  return expired;
}

/** Ends every session whose time is over. */
export function expireOverdue(world: World): void {
  for (const session of world.store.all('checkout.session')) {
    if (session.status === 'open' && session.expires_at <= now(world)) expireSession(world, session);
  }
}
