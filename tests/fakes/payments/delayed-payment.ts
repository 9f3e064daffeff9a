import { refuse } from './errors.ts';
import { complete, intentOf, openSession, whyNotPayable, type Typed } from './pay-session.ts';
import { confirmIntent } from './payment-intents.ts';
import { reckon } from './session-state.ts';
import type { Session } from './tables.ts';
import { findCard } from './test-cards.ts';
import { emit, required, type World } from './world.ts';

/** Pays an open session by a means whose money takes its time, such as a debit from a bank account: the session is complete and not yet paid. */
export function startDelayedPayment(world: World, id: string, typed: Typed): Session {
  const opened = openSession(world, id);
  const fault =
    opened.session.status === 'open'
      ? whyNotPayable(opened.session, typed)
      : 'This payment is no longer open.';
  if (fault) refuse(fault);
  const { session, file } = reckon(world, opened.session, opened.file, typed.country);
  if (session.amount_total === 0) refuse('There is nothing to pay.');
  const intent = intentOf(world, session, file);
  const processing = world.store.put('payment_intent', intent.id, { ...intent, status: 'processing' });
  emit(world, 'payment_intent.processing', processing);
  return complete(world, session, file, typed, intent.id, true);
}

/** Ends a delayed payment: the money has come, or it will not. */
export function settleDelayedPayment(world: World, id: string, outcome: 'succeeded' | 'failed'): Session {
  const session = required(world, 'checkout.session', id);
  const intent = session.payment_intent
    ? world.store.get('payment_intent', session.payment_intent)
    : undefined;
  const card = findCard(outcome === 'succeeded' ? 'pm_card_visa' : 'pm_card_chargeDeclined');
  if (intent?.status !== 'processing' || !card) return refuse('This session waits for no delayed payment.');
  const details = session.customer_details;
  confirmIntent(world, intent, card, {
    email: details?.email ?? null,
    name: details?.name ?? null,
    country: details?.address?.country ?? null,
  });
  const settled: Session = { ...session, payment_status: outcome === 'succeeded' ? 'paid' : 'unpaid' };
  world.store.put('checkout.session', id, settled);
  emit(world, `checkout.session.async_payment_${outcome}`, settled);
  return settled;
}
