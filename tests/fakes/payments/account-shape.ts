import type Stripe from 'stripe';

/** Currency of accounts by country, where the stand-in knows it; the dollar elsewhere. */
const CURRENCIES: Readonly<Record<string, string>> = {
  GB: 'gbp',
  AU: 'aud',
  CA: 'cad',
  NZ: 'nzd',
  JP: 'jpy',
  CH: 'chf',
  DK: 'dkk',
  NO: 'nok',
  SE: 'sek',
  PL: 'pln',
  US: 'usd',
};
const EURO = new Set('AT BE DE ES FI FR IE IT NL PT'.split(' '));
/** Currency of an account in a country. */
export const currencyOf = (country: string): string =>
  EURO.has(country) ? 'eur' : (CURRENCIES[country] ?? 'usd');

const WANTED = [
  'business_profile.url',
  'external_account',
  'individual.first_name',
  'individual.last_name',
  'tos_acceptance.date',
  'tos_acceptance.ip',
];
export const NO_ADDRESS: Stripe.Address = {
  city: null,
  country: null,
  line1: null,
  line2: null,
  postal_code: null,
  state: null,
};

/** What an account is still asked for. */
export function requirementsOf(isComplete: boolean): Stripe.Account.Requirements {
  const due = isComplete ? [] : WANTED;
  return {
    alternatives: [],
    current_deadline: null,
    currently_due: due,
    disabled_reason: isComplete ? null : 'requirements.past_due',
    errors: [],
    eventually_due: due,
    past_due: due,
    pending_verification: [],
  };
}

/** The settings of a fresh account. */
export function settingsFor(name: string | null, interval: string): Stripe.Account.Settings {
  return {
    bacs_debit_payments: { display_name: null, service_user_number: null },
    branding: { icon: null, logo: null, primary_color: null, secondary_color: null },
    card_issuing: { tos_acceptance: { date: null, ip: null } },
    card_payments: {
      decline_on: { avs_failure: false, cvc_failure: false },
      statement_descriptor_prefix: null,
      statement_descriptor_prefix_kana: null,
      statement_descriptor_prefix_kanji: null,
    },
    dashboard: { display_name: name, timezone: 'Etc/UTC' },
    invoices: { default_account_tax_ids: null, hosted_payment_method_save: null },
    payments: {
      statement_descriptor: null,
      statement_descriptor_kana: null,
      statement_descriptor_kanji: null,
      statement_descriptor_prefix_kana: null,
      statement_descriptor_prefix_kanji: null,
    },
    payouts: {
      debit_negative_balances: true,
      schedule: { delay_days: 2, interval },
      statement_descriptor: null,
    },
    sepa_debit_payments: {},
  };
}
