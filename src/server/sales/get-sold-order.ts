import { Order, OrderLine, Plan, Refund, Source, Code, Licence, type OrderState } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { may } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import { listMovements, type Movement } from './list-movements.ts';
import { requireImprint } from './require-imprint.ts';

export interface SoldOrder {
  imprintName: string;
  id: string;
  number: number;
  state: OrderState;
  currency: string;
  totalMinor: number;
  refundedMinor: number;
  paidAt: string | null;
  country: string | null;
  sourceLabel: string | null;
  code: string | null;
  /** The buyer is shown by name only to those who may give money back; a bookkeeper needs none. */
  buyerName: string | null;
  lines: { title: string; kind: 'personal' | 'workshop'; licenceNumber: number | null }[];
  movements: Movement[];
  mayRefund: boolean;
}

/** One sold order as the imprint sees it. @throws NOT_FOUND for an order that holds no plan of the imprint */
export async function getSoldOrder(actor: Actor, imprintSlug: string, orderId: string): Promise<SoldOrder> {
  const imprint = await requireImprint(actor, imprintSlug, 'sales:read');
  const order = await Order.findByPk(orderId, {
    include: [
      {
        model: OrderLine,
        as: 'lines',
        include: [
          { model: Plan, as: 'plan' },
          { model: Licence, as: 'licence' },
        ],
      },
      { model: Refund, as: 'refunds' },
      { model: Source, as: 'source' },
      { model: Code, as: 'code' },
    ],
  });
  const own = (order?.lines ?? []).filter((line) => line.plan?.imprintId === imprint.id);
  if (!order?.paidAt || own.length === 0) return refuse('NOT_FOUND');
  const imprintIds = [...new Set((order.lines ?? []).map((line) => line.plan?.imprintId ?? ''))];
  const mayRefund = may(actor, 'order:refund', { imprintIds });
  const { movements } = await listMovements({
    imprintId: imprint.id,
    orderId: order.id,
    limit: 100,
    order: 'oldest',
  });
  return {
    imprintName: imprint.name,
    id: order.id,
    number: order.number,
    state: order.state,
    currency: order.currency,
    totalMinor: order.totalMinor,
    refundedMinor: order.refundedMinor,
    paidAt: order.paidAt.toISOString(),
    country: order.country,
    sourceLabel: order.source?.label ?? null,
    code: order.code?.code ?? null,
    buyerName: mayRefund ? order.name : null,
    lines: own.map((line) => ({
      title: line.title,
      kind: line.kind,
      licenceNumber: line.licence?.number ?? null,
    })),
    movements,
    mayRefund,
  };
}
