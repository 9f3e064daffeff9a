/**
 * The payment stand-in: the part of the payment service's published HTTP API that Benchleaf uses (API version 2026-10-28.endive), with memory, a hosted payment
 * page and webhooks, so that everything but real money works on one machine. The official SDK speaks to it with only the host changed.
 *
 *   tsx tests/fakes/payments/serve.ts --port 4242 --state .data/payments.jsonl --public-url http://127.0.0.1:4242 \
 *     --webhook-url http://127.0.0.1:4321/api/webhooks/payments --webhook-secret whsec_… [--webhook-events a,b]
 *
 * Each flag may come from the environment instead: PAYMENTS_PORT, PAYMENTS_STATE, PAYMENTS_PUBLIC_URL, PAYMENTS_WEBHOOK_URL, PAYMENTS_WEBHOOK_SECRET,
 * PAYMENTS_WEBHOOK_EVENTS. Tests call `startPayments` of start-payments.ts. It listens on
 * 127.0.0.1 only, takes any key `sk_test_…` and refuses live keys.
 *
 * Pages: /c/pay/:session (pay), /c/pay/:session/authenticate, /setup/:token (open a payment account), /_health.
 * Cards: 4242424242424242 pays, 4000000000000002 declined, 4000000000009995 insufficient funds, 4000000000000069 expired, 4000000000000127 wrong
 * security code, 4000002500003155 asks for authentication, 4000000000000259 is disputed after paying. Any future expiry, any security code.
 *
 * Where it is simpler than the published service: money can be sent on at once; the fee is 2.9 % + 30 minor units in every currency; tax follows the small
 * table in tax-table.ts; prices whose tax behaviour is unspecified count as exclusive; a payout is paid within about a second; parameters that Benchleaf has no use
 * for are refused as unknown; a live clock may be set ahead.
 *
 * Control calls (JSON, POST unless said otherwise; no part of the published API):
 *   /_control/pay        { session, card?, email?, name?, country?, authenticate?: complete|fail|leave } pays without a browser -> { outcome, message, success_url, payment_intent }
 *                        delayed: true completes the session unpaid, as with a bank debit;
 *   /_control/settle     { session, outcome: succeeded|failed } then ends it (checkout.session.async_payment_*)
 *   /_control/expire     { session }
 *   /_control/onboard    { account }                       completes a connected account
 *   /_control/dispute    { dispute, outcome: won|lost }
 *   /_control/payout     { payout, outcome: paid|failed }
 *   /_control/top-up     { amount, currency }              money to send on, without a sale
 *   /_control/clock      { advance: seconds } | { set: unixSeconds } | { reset: true }
 *   /_control/settings   { balanceDelayMs?, payoutOutcome? } until a charge has its fee booked; what becomes of payouts
 *   /_control/endpoint   { url, secret, enabled_events? }  registers a webhook endpoint with a known secret; may be repeated
 *   /_control/webhooks   { action: delay|drop|repeat|reorder|hold, types?: ['charge.*'], times?, delayMs?, count? }   what happens to coming deliveries
 *   /_control/webhooks/clear   {}
 *   /_control/release    { order?: first|last|[event ids or types] } sends what is held, one after the other; ends `hold`
 *   /_control/resend     { event, endpoint? }
 *   /_control/fail       { method?, path, times?, kind?: status|cut-before|cut-after|delay, status?, error?: { type, code, message }, delayMs? }
 *                        after a cut line the SDK tries once more by itself: say times: 2 to have it see one
 *   /_control/fail/clear {}
 *   /_control/reset      {}                                forgets everything, endpoints too
 *   GET /_control/deliveries, GET /_control/state
 */
import { parseArgs } from 'node:util';
import { startPayments } from './start-payments.ts';

const { values } = parseArgs({
  options: {
    port: { type: 'string', default: process.env['PAYMENTS_PORT'] ?? '4242' },
    state: { type: 'string', default: process.env['PAYMENTS_STATE'] ?? '' },
    'public-url': { type: 'string', default: process.env['PAYMENTS_PUBLIC_URL'] ?? '' },
    'webhook-url': { type: 'string', default: process.env['PAYMENTS_WEBHOOK_URL'] ?? '' },
    'webhook-secret': { type: 'string', default: process.env['PAYMENTS_WEBHOOK_SECRET'] ?? '' },
    'webhook-events': { type: 'string', default: process.env['PAYMENTS_WEBHOOK_EVENTS'] ?? '*' },
  },
});

const running = await startPayments({
  port: Number(values.port),
  ...(values.state ? { stateFile: values.state } : {}),
  ...(values['public-url'] ? { publicUrl: values['public-url'] } : {}),
  ...(values['webhook-url'] && values['webhook-secret']
    ? {
        webhook: {
          url: values['webhook-url'],
          secret: values['webhook-secret'],
          enabledEvents: values['webhook-events'].split(','),
        },
      }
    : {}),
});
console.log(`payment stand-in at ${running.url}`);

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => {
    running.close().then(
      () => process.exit(0),
      () => process.exit(1),
    );
  });
}
