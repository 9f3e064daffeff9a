import { createPrice, createProduct } from './catalogue.ts';
import { minimumOf, printAmount } from './currencies.ts';
import { whyNotUsable } from './discounts.ts';
import { refuse } from './errors.ts';
import type { SessionCreate } from './session-params.ts';
import { couponOf, emptyDetails, reckon } from './session-state.ts';
import type { LineItem, Price, Session, SessionFile } from './tables.ts';
import { totalUp } from './totals.ts';
import { makeId, mergeMetadata, now, required, type World } from './world.ts';

const HOUR = 3600;
const missing = (param: string): never =>
  refuse(`Missing required param: ${param}.`, { code: 'parameter_missing', param });

function priceOf(world: World, item: NonNullable<SessionCreate['line_items']>[number], at: string): Price {
  if ((item.price === undefined) === (item.price_data === undefined)) {
    return refuse('You must provide one of `price` or `price_data` for each line item.', {
      code: 'parameter_missing',
      param: at,
    });
  }
  if (item.price !== undefined) {
    const price = required(world, 'price', item.price, `${at}[price]`, 400);
    return price.active
      ? price
      : refuse('The price specified is inactive. This field only accepts active prices.', {
          code: 'price_inactive',
          param: `${at}[price]`,
        });
  }
  const data = item.price_data;
  if (!data || data.unit_amount === undefined) return missing(`${at}[price_data][unit_amount]`);
  if ((data.product === undefined) === (data.product_data === undefined))
    return missing(`${at}[price_data][product]`);
  if (data.product !== undefined) required(world, 'product', data.product, `${at}[price_data][product]`, 400);
  const product =
    data.product ??
    createProduct(world, { ...data.product_data, name: data.product_data?.name ?? '', active: false }).id;
  return createPrice(world, {
    currency: data.currency,
    unit_amount: data.unit_amount,
    product,
    active: false,
    tax_behavior: data.tax_behavior,
  });
}

function linesOf(world: World, params: SessionCreate): LineItem[] {
  const items = params.line_items ?? [];
  if (items.length === 0) missing('line_items');
  if (items.length > 100)
    refuse('A Checkout Session can have at most 100 line items.', { param: 'line_items' });
  const lines = items.map((item, index): LineItem => {
    const at = `line_items[${index}]`;
    const price = priceOf(world, item, at);
    const quantity = item.quantity ?? missing(`${at}[quantity]`);
    if (quantity < 1)
      refuse('Quantity must be at least 1.', { code: 'parameter_invalid_integer', param: `${at}[quantity]` });
    return {
      id: makeId('li'),
      object: 'item',
      adjustable_quantity: null,
      amount_discount: 0,
      amount_subtotal: 0,
      amount_tax: 0,
      amount_total: 0,
      currency: price.currency,
      description: world.store.get('product', price.product)?.name ?? null,
      metadata: mergeMetadata({}, item.metadata),
      price,
      quantity,
    };
  });
  const currency = lines[0]?.currency;
  if (
    lines.some((line) => line.currency !== currency) ||
    (params.currency !== undefined && params.currency !== currency)
  ) {
    refuse('All prices on a Checkout Session must have the same currency.', { param: 'line_items' });
  }
  return lines;
}

function discountFrom(world: World, params: SessionCreate): SessionFile['discount'] {
  const given = params.discounts ?? [];
  if (given.length === 0) return null;
  if (params.allow_promotion_codes !== undefined) {
    refuse('You may only specify one of these parameters: allow_promotion_codes, discounts.', {
      param: 'discounts',
    });
  }
  const [first] = given;
  if (!first || given.length > 1)
    return refuse('You can only apply one discount to a Checkout Session.', { param: 'discounts' });
  if ((first.coupon === undefined) === (first.promotion_code === undefined)) {
    return refuse('You may only specify one of these parameters: coupon, promotion_code.', {
      param: 'discounts[0]',
    });
  }
  if (first.coupon !== undefined) {
    return {
      coupon: required(world, 'coupon', first.coupon, 'discounts[0][coupon]', 400).id,
      promotionCode: null,
    };
  }
  const code = required(
    world,
    'promotion_code',
    first.promotion_code ?? '',
    'discounts[0][promotion_code]',
    400,
  );
  return { coupon: code.promotion.coupon, promotionCode: code.id };
}

function textOf(given: '' | { message: string } | undefined): { message: string } | null {
  return given || null;
}

function requireLawful(world: World, params: SessionCreate): number {
  const mode = params.mode ?? missing('mode');
  if (mode !== 'payment') refuse(`The stand-in takes only the mode payment, not ${mode}.`, { param: 'mode' });
  if ((params.ui_mode ?? 'hosted_page') !== 'hosted_page')
    refuse('The stand-in shows only the hosted page.', { param: 'ui_mode' });
  if (params.success_url === undefined) missing('success_url');
  if (params.customer !== undefined && params.customer_email !== undefined) {
    refuse('You may only specify one of these parameters: customer, customer_email.', { param: 'customer' });
  }
  if (params.customer !== undefined && params.customer_creation !== undefined) {
    refuse('You may only specify one of these parameters: customer, customer_creation.', {
      param: 'customer',
    });
  }
  if (params.customer_update !== undefined && params.customer === undefined) {
    refuse('`customer_update` can only be used with `customer`.', { param: 'customer_update' });
  }
  const at = now(world);
  const expiresAt = params.expires_at ?? at + 24 * HOUR;
  // The published bounds are half an hour and a day; a minute's grace for the time that a request takes.
  if (expiresAt < at + HOUR / 2 - 60) {
    refuse('The `expires_at` timestamp must be at least 30 minutes from Checkout Session creation.', {
      param: 'expires_at',
    });
  }
  if (expiresAt > at + 24 * HOUR + 60) {
    refuse('The `expires_at` timestamp must be less than 24 hours from Checkout Session creation.', {
      param: 'expires_at',
    });
  }
  return expiresAt;
}

/** Opens a session: prices looked up or made, discount applied, totals worked out. */
export function createSession(world: World, params: SessionCreate): Session {
  const expiresAt = requireLawful(world, params);
  const customer =
    params.customer === undefined ? null : required(world, 'customer', params.customer, 'customer', 400);
  const lines = linesOf(world, params);
  const currency = lines[0]?.currency ?? 'usd';
  const discount = discountFrom(world, params);
  const id = makeId('cs_test', 58);
  const url = `${world.publicUrl}/c/pay/${id}`;
  const data = params.payment_intent_data;
  const file: SessionFile = {
    lines,
    taxes: [],
    discount,
    discountAmount: 0,
    url,
    intentData: {
      description: data?.description ?? null,
      metadata: mergeMetadata({}, data?.metadata),
      transferGroup: data?.transfer_group ?? null,
      receiptEmail: data?.receipt_email ?? null,
      statementDescriptor: data?.statement_descriptor ?? null,
      captureMethod: data?.capture_method ?? 'automatic_async',
    },
    attempt: null,
  };
  const coupon = couponOf(world, file);
  if (coupon && discount) {
    const code = discount.promotionCode
      ? (world.store.get('promotion_code', discount.promotionCode) ?? null)
      : null;
    const subtotal = totalUp(lines, null, null).subtotal;
    const fault = whyNotUsable(world, coupon, code, subtotal, currency);
    if (fault) refuse(fault, { code: 'coupon_expired', param: 'discounts[0]' });
  }
  const details = emptyDetails(customer?.email ?? params.customer_email ?? null, customer?.name ?? null);
  const session: Session = {
    id,
    object: 'checkout.session',
    adaptive_pricing: { enabled: false },
    after_expiration: null,
    allow_promotion_codes: params.allow_promotion_codes ?? null,
    allowed_payment_method_types: null,
    amount_subtotal: 0,
    amount_total: 0,
    automatic_tax: params.automatic_tax?.enabled
      ? { enabled: true, liability: { type: 'self' }, provider: 'stripe', status: 'requires_location_inputs' }
      : { enabled: false, liability: null, provider: null, status: null },
    billing_address_collection: params.billing_address_collection ?? null,
    cancel_url: params.cancel_url ?? null,
    client_reference_id: params.client_reference_id ?? null,
    client_secret: null,
    collected_information: { business_name: null, individual_name: null, shipping_details: null },
    consent: null,
    consent_collection: params.consent_collection
      ? {
          payment_method_reuse_agreement: null,
          promotions: params.consent_collection.promotions ?? 'none',
          terms_of_service: params.consent_collection.terms_of_service ?? 'none',
        }
      : null,
    created: now(world),
    currency,
    currency_conversion: null,
    custom_fields: [],
    custom_text: {
      after_submit: textOf(params.custom_text?.after_submit),
      shipping_address: null,
      submit: textOf(params.custom_text?.submit),
      terms_of_service_acceptance: textOf(params.custom_text?.terms_of_service_acceptance),
    },
    customer: customer?.id ?? null,
    customer_account: null,
    customer_creation: customer ? null : (params.customer_creation ?? 'if_required'),
    customer_details: details.email ? details : null,
    customer_email: params.customer_email ?? null,
    discounts: [],
    expires_at: expiresAt,
    integration_identifier: null,
    invoice: null,
    invoice_creation: {
      enabled: false,
      invoice_data: {
        account_tax_ids: null,
        custom_fields: null,
        description: null,
        footer: null,
        issuer: null,
        metadata: {},
        rendering_options: null,
      },
    },
    livemode: false,
    locale: params.locale ?? null,
    managed_payments: { enabled: false },
    metadata: mergeMetadata({}, params.metadata),
    mode: 'payment',
    origin_context: null,
    payment_intent: null,
    payment_link: null,
    payment_method_collection: 'if_required',
    payment_method_configuration_details: null,
    payment_method_options: {},
    payment_method_types: ['card'],
    payment_status: 'unpaid',
    permissions: null,
    phone_number_collection: { enabled: false },
    recovered_from: null,
    saved_payment_method_options: null,
    setup_intent: null,
    shipping_address_collection: null,
    shipping_cost: null,
    shipping_options: [],
    status: 'open',
    submit_type: params.submit_type ?? null,
    subscription: null,
    success_url: params.success_url ?? null,
    total_details: null,
    ui_mode: 'hosted_page',
    url,
    wallet_options: null,
  };
  const reckoned = reckon(world, session, file, customer?.address?.country ?? null).session;
  const total = reckoned.amount_total ?? 0;
  if (total > 0 && total < minimumOf(currency)) {
    refuse(
      `The Checkout Session's total amount due must add up to at least ${printAmount(minimumOf(currency), currency)}`,
      { code: 'amount_too_small' },
    );
  }
  return reckoned;
}
