import { randomUUID } from 'node:crypto';
import { inject } from 'vitest';
import { Imprint, ImprintMember, LicenceOffer, Order, Plan, Revision } from '#db/models/index.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import { actAs, makePerson, makeWord, type TestPerson } from './people.ts';

const SOURCE = `---
title: TITLE
summary: A shelf for the tests.
skill: 1
hours: [1, 2]
spaces: [hall]
tools: [saw]
tags: []
---

A shelf.

<Size name="width" label="Width" default="800 mm" min="400 mm" max="1200 mm" step="5 mm" />
<Material name="pine" label="Pine" kind="board" thickness="20 mm" sizes={[[2400*mm, 300*mm]]} species="pine" price="780 EUR/m3" />
<Part mark="A" name="Shelf" material="pine" qty={1} length={width} width={200*mm} />
<Step title="Cut it" parts="A" tools="saw" minutes={5}>
Cut the shelf {A.length} long.
</Step>
`;

export interface ShopPlan {
  imprint: Imprint;
  owner: TestPerson;
  plan: Plan;
  offer: LicenceOffer;
}

/** A published plan with a personal licence at a price, its imprint and owner: as the services leave them. */
export async function makeShopPlan(priceMinor = 2400, title = `Shelf ${makeWord()}`): Promise<ShopPlan> {
  const owner = await makePerson();
  const imprint = await Imprint.create({
    id: randomUUID(),
    slug: `imprint-${makeWord()}`,
    name: `Imprint ${makeWord()}`,
    state: 'active',
  });
  await ImprintMember.create({ imprintId: imprint.id, userId: owner.id, role: 'owner' });
  const source = SOURCE.replace('TITLE', JSON.stringify(title));
  const plan = await Plan.create({
    id: randomUUID(),
    imprintId: imprint.id,
    slug: `plan-${makeWord()}`,
    title,
  });
  const revision = await Revision.create({
    id: randomUUID(),
    planId: plan.id,
    source,
    state: 'published',
    letter: 'A',
    compiled: compilePlan(source).plan,
    publishedAt: new Date(),
  });
  await plan.update({ currentRevisionId: revision.id, state: 'published', publishedAt: new Date() });
  const offer = await LicenceOffer.create({
    id: randomUUID(),
    planId: plan.id,
    kind: 'personal',
    priceMinor,
    currency: 'EUR',
  });
  return { imprint: await imprint.reload(), owner, plan, offer };
}

/** A call to the payment stand-in's control. */
export async function control(path: string, body: Record<string, unknown> = {}): Promise<void> {
  const answer = await fetch(`${inject('services').payments}/_control/${path}`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(body),
  });
  if (!answer.ok) throw new Error(`${path}: ${await answer.text()}`);
}

/** Pays an order as a buyer in Germany does, without a browser; returns its payment session. */
export async function payOrder(orderId: string, country = 'DE'): Promise<string> {
  const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
  const session = order.checkoutSessionId ?? '';
  await control('pay', { session, country, name: order.name });
  return session;
}

/** Somebody who may buy. */
export async function makeBuyer() {
  return actAs(await makePerson());
}
