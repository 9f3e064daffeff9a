import {
  Code,
  Imprint,
  Licence,
  LicenceOffer,
  Order,
  OrderLine,
  Source,
  type Plan,
} from '#db/models/index.ts';
import { env } from '#server/env.ts';
import { refundOrder } from '#server/checkout/refund-order.ts';
import { settleOrder } from '#server/checkout/settle-order.ts';
import { startCheckout } from '#server/checkout/start-checkout.ts';
import { createCode } from '#server/sales/manage-codes.ts';
import { createSource } from '#server/sales/manage-sources.ts';
import { daysBefore } from './plans.ts';
import type { People } from './people.ts';

/** A call to the payment stand-in's control, which the real service does not have. */
async function control(path: string, body: Record<string, unknown>): Promise<void> {
  const answer = await fetch(`${env.STRIPE_API_BASE ?? ''}/_control/${path}`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(body),
  });
  if (!answer.ok) throw new Error(`payment stand-in refused ${path}: ${await answer.text()}`);
}

/** Numbers that look like chance and are the same on every run (mulberry32). */
function createDice(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
}

const COUNTRIES = ['DE', 'FR', 'GB', 'NL', 'SE', 'IE', 'US', 'CA'];
const REFUNDS = new Map([
  [7, 'full'],
  [19, 'part'],
  [30, 'full'],
]);

async function seedLinksAndCodes(
  people: People,
  imprints: { lowFell: Imprint; marram: Imprint },
): Promise<void> {
  const wenna = await people.as('wenna@benchleaf.example');
  const rosalind = await people.as('rosalind@benchleaf.example');
  const links = [
    { actor: wenna, imprint: imprints.lowFell, label: 'Hall build video', kind: 'video' },
    { actor: wenna, imprint: imprints.lowFell, label: 'Winter letter', kind: 'newsletter' },
    { actor: rosalind, imprint: imprints.marram, label: 'Desk in a weekend', kind: 'video' },
  ] as const;
  for (const { actor, imprint, label, kind } of links) {
    if (!(await Source.count({ where: { imprintId: imprint.id, label } })))
      await createSource({ actor, imprintSlug: imprint.slug, label, kind });
  }
  const codes = [
    { actor: wenna, imprint: imprints.lowFell, code: 'PATRON20', percentOff: 20, note: 'for patrons' },
    { actor: rosalind, imprint: imprints.marram, code: 'CLASS-10', percentOff: 10, note: 'evening class' },
  ];
  for (const { actor, imprint, code, percentOff, note } of codes) {
    if (await Code.count({ where: { code } })) continue;
    await createCode({
      actor,
      imprintSlug: imprint.slug,
      code,
      percentOff,
      planId: null,
      maxUses: 100,
      endsAt: null,
      note,
    });
  }
}

/** What is bought by whom and when, in the order of time. */
function planPurchases(
  plans: readonly Plan[],
  buyers: readonly string[],
): {
  plan: Plan;
  buyer: string;
  daysAgo: number;
  isWorkshop: boolean;
  hasLink: boolean;
  hasCode: boolean;
  country: string;
}[] {
  const dice = createDice(20_261_201);
  const pairs = buyers.flatMap((buyer) =>
    plans.flatMap((plan) => [
      { buyer, plan, isWorkshop: false },
      { buyer, plan, isWorkshop: true },
    ]),
  );
  return (
    pairs
      .map((pair) => ({
        ...pair,
        draw: dice(),
        daysAgo: 2 + Math.floor(dice() * 178),
        hasLink: dice() < 0.55,
        hasCode: dice() < 0.2,
        country: COUNTRIES[Math.floor(dice() * COUNTRIES.length)] ?? 'DE',
      }))
      // Two of the buyers who are signed in as leave something to buy.
      .filter((item) => !item.isWorkshop || item.draw < 0.35)
      .filter((item) => !(item.buyer === buyers[0] && item.plan.slug.startsWith('alcove')))
      .sort((a, b) => b.daysAgo - a.daysAgo)
  );
}

/** Orders over half a year, paid on the stand-in at their own dates; some given back, one paid out. */
export async function seedOrders(
  people: People,
  imprints: { lowFell: Imprint; marram: Imprint },
  plans: readonly Plan[],
): Promise<void> {
  await seedLinksAndCodes(people, imprints);
  const sources = await Source.findAll();
  const purchases = planPurchases(plans, people.buyers);
  const actors = new Map<string, Awaited<ReturnType<People['as']>>>();
  // The site is not up yet: its orders are settled here, and nothing need be told to it.
  await control('webhooks', { action: 'drop', types: ['*'], times: 1_000 });
  try {
    for (const [index, item] of purchases.entries()) {
      const requestKey = `demo-order-${String(index)}`;
      const offer = await LicenceOffer.findOne({
        where: { planId: item.plan.id, kind: item.isWorkshop ? 'workshop' : 'personal', isActive: true },
      });
      const published = item.plan.publishedAt ?? new Date();
      const at = new Date(Math.max(daysBefore(item.daysAgo).getTime(), published.getTime() + 86_400_000));
      if (!offer || at.getTime() > Date.now()) continue;
      const actor = actors.get(item.buyer) ?? (await people.as(item.buyer));
      actors.set(item.buyer, actor);
      const known = await Order.findOne({ where: { userId: actor.id, requestKey } });
      if (known?.paidAt) continue;
      const source = item.hasLink
        ? sources.find((each) => each.imprintId === item.plan.imprintId)
        : undefined;
      const code =
        item.hasCode && !known ? (item.plan.imprintId === imprints.lowFell.id ? 'PATRON20' : 'CLASS-10') : '';
      const used = code
        ? await Order.count({
            where: { userId: actor.id },
            include: [{ model: Code, as: 'code', where: { code } }],
          })
        : 0;
      const { orderId } = await startCheckout({
        actor,
        offerId: offer.id,
        fitId: null,
        code: used ? '' : code,
        sourceSlug: source?.slug ?? null,
        requestKey,
        hasConsented: true,
      });
      await payAt(orderId, at, item.country);
      const refund = REFUNDS.get(index);
      if (refund)
        await refundAt(
          people,
          item.plan,
          orderId,
          new Date(at.getTime() + 3 * 86_400_000),
          refund === 'part',
        );
    }
  } finally {
    await control('clock', { reset: true });
    await control('webhooks/clear', {});
  }
}

async function payAt(orderId: string, at: Date, country: string): Promise<void> {
  const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
  const session = order.checkoutSessionId ?? '';
  await control('clock', { set: Math.floor(at.getTime() / 1000) });
  await control('pay', { session, country, name: order.name });
  await control('clock', { reset: true });
  const outcome = await settleOrder(session);
  if (outcome !== 'paid') throw new Error(`order ${String(order.number)} of the demo is ${outcome}`);
  await Order.update({ createdAt: at }, { where: { id: orderId }, silent: true });
  const lines = await OrderLine.findAll({ where: { orderId }, attributes: ['id'] });
  await Licence.update({ grantedAt: at }, { where: { orderLineId: lines.map((line) => line.id) } });
}

async function refundAt(
  people: People,
  plan: Plan,
  orderId: string,
  at: Date,
  isPart: boolean,
): Promise<void> {
  const owner = await Imprint.findByPk(plan.imprintId, { rejectOnEmpty: true });
  const actor = await people.as(
    owner.name === 'Marram Bench' ? 'rosalind@benchleaf.example' : 'wenna@benchleaf.example',
  );
  const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
  await control('clock', { set: Math.floor(Math.min(at.getTime(), Date.now()) / 1000) });
  await refundOrder({
    actor,
    orderId,
    reason: isPart ? 'one page was missing in the first copy' : 'bought twice by mistake',
    requestKey: `demo-refund-${orderId}`,
    ...(isPart ? { amountMinor: Math.floor(order.totalMinor / 3) } : {}),
  });
  await control('clock', { reset: true });
}
