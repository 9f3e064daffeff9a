import type Stripe from 'stripe';
import * as z from 'zod';
import { productData } from './catalogue.ts';
import {
  choice,
  currency,
  email,
  emptyable,
  expand,
  flag,
  metadata,
  metadataOrEmpty,
  paging,
  paramsOf,
  range,
  text,
  timestamp,
  url,
  whole,
} from './params.ts';

const message = () => emptyable(z.strictObject({ message: text(1200) })).optional();

/** What a new checkout session takes: payments by card on the hosted page. */
export const sessionCreate = paramsOf<Stripe.Checkout.SessionCreateParams>()({
  allow_promotion_codes: flag().optional(),
  automatic_tax: z.strictObject({ enabled: flag() }).optional(),
  billing_address_collection: choice('auto', 'required').optional(),
  cancel_url: url().optional(),
  client_reference_id: text(200).optional(),
  consent_collection: z
    .strictObject({
      promotions: choice('auto', 'none').optional(),
      terms_of_service: choice('none', 'required').optional(),
    })
    .optional(),
  currency: currency().optional(),
  custom_text: z
    .strictObject({ after_submit: message(), submit: message(), terms_of_service_acceptance: message() })
    .optional(),
  customer: text().optional(),
  customer_creation: choice('always', 'if_required').optional(),
  customer_email: email().optional(),
  customer_update: z
    .strictObject({ address: choice('auto', 'never').optional(), name: choice('auto', 'never').optional() })
    .optional(),
  discounts: z
    .array(z.strictObject({ coupon: text().optional(), promotion_code: text().optional() }))
    .optional(),
  expand: expand(),
  expires_at: timestamp().optional(),
  line_items: z
    .array(
      z.strictObject({
        metadata: metadata(),
        price: text().optional(),
        price_data: z
          .strictObject({
            currency: currency(),
            product: text().optional(),
            product_data: productData().optional(),
            tax_behavior: choice('exclusive', 'inclusive', 'unspecified').optional(),
            unit_amount: whole(0).optional(),
          })
          .optional(),
        quantity: whole(0, 999_999).optional(),
      }),
    )
    .optional(),
  locale: choice(
    'auto',
    'bg',
    'cs',
    'da',
    'de',
    'el',
    'en',
    'en-GB',
    'es',
    'es-419',
    'et',
    'fi',
    'fil',
    'fr',
    'fr-CA',
    'hr',
    'hu',
    'id',
    'it',
    'ja',
    'ko',
    'lt',
    'lv',
    'ms',
    'mt',
    'nb',
    'nl',
    'pl',
    'pt',
    'pt-BR',
    'ro',
    'ru',
    'sk',
    'sl',
    'sv',
    'th',
    'tr',
    'vi',
    'zh',
    'zh-HK',
    'zh-TW',
  ).optional(),
  metadata: metadata(),
  mode: choice('payment', 'setup', 'subscription').optional(),
  payment_intent_data: z
    .strictObject({
      capture_method: choice('automatic', 'automatic_async').optional(),
      description: text(1000).optional(),
      metadata: metadata(),
      receipt_email: email().optional(),
      statement_descriptor: text(22).optional(),
      transfer_group: text().optional(),
    })
    .optional(),
  submit_type: choice('auto', 'book', 'donate', 'pay', 'subscribe').optional(),
  success_url: url().optional(),
  ui_mode: choice('elements', 'embedded_page', 'form', 'hosted_page').optional(),
});
export type SessionCreate = z.output<typeof sessionCreate>;

export const sessionUpdate = paramsOf<Stripe.Checkout.SessionUpdateParams>()({
  expand: expand(),
  metadata: metadataOrEmpty(),
});

export const sessionList = paramsOf<Stripe.Checkout.SessionListParams>()({
  ...paging,
  created: range(),
  customer: text().optional(),
  customer_details: z.strictObject({ email: email() }).optional(),
  payment_intent: text().optional(),
  status: choice('complete', 'expired', 'open').optional(),
});
