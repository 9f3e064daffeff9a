import type Stripe from 'stripe';
import { UniqueConstraintError } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { Imprint, Licence, LicenceOffer, Order, OrderLine, Plan, Source } from '#db/models/index.ts';
import { paths } from '#lib/paths.ts';
import type { Actor, SignedInUser } from '../accounts/actor.ts';
import { requireMay, requireUser } from '../accounts/may.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { log } from '../log.ts';
import { payments } from '../payments/client.ts';
import { discountOf, holdCode, requireCode, releaseCode } from './hold-code.ts';

/** What the buyer agrees to before paying, kept with the order in these words. */
export const SUPPLY_CONSENT =
  'I want the licence at once, and know that I lose the right to withdraw from the purchase when the first copy is made. My name is printed on each copy.';

/** How long an unpaid order stays open; the payment service allows 30 minutes to a day. */
const OPEN_MINUTES = 60;

export interface CheckoutRequest {
  actor: Actor;
  offerId: string;
  /** A fit of the buyer's that goes with the purchase. */
  fitId: string | null;
  /** What was typed as a code; empty for none. */
  code: string;
  /** Slug of the tracked link that the buyer came by. */
  sourceSlug: string | null;
  /** Made once for each time the form is shown, so that a double click is one order. */
  requestKey: string;
  hasConsented: boolean;
}

/**
 * Makes an order at the price that stands in the database and opens a payment page for it.
 * Asking again with the same request key gives the same page.
 * @returns the address of the payment page, or of the order when it is paid already
 * @throws SIGN_IN_REQUIRED, NOT_FOR_SALE, ALREADY_OWNED, CODE_REFUSED, PAYMENT_UNAVAILABLE, BAD_INPUT without consent
 */
export async function startCheckout(request: CheckoutRequest): Promise<{ orderId: string; url: string }> {
  const actor = requireUser(request.actor);
  if (!request.hasConsented) {
    refuse('BAD_INPUT', { fields: { consent: 'Confirm this to go on: the licence begins at once.' } });
  }
  const order = await findOrMakeOrder(request, actor);
  if (order.paidAt) return { orderId: order.id, url: paths.order(order.id) };
  if (order.checkoutUrl) return { orderId: order.id, url: order.checkoutUrl };
  return { orderId: order.id, url: await openPaymentPage(order) };
}

async function findOrMakeOrder(request: CheckoutRequest, actor: SignedInUser): Promise<Order> {
  const where = { userId: actor.id, requestKey: request.requestKey };
  const existing = await Order.findOne({ where });
  if (existing) return existing;
  try {
    return await makeOrder(request, actor);
  } catch (error) {
    // The other click of a double click was faster.
    if (!(error instanceof UniqueConstraintError)) throw error;
    const order = await Order.findOne({ where });
    if (!order) throw error;
    return order;
  }
}

async function makeOrder(request: CheckoutRequest, actor: SignedInUser): Promise<Order> {
  return sequelize.transaction(async (transaction) => {
    const offer = await LicenceOffer.findByPk(request.offerId, { transaction });
    const plan = offer && (await Plan.findByPk(offer.planId, { transaction }));
    const imprint = plan && (await Imprint.findByPk(plan.imprintId, { transaction }));
    if (
      !offer?.isActive ||
      plan?.state !== 'published' ||
      !plan.currentRevisionId ||
      imprint?.state !== 'active'
    ) {
      return refuse('NOT_FOR_SALE');
    }
    requireMay(actor, 'checkout:start', { planId: plan.id, imprintId: imprint.id, state: plan.state });
    const owned = await Licence.count({
      where: { userId: actor.id, planId: plan.id, kind: offer.kind, state: 'active' },
      transaction,
    });
    if (owned > 0)
      return refuse('ALREADY_OWNED', { detail: 'You already have this licence; it lies in your drawer.' });

    const target = {
      userId: actor.id,
      imprintId: imprint.id,
      planId: plan.id,
      priceMinor: offer.priceMinor,
      currency: offer.currency,
    };
    const code = request.code.trim() ? await requireCode(request.code, target, transaction) : null;
    const discountMinor = code ? discountOf(code, offer.priceMinor) : 0;
    const source = request.sourceSlug
      ? await Source.findOne({ where: { slug: request.sourceSlug, imprintId: imprint.id }, transaction })
      : null;
    const order = await Order.create(
      {
        userId: actor.id,
        email: actor.email,
        name: actor.name,
        currency: offer.currency,
        subtotalMinor: offer.priceMinor,
        discountMinor,
        totalMinor: offer.priceMinor - discountMinor,
        sourceId: source?.id ?? code?.sourceId ?? null,
        codeId: code?.id ?? null,
        consent: SUPPLY_CONSENT,
        requestKey: request.requestKey,
        expiresAt: new Date(Date.now() + OPEN_MINUTES * 60_000),
      },
      { transaction },
    );
    await OrderLine.create(
      {
        orderId: order.id,
        planId: plan.id,
        revisionId: plan.currentRevisionId,
        offerId: offer.id,
        fitId: request.fitId,
        kind: offer.kind,
        pieces: offer.pieces,
        title: plan.title,
        priceMinor: offer.priceMinor,
        discountMinor,
      },
      { transaction },
    );
    if (code) await holdCode(code, order.id, actor.id, transaction);
    return order;
  });
}

const LICENCE_LABEL = { personal: 'personal licence', workshop: 'workshop licence' } as const;

/** The lines as the payment service wants them; a discount is taken off each line, so that its coupons are not needed. */
function lineItemOf(order: Order, line: OrderLine): Stripe.Checkout.SessionCreateParams.LineItem {
  return {
    quantity: 1,
    price_data: {
      currency: order.currency.toLowerCase(),
      unit_amount: line.priceMinor - line.discountMinor,
      tax_behavior: 'inclusive',
      product_data: {
        name: `${line.title}, ${LICENCE_LABEL[line.kind]}`,
        metadata: { order_line_id: line.id },
      },
    },
  };
}

async function openPaymentPage(order: Order): Promise<string> {
  const lines = await OrderLine.findAll({ where: { orderId: order.id } });
  const orderAddress = new URL(paths.order(order.id), env.SITE_URL).href;
  const session = await payments.checkout.sessions
    .create(
      {
        mode: 'payment',
        client_reference_id: order.id,
        customer_email: order.email,
        line_items: lines.map((line) => lineItemOf(order, line)),
        automatic_tax: { enabled: true },
        billing_address_collection: 'required',
        metadata: { order_id: order.id, order_number: String(order.number) },
        payment_intent_data: {
          metadata: { order_id: order.id },
          description: `Benchleaf order ${order.number}`,
        },
        success_url: orderAddress,
        cancel_url: `${orderAddress}?left=payment`,
        expires_at: Math.floor((order.expiresAt?.getTime() ?? Date.now() + OPEN_MINUTES * 60_000) / 1000),
      },
      // The same order never gets two payment pages, however often this is tried.
      { idempotencyKey: `order-${order.id}` },
    )
    .catch(async (error: unknown) => {
      log.warn({ orderId: order.id, err: error }, 'payment page could not be opened');
      await giveUpIfRefused(order, error);
      return refuse('PAYMENT_UNAVAILABLE', {
        detail: 'The payment service does not answer just now. Nothing was charged. Try again in a minute.',
        cause: error,
      });
    });
  if (!session.url) throw new Error(`payment session ${session.id} came without an address`);
  await order.update({ checkoutSessionId: session.id, checkoutUrl: session.url });
  return session.url;
}

/** An order whose payment page was refused for good gives its code back; one that met silence stays open for another try. */
async function giveUpIfRefused(order: Order, error: unknown): Promise<void> {
  const isRefused =
    typeof error === 'object' &&
    error !== null &&
    'type' in error &&
    error.type === 'StripeInvalidRequestError';
  if (!isRefused) return;
  await sequelize.transaction(async (transaction) => {
    await Order.update({ state: 'failed' }, { where: { id: order.id, state: 'pending' }, transaction });
    await releaseCode(order.id, transaction);
  });
}
