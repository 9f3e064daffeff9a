import { Licence, Order, OrderLine, Plan, Refund, type OrderState } from '#db/models/index.ts';
import { Op } from 'sequelize';
import type { Actor } from '../accounts/actor.ts';
import { requireMay, requireUser } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import { log } from '../log.ts';
import { settleOrder } from './settle-order.ts';

export interface OrderView {
  id: string;
  number: number;
  state: OrderState;
  currency: string;
  subtotalMinor: number;
  discountMinor: number;
  taxMinor: number;
  totalMinor: number;
  refundedMinor: number;
  createdAt: string;
  paidAt: string | null;
  /** Where an unpaid order can still be paid. */
  checkoutUrl: string | null;
  lines: {
    title: string;
    slug: string;
    kind: 'personal' | 'workshop';
    priceMinor: number;
    licenceId: string | null;
    licenceNumber: number | null;
    isActive: boolean;
  }[];
  refunds: { amountMinor: number; reason: string; at: string }[];
}

function viewOrder(order: Order): OrderView {
  return {
    id: order.id,
    number: order.number,
    state: order.state,
    currency: order.currency,
    subtotalMinor: order.subtotalMinor,
    discountMinor: order.discountMinor,
    taxMinor: order.taxMinor,
    totalMinor: order.totalMinor,
    refundedMinor: order.refundedMinor,
    createdAt: order.createdAt.toISOString(),
    paidAt: order.paidAt?.toISOString() ?? null,
    checkoutUrl: order.state === 'pending' ? order.checkoutUrl : null,
    lines: (order.lines ?? []).map((line) => ({
      title: line.title,
      slug: line.plan?.slug ?? '',
      kind: line.kind,
      priceMinor: line.priceMinor,
      licenceId: line.licence?.id ?? null,
      licenceNumber: line.licence?.number ?? null,
      isActive: line.licence?.state === 'active',
    })),
    refunds: (order.refunds ?? []).map((refund) => ({
      amountMinor: refund.amountMinor,
      reason: refund.reason,
      at: refund.createdAt.toISOString(),
    })),
  };
}

const WHOLE = [
  {
    model: OrderLine,
    as: 'lines',
    include: [
      { model: Plan, as: 'plan', attributes: ['slug'] },
      { model: Licence, as: 'licence' },
    ],
  },
  { model: Refund, as: 'refunds' },
];

/**
 * An order for its buyer. One that is still unpaid is first brought in line with the payment service, so that a late webhook never makes a buyer wait.
 * @throws SIGN_IN_REQUIRED, NOT_FOUND for another's order
 */
export async function getOrder(actor: Actor, orderId: string): Promise<OrderView> {
  requireUser(actor);
  const order = await Order.findByPk(orderId, { include: WHOLE });
  if (!order) return refuse('NOT_FOUND');
  requireMay(actor, 'order:read', order);
  if (order.state !== 'pending' || !order.checkoutSessionId) return viewOrder(order);
  try {
    await settleOrder(order.checkoutSessionId);
  } catch (error) {
    // The page still shows the order as it stands here; the webhook or the next visit settles it.
    log.warn({ orderId, err: error }, 'payment service did not answer');
  }
  return viewOrder(await Order.findByPk(orderId, { include: WHOLE, rejectOnEmpty: true }));
}

const PAGE = 20;

/** A buyer's orders, newest first; `after` is the number of the last one seen. */
export async function listOrders(
  actor: Actor,
  after?: number,
): Promise<{ orders: OrderView[]; next: number | null }> {
  const user = requireUser(actor);
  const orders = await Order.findAll({
    where: { userId: user.id, ...(after ? { number: { [Op.lt]: after } } : {}) },
    include: WHOLE,
    order: [['number', 'DESC']],
    limit: PAGE + 1,
  });
  const shown = orders.slice(0, PAGE);
  return { orders: shown.map(viewOrder), next: orders.length > PAGE ? (shown.at(-1)?.number ?? null) : null };
}
