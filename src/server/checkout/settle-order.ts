import type Stripe from 'stripe';
import { sequelize } from '#db/client.ts';
import { Imprint, Order, OrderLine, Plan } from '#db/models/index.ts';
import { allocate, splitSale } from '#lib/money/split.ts';
import { grantLicences } from '../licences/grant-licences.ts';
import { log } from '../log.ts';
import { payments } from '../payments/client.ts';
import { postLedger } from '../sales/post-ledger.ts';
import { releaseCode, spendCode } from './hold-code.ts';
import { writeReceipt } from './write-receipt.ts';

export type SettleOutcome = 'paid' | 'already-paid' | 'waiting' | 'expired' | 'refused';

/** The whole of what was paid, as the payment service tells it. */
interface Payment {
  totalMinor: number;
  taxMinor: number;
  feeMinor: number;
  country: string | null;
  paymentIntentId: string | null;
  chargeId: string | null;
  paidAt: Date;
}

function readPayment(session: Stripe.Checkout.Session): Payment {
  const intent = typeof session.payment_intent === 'object' ? session.payment_intent : null;
  const charge = intent && typeof intent.latest_charge === 'object' ? intent.latest_charge : null;
  const balance =
    charge && typeof charge.balance_transaction === 'object' ? charge.balance_transaction : null;
  return {
    totalMinor: session.amount_total ?? 0,
    taxMinor: session.total_details?.amount_tax ?? 0,
    feeMinor: balance?.fee ?? 0,
    country: session.customer_details?.address?.country ?? null,
    paymentIntentId: intent?.id ?? null,
    chargeId: charge?.id ?? null,
    paidAt: new Date((charge?.created ?? session.created) * 1000),
  };
}

/**
 * Brings one order in line with the truth that the payment service tells: paid, still open, or run out. It asks the service itself
 * and takes nothing from an event or an address, so it may be called by webhook, by the buyer's return and by the sweep,
 * in any order and any number of times; everything that follows from a payment is written in one transaction, once.
 */
export async function settleOrder(checkoutSessionId: string): Promise<SettleOutcome> {
  const session = await payments.checkout.sessions.retrieve(checkoutSessionId, {
    expand: ['payment_intent.latest_charge.balance_transaction'],
  });
  const orderId = session.client_reference_id;
  const order = orderId && (await Order.findByPk(orderId));
  if (!order || order.checkoutSessionId !== session.id) {
    log.warn({ checkoutSessionId }, 'a payment session belongs to no order of ours');
    return 'refused';
  }
  if (session.status === 'expired') return expireOrder(order.id);
  // A free order says "no payment required" while its page is still open, so the status counts as well.
  if (session.status !== 'complete' || session.payment_status === 'unpaid') return 'waiting';
  if (session.currency?.toUpperCase() !== order.currency || session.amount_total !== order.totalMinor) {
    log.error({ orderId: order.id }, 'amount or currency paid is not what was ordered; no licence was given');
    return 'refused';
  }
  return recordPayment(order.id, readPayment(session));
}

async function expireOrder(orderId: string): Promise<SettleOutcome> {
  await sequelize.transaction(async (transaction) => {
    const [changed] = await Order.update(
      { state: 'expired' },
      { where: { id: orderId, state: 'pending' }, transaction },
    );
    if (changed > 0) await releaseCode(orderId, transaction);
  });
  return 'expired';
}

async function recordPayment(orderId: string, payment: Payment): Promise<SettleOutcome> {
  return sequelize.transaction<SettleOutcome>(async (transaction) => {
    // The row lock makes a webhook and the buyer's return take turns.
    const order = await Order.findByPk(orderId, {
      transaction,
      lock: transaction.LOCK.UPDATE,
      rejectOnEmpty: true,
    });
    if (order.paidAt) return 'already-paid';
    const lines = await OrderLine.findAll({ where: { orderId }, order: [['id', 'ASC']], transaction });
    const paid = lines.map((line) => line.priceMinor - line.discountMinor);
    const taxes = allocate(payment.taxMinor, paid);
    const fees = allocate(payment.feeMinor, paid);

    await order.update(
      {
        state: 'paid',
        taxMinor: payment.taxMinor,
        feeMinor: payment.feeMinor,
        country: payment.country,
        paymentIntentId: payment.paymentIntentId,
        chargeId: payment.chargeId,
        paidAt: payment.paidAt,
      },
      { transaction },
    );
    for (const [index, line] of lines.entries()) {
      const plan = await Plan.findByPk(line.planId, { transaction, rejectOnEmpty: true });
      const imprint = await Imprint.findByPk(plan.imprintId, { transaction, rejectOnEmpty: true });
      const taxMinor = taxes[index] ?? 0;
      await line.update(
        { taxMinor, feeMinor: fees[index] ?? 0, sharePermille: imprint.sharePermille },
        { transaction },
      );
      await postLedger(
        {
          reference: `sale:${line.id}`,
          kind: 'sale',
          imprintId: imprint.id,
          orderLineId: line.id,
          currency: order.currency,
          memo: `Order ${order.number}`,
          happenedAt: payment.paidAt,
          split: splitSale({
            totalMinor: paid[index] ?? 0,
            taxMinor,
            feeMinor: fees[index] ?? 0,
            sharePermille: imprint.sharePermille,
          }),
        },
        transaction,
      );
    }
    const licences = await grantLicences(order, lines, transaction);
    await spendCode(orderId, transaction);
    await writeReceipt(order, lines, licences, transaction);
    return 'paid';
  });
}
