import { Op } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { Order } from '#db/models/index.ts';
import { log } from '../log.ts';
import { releaseCode } from './hold-code.ts';
import { settleOrder } from './settle-order.ts';

/** How long an order may stay open before the sweep asks after it, in minutes. */
const QUIET_MINUTES = 10;

/**
 * Asks the payment service after orders that have stayed open: a lost webhook leaves no buyer without a licence, and an order that never got
 * a payment page gives its code back.
 */
export async function sweepOrders(): Promise<void> {
  const orders = await Order.findAll({
    where: { state: 'pending', createdAt: { [Op.lt]: new Date(Date.now() - QUIET_MINUTES * 60_000) } },
    order: [['createdAt', 'ASC']],
    limit: 200,
  });
  for (const order of orders) {
    try {
      if (order.checkoutSessionId) await settleOrder(order.checkoutSessionId);
      else if (order.expiresAt && order.expiresAt.getTime() < Date.now()) await giveUp(order.id);
    } catch (error) {
      // The next sweep asks again; one order that cannot be settled must not keep the others waiting.
      log.warn({ orderId: order.id, err: error }, 'an open order could not be settled');
    }
  }
}

async function giveUp(orderId: string): Promise<void> {
  await sequelize.transaction(async (transaction) => {
    const [changed] = await Order.update(
      { state: 'expired' },
      { where: { id: orderId, state: 'pending' }, transaction },
    );
    if (changed > 0) await releaseCode(orderId, transaction);
  });
}
