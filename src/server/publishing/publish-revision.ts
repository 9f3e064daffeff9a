import { sequelize } from '#db/client.ts';
import { Asset, Imprint, LicenceOffer, Plan, Revision } from '#db/models/index.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import type { CompiledPlan } from '#lib/plan/types.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { enqueue } from '../jobs/enqueue.ts';
import { letterAfter, requireDraftPlan } from './get-draft.ts';
import type { ProofRecord } from '#lib/plan/proof-record.ts';
import { hashSource } from './hash-source.ts';
import { publicPictures, publicStory, storyText } from './public-story.ts';

/** One thing that must be in order before a plan is published, and whether it is. */
export interface PublishCheck {
  name: 'compiles' | 'pictures' | 'proof' | 'price' | 'imprint';
  holds: boolean;
  sentence: string;
}

/** Names of the pictures that a plan's text uses. */
export function picturesOf(plan: CompiledPlan): string[] {
  const names = plan.declarations.flatMap((declaration) =>
    declaration.type === 'figure' ? [declaration.src] : [],
  );
  return [...new Set([...(plan.front.cover ? [plan.front.cover] : []), ...names, ...publicPictures(plan)])];
}

/** What stands in the way of publishing, line by line, in the order in which a person would mend it. */
export function checkForPublishing(facts: {
  source: string;
  assetNames: readonly string[];
  proof: ProofRecord | null;
  hasOffer: boolean;
  isImprintActive: boolean;
}): { checks: PublishCheck[]; compiled: CompiledPlan | null } {
  const { plan, problems } = compilePlan(facts.source);
  const errors = problems.filter((problem) => problem.severity === 'error').length;
  const missing = plan ? picturesOf(plan).filter((name) => !facts.assetNames.includes(name)) : [];
  const isProven = facts.proof?.state === 'holds' && facts.proof.sourceHash === hashSource(facts.source);
  const checks: PublishCheck[] = [
    {
      name: 'compiles',
      holds: plan !== null && errors === 0,
      sentence:
        errors === 0 && plan
          ? 'The text has no problems.'
          : `The text has ${errors} ${errors === 1 ? 'problem' : 'problems'} to mend.`,
    },
    {
      name: 'pictures',
      holds: missing.length === 0,
      sentence:
        missing.length === 0
          ? 'All pictures are there.'
          : `Pictures are missing: ${missing.slice(0, 5).join(', ')}.`,
    },
    {
      name: 'proof',
      holds: isProven,
      sentence: isProven
        ? 'The range proof holds for this text.'
        : facts.proof?.state === 'fails'
          ? 'The range proof found sizes at which the plan fails.'
          : 'This text has not been through the range proof yet.',
    },
    {
      name: 'price',
      holds: facts.hasOffer,
      sentence: facts.hasOffer ? 'A price is set.' : 'No licence has a price yet.',
    },
    {
      name: 'imprint',
      holds: facts.isImprintActive,
      sentence: facts.isImprintActive
        ? 'The imprint is admitted.'
        : 'The imprint has not been admitted by the publisher yet.',
    },
  ];
  return { checks, compiled: plan };
}

/** The checks for the draft that lies on the board now. @throws NOT_FOUND, FORBIDDEN, CONFLICT without a draft */
export async function listPublishChecks(actor: Actor, planId: string): Promise<PublishCheck[]> {
  const plan = await requireDraftPlan(actor, planId);
  const draft = await Revision.findOne({ where: { planId, state: 'draft' } });
  if (!draft) return refuse('CONFLICT', { detail: 'There is no draft to publish.' });
  return (await gatherChecks(plan, draft)).checks;
}

async function gatherChecks(plan: Plan, draft: Revision): Promise<ReturnType<typeof checkForPublishing>> {
  const [assets, offers, imprint] = await Promise.all([
    Asset.findAll({ where: { revisionId: draft.id }, attributes: ['name'] }),
    LicenceOffer.count({ where: { planId: plan.id, isActive: true } }),
    Imprint.findByPk(plan.imprintId, { rejectOnEmpty: true }),
  ]);
  return checkForPublishing({
    source: draft.source,
    assetNames: assets.map((asset) => asset.name),
    proof: draft.proof,
    hasOffer: offers > 0,
    isImprintActive: imprint.state === 'active',
  });
}

/**
 * Freezes the draft as the next revision and puts it in the plan chest. The earlier revision is superseded; everybody who holds a
 * licence is told by a job what changed for the sizes they chose.
 * @throws PLAN_HAS_PROBLEMS naming what stands in the way, CONFLICT when the draft changed since the page was shown
 */
export async function publishRevision(options: {
  actor: Actor;
  planId: string;
  version: number;
  notes: string;
}): Promise<{ letter: string }> {
  const { actor, planId } = options;
  const plan = await requireDraftPlan(actor, planId);
  requireMay(actor, 'plan:publish', { imprintId: plan.imprintId });
  return sequelize.transaction(async (transaction) => {
    // One publication of a plan at a time: the second waits here and then finds no draft.
    await Plan.findByPk(planId, { transaction, lock: transaction.LOCK.UPDATE });
    const draft = await Revision.findOne({ where: { planId, state: 'draft' }, transaction });
    if (!draft || draft.version !== options.version) {
      return refuse('CONFLICT', {
        detail: 'The draft was changed or published meanwhile. Load the page again and look it over.',
      });
    }
    const { checks, compiled } = await gatherChecks(plan, draft);
    const open = checks.filter((check) => !check.holds);
    if (open.length > 0 || !compiled) {
      return refuse('PLAN_HAS_PROBLEMS', { detail: open.map((check) => check.sentence).join(' ') });
    }
    const previous = await Revision.findOne({ where: { planId, state: 'published' }, transaction });
    const last = await Revision.findOne({
      where: { planId, state: ['published', 'superseded'] },
      order: [['publishedAt', 'DESC']],
      transaction,
    });
    const letter = letterAfter(last?.letter ?? null);
    const now = new Date();
    if (previous) await previous.update({ state: 'superseded' }, { transaction });
    await draft.update(
      { state: 'published', letter, compiled, publishedAt: now, notes: options.notes.trim() },
      { transaction },
    );
    const openPictures = publicPictures(compiled);
    await Asset.update(
      { isPublic: true },
      { where: { revisionId: draft.id, name: [...openPictures] }, transaction },
    );
    const { front } = compiled;
    await plan.update(
      {
        title: front.title,
        summary: front.summary,
        skill: front.skill,
        hoursLow: front.hours[0],
        hoursHigh: front.hours[1],
        spaces: front.spaces,
        tags: front.tags,
        story: storyText(publicStory(compiled)),
        state: 'published',
        currentRevisionId: draft.id,
        publishedAt: plan.publishedAt ?? now,
      },
      { transaction },
    );
    await writeAudit(
      { actor, action: 'plan:publish', thing: { kind: 'plan', id: plan.id }, details: { letter } },
      transaction,
    );
    if (previous)
      await enqueue(
        'announce-revision',
        { revisionId: draft.id },
        { key: `announce:${draft.id}`, transaction },
      );
    return { letter };
  });
}

/** Takes a plan out of the plan chest; licences stay good. @throws NOT_FOUND, FORBIDDEN */
export async function unpublishPlan(actor: Actor, planId: string): Promise<void> {
  const plan = await Plan.findByPk(planId);
  if (!plan) return refuse('NOT_FOUND');
  requireMay(actor, 'plan:unpublish', { imprintId: plan.imprintId });
  await plan.update({ state: 'unpublished' });
  await writeAudit({ actor, action: 'plan:unpublish', thing: { kind: 'plan', id: planId } });
}
