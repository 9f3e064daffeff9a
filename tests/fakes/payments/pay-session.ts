import { minimumOf, printAmount } from './currencies.ts';
import { createCustomer, fullAddress } from './customers.ts';
import { countRedemption, whyNotUsable } from './discounts.ts';
import { refuse } from './errors.ts';
import {
  cancelIntent,
  confirmIntent,
  createIntent,
  failAuthentication,
  type ConfirmOutcome,
} from './payment-intents.ts';
import { emptyDetails, expireOverdue, reckon } from './session-state.ts';
import { isEmail } from './params.ts';
import type { PaymentIntent, Session, SessionFile } from './tables.ts';
import { COUNTRIES } from './tax-table.ts';
import { findCard } from './test-cards.ts';
import { totalUp } from './totals.ts';
import { emit, required, type World } from './world.ts';

export interface Typed {
  email: string;
  name: string;
  country: string;
  card: string;
  expiry: string;
  cvc: string;
  hasAgreed: boolean;
  wantsNews: boolean;
}

export type PayOutcome =
  | { state: 'paid'; session: Session }
  | { state: 'authenticate'; session: Session }
  | { state: 'refused'; session: Session; message: string };

/** An open session and its file, after time has been looked at. */
export function openSession(world: World, id: string): { session: Session; file: SessionFile } {
  expireOverdue(world);
  const session = required(world, 'checkout.session', id);
  return { session, file: required(world, 'session_file', id) };
}

/** What is wrong with what was typed, in a sentence; null when nothing is. */
export function whyNotPayable(session: Session, typed: Typed): string | null {
  if (!isEmail(typed.email)) return 'Give an e-mail address for the receipt.';
  if (typed.name.trim() === '') return 'Give the name on the card.';
  if (!Object.hasOwn(COUNTRIES, typed.country)) return 'Choose a country.';
  if (session.consent_collection?.terms_of_service === 'required' && !typed.hasAgreed)
    return 'Agree to the terms to go on.';
  if (session.amount_total === 0) return null;
  if (!findCard(typed.card)) return 'Only the published test cards work here; no real card may be used.';
  const expiry = /^(\d{1,2})\s*\/\s*(?:20)?(\d{2})$/.exec(typed.expiry.trim());
  if (!expiry || Number(expiry[1]) < 1 || Number(expiry[1]) > 12)
    return 'Write the expiry as month and year, such as 12 / 34.';
  const end = new Date(Date.UTC(2000 + Number(expiry[2]), Number(expiry[1])));
  if (end.getTime() <= Date.now()) return "Your card's expiration date is in the past.";
  if (!/^\d{3,4}$/.test(typed.cvc.trim())) return 'Write the three or four figures of the security code.';
  return null;
}

/** Puts a promotion code on an open session; returns why it cannot be, or null. */
export function applyCode(
  world: World,
  id: string,
  typedCode: string,
  country: string | null,
): string | null {
  const { session, file } = openSession(world, id);
  if (session.status !== 'open') return 'This payment is no longer open.';
  if (!session.allow_promotion_codes) return 'This payment takes no promotion codes.';
  const wanted = typedCode.trim().toUpperCase();
  const code = world.store
    .all('promotion_code')
    .find((row) => row.code.toUpperCase() === wanted && row.active);
  const coupon = code && world.store.get('coupon', code.promotion.coupon);
  const subtotal = totalUp(file.lines, null, null).subtotal;
  if (!code || !coupon || (code.customer !== null && code.customer !== session.customer))
    return 'This promotion code does not exist.';
  const fault = whyNotUsable(world, coupon, code, subtotal, session.currency ?? '');
  if (fault) return fault;
  const discount = { coupon: coupon.id, promotionCode: code.id };
  const total = totalUp(file.lines, coupon, session.automatic_tax.enabled ? country : null).total;
  const minimum = minimumOf(session.currency ?? '');
  if (total > 0 && total < minimum) {
    return `With this code less than ${printAmount(minimum, session.currency ?? '')} is left, which is too little for a card.`;
  }
  reckon(world, session, { ...file, discount }, country);
  return null;
}

/** Takes a typed promotion code off again. */
export function removeCode(world: World, id: string, country: string | null): void {
  const { session, file } = openSession(world, id);
  if (session.status === 'open' && session.allow_promotion_codes)
    reckon(world, session, { ...file, discount: null }, country);
}

/** Works the totals out for the country that the buyer has chosen. */
export function chooseCountry(world: World, id: string, country: string): Session {
  const { session, file } = openSession(world, id);
  if (session.status !== 'open' || !Object.hasOwn(COUNTRIES, country)) return session;
  return reckon(world, session, file, country).session;
}

/** The payment intent of a session, made at the first try to pay. */
export function intentOf(world: World, session: Session, file: SessionFile): PaymentIntent {
  const old = session.payment_intent ? world.store.get('payment_intent', session.payment_intent) : undefined;
  const amount = session.amount_total ?? 0;
  // An intent from a try that failed is taken again; the amount may have changed with the country.
  if (old) return world.store.put('payment_intent', old.id, { ...old, amount });
  return createIntent(world, {
    amount,
    currency: session.currency ?? 'usd',
    customer: session.customer,
    description: file.intentData.description,
    metadata: file.intentData.metadata,
    receiptEmail: file.intentData.receiptEmail,
    statementDescriptor: file.intentData.statementDescriptor,
    transferGroup: file.intentData.transferGroup,
    captureMethod: file.intentData.captureMethod,
  });
}

/** The discount may have been used up by others since it was put on. */
function whyDiscountFails(world: World, session: Session, file: SessionFile): string | null {
  const coupon = file.discount && world.store.get('coupon', file.discount.coupon);
  if (!file.discount) return null;
  if (!coupon) return 'The discount no longer exists.';
  const code = file.discount.promotionCode
    ? (world.store.get('promotion_code', file.discount.promotionCode) ?? null)
    : null;
  return whyNotUsable(world, coupon, code, session.amount_subtotal ?? 0, session.currency ?? '');
}

/** Pays an open session with what the buyer typed. */
export function paySession(world: World, id: string, typed: Typed): PayOutcome {
  const opened = openSession(world, id);
  if (opened.session.status !== 'open') {
    return { state: 'refused', session: opened.session, message: 'This payment is no longer open.' };
  }
  const fault = whyNotPayable(opened.session, typed) ?? whyDiscountFails(world, opened.session, opened.file);
  if (fault) return { state: 'refused', session: opened.session, message: fault };
  const { session, file } = reckon(world, opened.session, opened.file, typed.country);
  if (session.amount_total === 0)
    return { state: 'paid', session: complete(world, session, file, typed, null) };
  const intent = intentOf(world, session, file);
  const linked = world.store.put('checkout.session', id, { ...session, payment_intent: intent.id });
  const card = findCard(typed.card);
  if (!card) throw new Error('the card was checked before');
  const outcome = confirmIntent(world, intent, card, {
    email: typed.email,
    name: typed.name,
    country: typed.country,
  });
  return finish(
    world,
    linked,
    { ...file, attempt: { email: typed.email, name: typed.name, country: typed.country, card: card.number } },
    typed,
    outcome,
  );
}

function finish(
  world: World,
  session: Session,
  file: SessionFile,
  typed: Typed,
  outcome: ConfirmOutcome,
): PayOutcome {
  world.store.put('session_file', session.id, file);
  if (outcome.state === 'declined') return { state: 'refused', session, message: outcome.message };
  if (outcome.state === 'authenticate') return { state: 'authenticate', session };
  return { state: 'paid', session: complete(world, session, file, typed, outcome.intent.id) };
}

/** Completes a session with what was typed; a delayed payment leaves it unpaid for now. */
export function complete(
  world: World,
  session: Session,
  file: SessionFile,
  typed: Typed,
  intentId: string | null,
  isDelayed = false,
): Session {
  const address = fullAddress({ country: typed.country });
  let customer = session.customer;
  if (!customer && session.customer_creation === 'always') {
    customer = createCustomer(world, { email: typed.email, name: typed.name, address }).id;
    const intent = intentId ? world.store.get('payment_intent', intentId) : undefined;
    if (intent) world.store.put('payment_intent', intent.id, { ...intent, customer });
  }
  if (file.discount) countRedemption(world, file.discount);
  world.store.put('session_file', session.id, { ...file, attempt: null });
  const done = world.store.put('checkout.session', session.id, {
    ...session,
    consent: session.consent_collection
      ? {
          promotions:
            session.consent_collection.promotions === 'auto'
              ? typed.wantsNews
                ? 'opt_in'
                : 'opt_out'
              : null,
          terms_of_service: session.consent_collection.terms_of_service === 'required' ? 'accepted' : null,
        }
      : null,
    customer,
    customer_details: { ...emptyDetails(typed.email, typed.name), address },
    payment_intent: intentId,
    payment_status: isDelayed ? 'unpaid' : intentId ? 'paid' : 'no_payment_required',
    status: 'complete',
    url: null,
  });
  emit(world, 'checkout.session.completed', done);
  return done;
}

/** The buyer's answer to the bank on the authentication page. */
export function authenticateSession(world: World, id: string, hasConfirmed: boolean): PayOutcome {
  const { session, file } = openSession(world, id);
  const intent = session.payment_intent
    ? world.store.get('payment_intent', session.payment_intent)
    : undefined;
  const { attempt } = file;
  if (session.status !== 'open' || intent?.status !== 'requires_action' || !attempt) {
    return { state: 'refused', session, message: 'There is nothing to confirm for this payment.' };
  }
  if (!hasConfirmed) return { state: 'refused', session, message: failAuthentication(world, intent).message };
  const card = findCard(attempt.card) ?? refuse('The card is no longer known.');
  const typed: Typed = { ...attempt, expiry: '', cvc: '', hasAgreed: true, wantsNews: false };
  return finish(world, session, file, typed, confirmIntent(world, intent, card, attempt, true));
}

/** Gives up intents of sessions that ended unpaid, as published. */
export function cancelAbandoned(world: World): void {
  for (const session of world.store.all('checkout.session')) {
    const intent =
      session.status === 'expired' && session.payment_intent
        ? world.store.get('payment_intent', session.payment_intent)
        : undefined;
    if (intent && intent.status !== 'canceled' && intent.status !== 'succeeded')
      cancelIntent(world, intent, 'abandoned');
  }
}

/** Address to which the buyer goes after paying. */
export function successUrlOf(session: Session): string {
  return (session.success_url ?? '').replaceAll('{CHECKOUT_SESSION_ID}', session.id);
}
