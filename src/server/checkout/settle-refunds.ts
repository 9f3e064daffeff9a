import { sequelize } from '#db/client.ts';
import { Imprint, Order, OrderLine, Plan, Refund } from '#db/models/index.ts';
import { allocate, splitRefund } from '#lib/money/split.ts';
import { endLicence } from '../licences/grant-licences.ts';
import { payments } from '../payments/client.ts';
import { postLedger } from '../sales/post-ledger.ts';
import { settleOrder } from './settle-order.ts';
import { writeRefundLetter } from './write-receipt.ts';

/** Money that went back, by a refund of ours or by a dispute that the bank decided. */
interface Return {
  id: string;
  kind: 'refund' | 'dispute';
  amountMinor: number;
  reason: string;
  at: Date;
}

async function listReturns(paymentIntentId: string): Promise<Return[]> {
  const refunds = await payments.refunds
    .list({ payment_intent: paymentIntentId, limit: 100 })
    .autoPagingToArray({ limit: 1000 });
  const disputes = await payments.disputes.list({ payment_intent: paymentIntentId, limit: 10 });
  const returned: Return[] = refunds
    .filter((refund) => refund.status === 'succeeded' || refund.status === 'pending')
    .map((refund) => ({
      id: refund.id,
      kind: 'refund',
      amountMinor: refund.amount,
      reason: refund.metadata?.['reason'] ?? refund.reason ?? '',
      at: new Date(refund.created * 1000),
    }));
  for (const dispute of disputes.data) {
    if (dispute.status !== 'lost') continue;
    returned.push({
      id: dispute.id,
      kind: 'dispute',
      amountMinor: dispute.amount,
      reason: dispute.reason,
      at: new Date(dispute.created * 1000),
    });
  }
  return returned.sort((a, b) => a.at.getTime() - b.at.getTime() || a.id.localeCompare(b.id));
}

/**
 * Brings an order in line with what the payment service says was given back. Like `settleOrder` it may run at any time and any
 * number of times: each return is recorded once, under its own id, and an order not yet seen as paid is settled first.
 */
export async function settleRefunds(paymentIntentId: string): Promise<void> {
  const intent = await payments.paymentIntents.retrieve(paymentIntentId);
  const orderId = intent.metadata['order_id'];
  const known = orderId ? await Order.findByPk(orderId) : null;
  if (!known?.checkoutSessionId) return;
  if (!known.paidAt) await settleOrder(known.checkoutSessionId);
  const returned = await listReturns(paymentIntentId);
  await sequelize.transaction(async (transaction) => {
    const order = await Order.findByPk(known.id, {
      transaction,
      lock: transaction.LOCK.UPDATE,
      rejectOnEmpty: true,
    });
    if (!order.paidAt || order.paymentIntentId !== paymentIntentId) return;
    for (const item of returned) {
      if (await Refund.findOne({ where: { paymentRefundId: item.id }, transaction })) continue;
      const amountMinor = Math.min(item.amountMinor, order.totalMinor - order.refundedMinor);
      if (amountMinor <= 0) continue;
      const refund = await Refund.create(
        { orderId: order.id, paymentRefundId: item.id, amountMinor, reason: item.reason, createdAt: item.at },
        { transaction },
      );
      const hasEnded = await giveBack(order, item, amountMinor);
      await writeRefundLetter(order, refund, hasEnded, transaction);
    }

    /** Shares one return out over the lines, in the ledger too; a line refunded in full ends its licence. */
    async function giveBack(paidOrder: Order, item: Return, amountMinor: number): Promise<boolean> {
      const lines = await OrderLine.findAll({
        where: { orderId: paidOrder.id },
        order: [['id', 'ASC']],
        transaction,
      });
      const left = lines.map((line) => line.priceMinor - line.discountMinor - line.refundedMinor);
      const parts = allocate(amountMinor, left);
      let hasEnded = false;
      for (const [index, line] of lines.entries()) {
        const part = parts[index] ?? 0;
        if (part === 0) continue;
        const totalMinor = line.priceMinor - line.discountMinor;
        const plan = await Plan.findByPk(line.planId, { transaction, rejectOnEmpty: true });
        const imprint = await Imprint.findByPk(plan.imprintId, { transaction, rejectOnEmpty: true });
        await postLedger(
          {
            reference: `${item.kind}:${item.id}:${line.id}`,
            kind: item.kind,
            imprintId: imprint.id,
            orderLineId: line.id,
            currency: paidOrder.currency,
            memo: `Order ${paidOrder.number}${item.reason ? `, ${item.reason}` : ''}`,
            happenedAt: item.at,
            split: splitRefund(
              {
                totalMinor,
                taxMinor: line.taxMinor,
                feeMinor: line.feeMinor,
                sharePermille: line.sharePermille,
              },
              line.refundedMinor,
              part,
            ),
          },
          transaction,
        );
        await line.update({ refundedMinor: line.refundedMinor + part }, { transaction });
        if (line.refundedMinor >= totalMinor) {
          await endLicence(line.id, item.kind === 'dispute' ? 'revoked' : 'refunded', transaction);
          hasEnded = true;
        }
      }
      const refundedMinor = paidOrder.refundedMinor + amountMinor;
      await paidOrder.update(
        { refundedMinor, state: refundedMinor >= paidOrder.totalMinor ? 'refunded' : 'partly_refunded' },
        { transaction },
      );
      return hasEnded;
    }
  });
}
