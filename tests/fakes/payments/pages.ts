import { completeOnboarding } from './accounts.ts';
import { escapeHtml as e, renderSheet } from './html.ts';
import { renderAuthenticatePage, renderClosedPage, renderPayPage, type PageState } from './pay-page.ts';
import {
  applyCode,
  authenticateSession,
  chooseCountry,
  openSession,
  paySession,
  removeCode,
  successUrlOf,
  type PayOutcome,
  type Typed,
} from './pay-session.ts';
import type { Session, SessionFile } from './tables.ts';
import { matchPath } from './route.ts';
import { now, type World } from './world.ts';

type PageAnswer = { status: number; html: string } | { status: 303; location: string };

function fieldsOf(form: URLSearchParams): Typed {
  const field = (name: string): string => (form.get(name) ?? '').slice(0, 300);
  return {
    email: field('email').trim(),
    name: field('name').trim(),
    country: field('country'),
    card: field('card'),
    expiry: field('expiry'),
    cvc: field('cvc'),
    hasAgreed: form.get('agreed') === 'yes',
    wantsNews: form.get('news') === 'yes',
  };
}

function initialFields(world: World, session: Session, file: SessionFile): Typed {
  const customer = session.customer ? world.store.get('customer', session.customer) : undefined;
  return {
    email: file.attempt?.email ?? session.customer_details?.email ?? '',
    name: file.attempt?.name ?? session.customer_details?.name ?? '',
    country: file.attempt?.country ?? customer?.address?.country ?? '',
    card: file.attempt?.card ?? '',
    expiry: '',
    cvc: '',
    hasAgreed: false,
    wantsNews: false,
  };
}

function showPay(world: World, id: string, state: Partial<PageState>, status = 200): PageAnswer {
  const { session, file } = openSession(world, id);
  if (session.status !== 'open') return { status: 200, html: renderClosedPage(session) };
  const typed = state.typed ?? initialFields(world, session, file);
  return {
    status,
    html: renderPayPage(world, session, file, {
      message: null,
      codeMessage: null,
      code: '',
      ...state,
      typed,
    }),
  };
}

function afterPaying(world: World, id: string, outcome: PayOutcome, typed?: Typed): PageAnswer {
  if (outcome.state === 'paid') return { status: 303, location: successUrlOf(outcome.session) };
  if (outcome.state === 'authenticate') return { status: 303, location: `/c/pay/${id}/authenticate` };
  // 402 for the test's eye; a browser shows the page like any other.
  return showPay(world, id, typed ? { typed, message: outcome.message } : { message: outcome.message }, 402);
}

function postPay(world: World, id: string, form: URLSearchParams): PageAnswer {
  const { session } = openSession(world, id);
  if (session.status !== 'open') return { status: 200, html: renderClosedPage(session) };
  const fields = fieldsOf(form);
  const typed = { ...fields, email: session.customer_email ?? fields.email };
  const country = typed.country || null;
  if (form.get('do') === 'apply-code') {
    chooseCountry(world, id, typed.country);
    return showPay(world, id, {
      typed,
      code: form.get('code') ?? '',
      codeMessage: applyCode(world, id, form.get('code') ?? '', country),
    });
  }
  if (form.get('do') === 'remove-code') removeCode(world, id, country);
  if (form.get('do') === 'remove-code' || form.get('do') === 'update') {
    chooseCountry(world, id, typed.country);
    return showPay(world, id, { typed });
  }
  return afterPaying(world, id, paySession(world, id, typed), typed);
}

function authenticate(world: World, id: string, form: URLSearchParams | null): PageAnswer {
  const { session } = openSession(world, id);
  if (session.status !== 'open') return { status: 200, html: renderClosedPage(session) };
  if (form) return afterPaying(world, id, authenticateSession(world, id, form.get('answer') === 'complete'));
  const intent = session.payment_intent
    ? world.store.get('payment_intent', session.payment_intent)
    : undefined;
  if (intent?.status !== 'requires_action') return { status: 303, location: `/c/pay/${id}` };
  return { status: 200, html: renderAuthenticatePage(session) };
}

function onboard(world: World, token: string, form: URLSearchParams | null): PageAnswer | null {
  const link = world.store.get('account_link', token);
  const account = link && world.store.get('account', link.account);
  if (!link || !account) return null;
  // A link works once and for a short time; afterwards the seller's site is asked for a new one.
  if (link.expiresAt <= now(world)) return { status: 303, location: link.refreshUrl };
  if (form) {
    world.store.put('account_link', token, { ...link, expiresAt: 0 });
    if (form.get('do') === 'complete') completeOnboarding(world, account);
    return { status: 303, location: link.returnUrl };
  }
  return {
    status: 200,
    html: renderSheet(
      'Open a payment account',
      `<p>The payment service asks here for what the law wants to know: who is paid, where, and the bank account. The stand-in asks for nothing.</p>
<p class="small">Account ${e(account.id)}</p>
<form method="post" action="/setup/${e(token)}">
<button class="main" name="do" value="complete">Give everything and open the account</button>
<button class="main" name="do" value="later">Leave it for later</button>
</form>`,
    ),
  };
}

function receipt(world: World, id: string): PageAnswer | null {
  const charge = world.store.get('charge', id);
  if (!charge) return null;
  return {
    status: 200,
    html: renderSheet(
      'Receipt',
      `<p>${e(charge.description ?? charge.id)}: ${charge.amount} ${e(charge.currency)}, ${e(charge.status)}.</p>`,
    ),
  };
}

/** Answers the pages that people see; null for an address that is none. `form` is null for a GET. */
export function answerPage(world: World, path: string, form: URLSearchParams | null): PageAnswer | null {
  const pay = matchPath('/c/pay/:session', path)?.[0];
  const confirm = matchPath('/c/pay/:session/authenticate', path)?.[0];
  const session = pay ?? confirm;
  if (session !== undefined && !world.store.get('checkout.session', session)) return null;
  if (pay !== undefined) return form ? postPay(world, pay, form) : showPay(world, pay, {});
  if (confirm !== undefined) return authenticate(world, confirm, form);
  const token = matchPath('/setup/:token', path)?.[0];
  if (token !== undefined) return onboard(world, token, form);
  const charge = matchPath('/receipts/:charge', path)?.[0];
  return charge === undefined || form ? null : receipt(world, charge);
}
