import type Stripe from 'stripe';
import * as z from 'zod';
import { currencyOf, NO_ADDRESS, requirementsOf, settingsFor } from './account-shape.ts';
import { refuse } from './errors.ts';
import { isWithin, pageOf } from './list.ts';
import {
  choice,
  currency,
  email,
  expand,
  flag,
  metadataOrEmpty,
  paging,
  paramsOf,
  range,
  text,
  url,
} from './params.ts';
import { route, type Route } from './route.ts';
import { emit, makeId, mergeMetadata, now, required, type World } from './world.ts';

const none = paramsOf<{ expand?: string[] }>()({ expand: expand() });
const capabilities = z
  .strictObject({
    card_payments: z.strictObject({ requested: flag().optional() }).optional(),
    transfers: z.strictObject({ requested: flag().optional() }).optional(),
  })
  .optional();
const profile = z
  .strictObject({
    mcc: text(4).optional(),
    name: text().optional(),
    product_description: text().optional(),
    support_email: email().optional(),
    url: url().optional(),
  })
  .optional();
const schedule = z
  .strictObject({
    payouts: z
      .strictObject({
        schedule: z
          .strictObject({ interval: choice('daily', 'manual', 'monthly', 'weekly').optional() })
          .optional(),
      })
      .optional(),
  })
  .optional();

const accountCreate = paramsOf<Stripe.AccountCreateParams>()({
  business_profile: profile,
  business_type: choice('company', 'government_entity', 'individual', 'non_profit').optional(),
  capabilities,
  controller: z
    .strictObject({
      fees: z.strictObject({ payer: choice('account', 'application').optional() }).optional(),
      losses: z.strictObject({ payments: choice('application', 'stripe').optional() }).optional(),
      requirement_collection: choice('application', 'stripe').optional(),
      stripe_dashboard: z.strictObject({ type: choice('express', 'full', 'none').optional() }).optional(),
    })
    .optional(),
  country: text(2).optional(),
  default_currency: currency().optional(),
  email: email().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  settings: schedule,
  type: choice('custom', 'express', 'standard').optional(),
});
const accountUpdate = paramsOf<Stripe.AccountUpdateParams>()({
  business_profile: profile,
  capabilities,
  default_currency: currency().optional(),
  email: email().optional(),
  expand: expand(),
  metadata: metadataOrEmpty(),
  settings: schedule,
});
const linkCreate = paramsOf<Stripe.AccountLinkCreateParams>()({
  account: text(),
  type: choice('account_onboarding', 'account_update'),
  collection_options: z
    .strictObject({ fields: choice('currently_due', 'eventually_due').optional() })
    .optional(),
  expand: expand(),
  refresh_url: url().optional(),
  return_url: url().optional(),
});

function createAccount(world: World, params: z.output<typeof accountCreate>): Stripe.Account {
  if (params.type !== undefined && params.controller !== undefined) {
    refuse('You may only specify one of these parameters: controller, type.', { param: 'type' });
  }
  const id = makeId('acct', 16);
  const country = (params.country ?? 'US').toUpperCase();
  const type =
    params.type ??
    (params.controller?.stripe_dashboard?.type === 'express'
      ? 'express'
      : params.controller
        ? 'none'
        : 'standard');
  const profileGiven = params.business_profile;
  const account = world.store.put('account', id, {
    id,
    object: 'account',
    business_profile: {
      annual_revenue: null,
      estimated_worker_count: null,
      mcc: profileGiven?.mcc ?? null,
      minority_owned_business_designation: null,
      name: profileGiven?.name ?? null,
      product_description: profileGiven?.product_description ?? null,
      specified_commercial_transactions_act_url: null,
      support_address: NO_ADDRESS,
      support_email: profileGiven?.support_email ?? null,
      support_phone: null,
      support_url: null,
      url: profileGiven?.url ?? null,
    },
    business_type: params.business_type ?? null,
    capabilities: requestedOf(params.capabilities, {}, false),
    charges_enabled: false,
    controller: {
      fees: {
        payer: params.controller?.fees?.payer ?? (type === 'express' ? 'application_express' : 'account'),
      },
      is_controller: true,
      losses: {
        payments: params.controller?.losses?.payments ?? (type === 'standard' ? 'stripe' : 'application'),
      },
      requirement_collection: params.controller?.requirement_collection ?? 'stripe',
      stripe_dashboard: {
        type: params.controller?.stripe_dashboard?.type ?? (type === 'express' ? 'express' : 'full'),
      },
      type: 'application',
    },
    country,
    created: now(world),
    default_currency: params.default_currency ?? currencyOf(country),
    details_submitted: false,
    email: params.email ?? null,
    external_accounts: {
      object: 'list',
      data: [],
      has_more: false,
      url: `/v1/accounts/${id}/external_accounts`,
    },
    future_requirements: {
      alternatives: [],
      current_deadline: null,
      currently_due: [],
      disabled_reason: null,
      errors: [],
      eventually_due: [],
      past_due: [],
      pending_verification: [],
    },
    metadata: mergeMetadata({}, params.metadata),
    payouts_enabled: false,
    requirements: requirementsOf(false),
    settings: settingsFor(
      profileGiven?.name ?? null,
      params.settings?.payouts?.schedule?.interval ?? 'daily',
    ),
    tos_acceptance: { date: null, ip: null, user_agent: null },
    type,
  });
  return account;
}

function requestedOf(
  given: z.output<typeof capabilities>,
  old: Stripe.Account.Capabilities,
  isComplete: boolean,
): Stripe.Account.Capabilities {
  const state = isComplete ? 'active' : 'inactive';
  return {
    ...old,
    ...(given?.card_payments?.requested ? { card_payments: state } : {}),
    ...(given?.transfers?.requested ? { transfers: state } : {}),
  };
}

/** What the owner does on the onboarding page: everything asked for is given, and the account can be paid. */
export function completeOnboarding(world: World, account: Stripe.Account): Stripe.Account {
  const { card_payments: cards, transfers } = account.capabilities ?? {};
  const done = world.store.put('account', account.id, {
    ...account,
    capabilities: {
      ...(cards ? { card_payments: 'active' } : {}),
      ...(transfers ? { transfers: 'active' } : {}),
    },
    charges_enabled: cards !== undefined,
    details_submitted: true,
    payouts_enabled: true,
    requirements: requirementsOf(true),
    tos_acceptance: { date: now(world), ip: '127.0.0.1', user_agent: null },
  });
  emit(world, 'account.updated', done, account.id);
  return done;
}

export const accountRoutes: Route[] = [
  route('POST', '/v1/accounts', accountCreate, createAccount),
  route(
    'GET',
    '/v1/accounts',
    paramsOf<Stripe.AccountListParams>()({ ...paging, created: range() }),
    (world, params) =>
      pageOf(
        world.store.all('account').filter((row) => isWithin(row.created ?? 0, params.created)),
        params,
        '/v1/accounts',
      ),
  ),
  route('GET', '/v1/accounts/:id', none, (world, _, id) => required(world, 'account', id, 'account')),
  route('POST', '/v1/accounts/:id', accountUpdate, (world, params, id) => {
    const old = required(world, 'account', id, 'account');
    const account = world.store.put('account', id, {
      ...old,
      business_profile: old.business_profile ? { ...old.business_profile, ...params.business_profile } : null,
      capabilities: requestedOf(params.capabilities, old.capabilities ?? {}, old.details_submitted),
      default_currency: params.default_currency ?? old.default_currency ?? 'usd',
      email: params.email ?? old.email,
      metadata: mergeMetadata(old.metadata, params.metadata),
      settings: params.settings?.payouts?.schedule?.interval
        ? settingsFor(old.business_profile?.name ?? null, params.settings.payouts.schedule.interval)
        : (old.settings ?? null),
    });
    emit(world, 'account.updated', account, id);
    return account;
  }),
  route('DELETE', '/v1/accounts/:id', none, (world, _, id) => {
    required(world, 'account', id, 'account');
    world.store.remove('account', id);
    return { id, object: 'account', deleted: true };
  }),
  route('POST', '/v1/account_links', linkCreate, (world, params): Stripe.AccountLink => {
    required(world, 'account', params.account, 'account', 400);
    const { refresh_url: refreshUrl, return_url: returnUrl } = params;
    if (refreshUrl === undefined)
      return refuse('Missing required param: refresh_url.', {
        code: 'parameter_missing',
        param: 'refresh_url',
      });
    if (returnUrl === undefined)
      return refuse('Missing required param: return_url.', {
        code: 'parameter_missing',
        param: 'return_url',
      });
    const token = makeId('', 24).slice(1);
    const expiresAt = now(world) + 300;
    world.store.put('account_link', token, { account: params.account, expiresAt, refreshUrl, returnUrl });
    return {
      object: 'account_link',
      created: now(world),
      expires_at: expiresAt,
      url: `${world.publicUrl}/setup/${token}`,
    };
  }),
  route('POST', '/v1/accounts/:id/login_links', none, (world, _, id): Stripe.LoginLink => {
    const account = required(world, 'account', id, 'account');
    if (account.type !== 'express' || !account.details_submitted) {
      refuse('Cannot create a login link for an account that has not completed onboarding.', {
        param: 'account',
      });
    }
    return { object: 'login_link', created: now(world), url: `${world.publicUrl}/express/${id}` };
  }),
];
