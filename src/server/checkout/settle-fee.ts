import { sequelize } from '#db/client.ts';
import { Imprint, Order, OrderLine, Plan } from '#db/models/index.ts';
import { allocate, splitSale, type LedgerSplit } from '#lib/money/split.ts';
import { payments } from '../payments/client.ts';
import { postLedger } from '../sales/post-ledger.ts';

const minus = (after: LedgerSplit, before: LedgerSplit): LedgerSplit => ({
  clearingMinor: after.clearingMinor - before.clearingMinor,
  feesMinor: after.feesMinor - before.feesMinor,
  taxMinor: after.taxMinor - before.taxMinor,
  imprintMinor: after.imprintMinor - before.imprintMinor,
  houseMinor: after.houseMinor - before.houseMinor,
});

/**
 * Books the payment fee of an order where the payment service named it only after the order was paid. The sale was entered without a fee; this adds the difference,
 * once. An order of which something was given back meanwhile is left alone: the house bears the fee of a refunded sale anyway.
 */
export async function settleFee(chargeId: string): Promise<void> {
  const charge = await payments.charges.retrieve(chargeId, { expand: ['balance_transaction'] });
  const fee = typeof charge.balance_transaction === 'object' ? (charge.balance_transaction?.fee ?? 0) : 0;
  if (fee === 0) return;
  await sequelize.transaction(async (transaction) => {
    const order = await Order.findOne({ where: { chargeId }, transaction, lock: transaction.LOCK.UPDATE });
    if (!order?.paidAt || order.feeMinor !== 0 || order.refundedMinor !== 0) return;
    const lines = await OrderLine.findAll({
      where: { orderId: order.id },
      order: [['id', 'ASC']],
      transaction,
    });
    const paid = lines.map((line) => line.priceMinor - line.discountMinor);
    const fees = allocate(fee, paid);
    for (const [index, line] of lines.entries()) {
      const feeMinor = fees[index] ?? 0;
      const plan = await Plan.findByPk(line.planId, { transaction, rejectOnEmpty: true });
      const imprint = await Imprint.findByPk(plan.imprintId, { transaction, rejectOnEmpty: true });
      const sale = {
        totalMinor: paid[index] ?? 0,
        taxMinor: line.taxMinor,
        sharePermille: line.sharePermille,
      };
      await postLedger(
        {
          reference: `fee:${line.id}`,
          kind: 'adjustment',
          imprintId: imprint.id,
          orderLineId: line.id,
          currency: order.currency,
          memo: `Payment fee of order ${order.number}`,
          happenedAt: new Date(),
          split: minus(splitSale({ ...sale, feeMinor }), splitSale({ ...sale, feeMinor: 0 })),
        },
        transaction,
      );
      await line.update({ feeMinor }, { transaction });
    }
    await order.update({ feeMinor: fee }, { transaction });
  });
}
