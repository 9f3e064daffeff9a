import { Op } from 'sequelize';
import { Copy, Licence, Plan, Revision, SavedFit, User } from '#db/models/index.ts';
import { comparePlans, type PlanChange } from '#lib/plan/compare.ts';
import { defaultFit } from '#lib/plan/check-fit.ts';
import type { CompiledPlan, Fit } from '#lib/plan/types.ts';
import { paths } from '#lib/paths.ts';
import { env } from '../env.ts';
import { writeEmail } from '../mail/write-email.ts';
import { getCompiledPlan } from './get-compiled-plan.ts';

/** As many changes as a mail lists; the page of the licence has the whole plan. */
const MAX_LISTED = 12;

/** The fit that a holder cares about most: that of the latest copy, else the latest saved one, else the plan's defaults. */
async function findFit(licence: Licence, before: CompiledPlan): Promise<Fit> {
  const copy = await Copy.findOne({ where: { licenceId: licence.id }, order: [['number', 'DESC']] });
  if (copy) return copy.fit;
  const saved = await SavedFit.findOne({
    where: { userId: licence.userId ?? '', planId: licence.planId },
    order: [['updatedAt', 'DESC']],
  });
  return saved
    ? { values: saved.values, measured: saved.measured, units: saved.units, prices: saved.prices }
    : defaultFit(before, 'mm');
}

function tell(changes: readonly PlanChange[]): string[] {
  if (changes.length === 0) return ['Nothing changes at the sizes you chose: what you have cut still holds.'];
  const listed = changes.slice(0, MAX_LISTED).map((change) => change.sentence);
  const more = changes.length - listed.length;
  return [
    'This is what changes at the sizes you chose:',
    ...listed,
    ...(more > 0 ? [`and ${more} more.`] : []),
  ];
}

/**
 * Writes to everybody who holds a licence of a plan what a new revision changes for the sizes they chose, or that nothing does.
 * Safe to run again: each licence gets one letter a revision.
 */
export async function announceRevision(revisionId: string): Promise<void> {
  const revision = await Revision.findByPk(revisionId, { include: [{ model: Plan, as: 'plan' }] });
  if (!revision?.plan || !revision.publishedAt) return;
  const earlier = await Revision.findOne({
    where: { planId: revision.planId, state: 'superseded', publishedAt: { [Op.lt]: revision.publishedAt } },
    order: [['publishedAt', 'DESC']],
    attributes: ['id', 'letter'],
  });
  if (!earlier) return;
  const [before, after] = [await getCompiledPlan(earlier.id), await getCompiledPlan(revision.id)];
  const licences = await Licence.findAll({
    where: { planId: revision.planId, state: 'active' },
    include: [{ model: User, as: 'user', attributes: ['id', 'name', 'email'] }],
  });
  for (const licence of licences) {
    if (!licence.user) continue;
    const changes = comparePlans(before, after, await findFit(licence, before));
    await writeEmail({
      kind: 'revision',
      reference: `revision:${revision.id}:${licence.id}`,
      to: { name: licence.user.name, address: licence.user.email },
      subject: `${revision.plan.title}: revision ${revision.letter ?? ''}`,
      paragraphs: [
        `${revision.plan.title} is now at revision ${revision.letter ?? ''}. ${revision.notes}`,
        ...tell(changes),
      ],
      action: {
        label: 'Open the plan in your drawer',
        url: new URL(paths.licence(licence.id), env.SITE_URL).href,
      },
    });
  }
}
