import { readdir, readFile } from 'node:fs/promises';
import path from 'node:path';
import type { Imprint } from '#db/models/index.ts';
import { Correction, Plan, Revision } from '#db/models/index.ts';
import type { SignedInUser } from '#server/accounts/actor.ts';
import { createPlan } from '#server/publishing/create-plan.ts';
import { startDraft } from '#server/publishing/get-draft.ts';
import { inviteProofBuilder } from '#server/publishing/invite-proof-builder.ts';
import { proveRevision } from '#server/publishing/prove-revision.ts';
import { publishRevision } from '#server/publishing/publish-revision.ts';
import { saveDraft } from '#server/publishing/save-draft.ts';
import { setPrices, type PriceToSet } from '#server/publishing/set-prices.ts';
import { uploadAsset } from '#server/publishing/upload-asset.ts';
import type { People } from './people.ts';

interface DemoPlan {
  folder: string;
  owner: string;
  imprint: 'lowFell' | 'marram';
  /** Days before today on which revision A came out. */
  daysAgo: number;
  prices: PriceToSet[];
}

const price = (
  kind: 'personal' | 'workshop',
  currency: 'EUR' | 'USD',
  priceMinor: number,
  pieces: number | null = null,
): PriceToSet => ({ kind, currency, priceMinor, pieces });

const PLANS: readonly DemoPlan[] = [
  {
    folder: 'boot-bench',
    owner: 'wenna@benchleaf.example',
    imprint: 'lowFell',
    daysAgo: 212,
    prices: [price('personal', 'EUR', 2400), price('workshop', 'EUR', 9000, 20)],
  },
  {
    folder: 'alcove-shelves',
    owner: 'wenna@benchleaf.example',
    imprint: 'lowFell',
    daysAgo: 160,
    prices: [price('personal', 'EUR', 3900), price('workshop', 'EUR', 14000, 10)],
  },
  {
    folder: 'writing-desk',
    owner: 'rosalind@benchleaf.example',
    imprint: 'marram',
    daysAgo: 190,
    prices: [price('personal', 'USD', 3500), price('workshop', 'USD', 12500, 12)],
  },
  {
    folder: 'toy-chest',
    owner: 'rosalind@benchleaf.example',
    imprint: 'marram',
    daysAgo: 96,
    prices: [price('personal', 'USD', 1900)],
  },
];

export const daysBefore = (days: number) => new Date(Date.now() - days * 86_400_000);

async function publishDraft(actor: SignedInUser, planId: string, notes: string): Promise<Revision> {
  const draft = await Revision.findOne({ where: { planId, state: 'draft' }, rejectOnEmpty: true });
  await proveRevision(draft.id);
  await draft.reload();
  await publishRevision({ actor, planId, version: draft.version, notes });
  return draft.reload();
}

async function writeDraft(actor: SignedInUser, planId: string, source: string): Promise<void> {
  const draft = await Revision.findOne({ where: { planId, state: 'draft' }, rejectOnEmpty: true });
  if (draft.source !== source) await saveDraft({ actor, planId, source, version: draft.version });
}

async function backdate(planId: string, letter: string, at: Date): Promise<void> {
  await Revision.update({ publishedAt: at }, { where: { planId, letter }, silent: true });
}

async function seedPlan(demo: DemoPlan, actor: SignedInUser, imprintId: string): Promise<Plan> {
  const folder = path.resolve('content', 'plans', demo.folder);
  const source = await readFile(path.join(folder, 'plan.mdx'), 'utf8');
  const title = /^title: (.+)$/m.exec(source)?.[1] ?? demo.folder;
  const existing = await Plan.findOne({ where: { imprintId, title } });
  const planId = existing?.id ?? (await createPlan({ actor, imprintId, title })).planId;
  const plan = existing ?? (await Plan.findByPk(planId, { rejectOnEmpty: true }));
  if (plan.state === 'draft') {
    for (const name of (await readdir(folder)).filter((file) => /\.(png|jpe?g|webp)$/.test(file)).sort()) {
      await uploadAsset({ actor, planId, name, bytes: await readFile(path.join(folder, name)) });
    }
    await writeDraft(actor, planId, source);
    await setPrices({ actor, planId, prices: demo.prices });
    await publishDraft(actor, planId, '');
    const at = daysBefore(demo.daysAgo);
    await backdate(planId, 'A', at);
    await Plan.update({ publishedAt: at }, { where: { id: planId } });
  }
  return plan.reload();
}

/** Revision B of the boot bench: the correction that a buyer's question led to. */
async function seedCorrection(plan: Plan, actor: SignedInUser): Promise<void> {
  if (await Revision.count({ where: { planId: plan.id, letter: 'B' } })) return;
  const first = await Revision.findOne({ where: { planId: plan.id, letter: 'A' }, rejectOnEmpty: true });
  await startDraft(actor, plan.id);
  await writeDraft(
    actor,
    plan.id,
    first.source
      .replaceAll('carcass - 10*mm', 'carcass - 12*mm')
      .replace('{10*mm} narrower', '{12*mm} narrower'),
  );
  const second = await publishDraft(
    actor,
    plan.id,
    'The dividers are 12 mm narrower than the sides instead of 10 mm, so that a skirting board clears.',
  );
  await backdate(plan.id, 'B', daysBefore(41));
  await Correction.findOrCreate({
    where: { planId: plan.id, revisionId: first.id },
    defaults: {
      planId: plan.id,
      revisionId: first.id,
      fixedRevisionId: second.id,
      summary: 'The dividers touched a thick skirting board at the back. They are 2 mm narrower now.',
    },
  });
}

/** A plan that is still on the board, with a proof builder invited to it. */
async function seedDraft(people: People, imprintId: string): Promise<void> {
  const title = 'Plate rack for a sloping wall';
  if (await Plan.count({ where: { imprintId, title } })) return;
  const actor = await people.as('wenna@benchleaf.example');
  const { planId } = await createPlan({ actor, imprintId, title });
  await inviteProofBuilder({ actor, planId, email: 'bram@benchleaf.example', headers: new Headers() });
}

/** The plans of the demo, each written, proved, priced and published as an author does it. */
export async function seedPlans(
  people: People,
  imprints: { lowFell: Imprint; marram: Imprint },
): Promise<Map<string, Plan>> {
  const plans = new Map<string, Plan>();
  for (const demo of PLANS) {
    plans.set(demo.folder, await seedPlan(demo, await people.as(demo.owner), imprints[demo.imprint].id));
  }
  const bench = plans.get('boot-bench');
  if (bench) await seedCorrection(bench, await people.as('wenna@benchleaf.example'));
  await seedDraft(people, imprints.lowFell.id);
  return plans;
}
