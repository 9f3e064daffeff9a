import { randomUUID } from 'node:crypto';
import { Asset, Imprint, ImprintMember, Plan, ProofReport, Revision, User } from '#db/models/index.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import type { CompiledPlan } from '#lib/plan/types.ts';
import { paths } from '#lib/paths.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay, requireUser } from '../accounts/may.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { writeEmail } from '../mail/write-email.ts';

export interface ProofBuildPage {
  plan: { id: string; title: string; imprintName: string };
  /** Null while the draft does not compile: the author is in the middle of writing. */
  compiled: CompiledPlan | null;
  pictures: Record<string, { href: string; width: number; height: number }>;
  reports: { verdict: 'holds' | 'mend'; body: string; at: string }[];
}

/** The draft for an invited proof builder: the whole plan, and only this one. @throws SIGN_IN_REQUIRED, NOT_FOUND */
export async function getProofBuild(actor: Actor, planId: string): Promise<ProofBuildPage> {
  const user = requireUser(actor);
  const plan = await Plan.findByPk(planId, {
    include: [{ model: Imprint, as: 'imprint', attributes: ['name'] }],
  });
  const draft = plan && (await Revision.findOne({ where: { planId, state: 'draft' } }));
  if (!plan || !draft) return refuse('NOT_FOUND');
  requireMay(user, 'plan:read-whole', {
    planId,
    imprintId: plan.imprintId,
    state: plan.state,
    revisionState: 'draft',
    licences: [],
  });
  const [assets, reports] = await Promise.all([
    Asset.findAll({ where: { revisionId: draft.id } }),
    ProofReport.findAll({ where: { planId, userId: user.id }, order: [['createdAt', 'DESC']], limit: 20 }),
  ]);
  return {
    plan: { id: plan.id, title: plan.title, imprintName: plan.imprint?.name ?? '' },
    compiled: compilePlan(draft.source).plan,
    pictures: Object.fromEntries(
      assets.map(({ name, sha256, width, height }) => [
        name,
        { href: paths.picture(sha256, 960), width, height },
      ]),
    ),
    reports: reports.map(({ verdict, body, createdAt }) => ({ verdict, body, at: createdAt.toISOString() })),
  };
}

/** Reports on a proof build; the people who write the plan are told. @throws NOT_FOUND */
export async function reportProofBuild(options: {
  actor: Actor;
  planId: string;
  verdict: 'holds' | 'mend';
  body: string;
}): Promise<void> {
  const user = requireUser(options.actor);
  requireMay(user, 'proof:report', { planId: options.planId });
  const plan = await Plan.findByPk(options.planId);
  const draft = await Revision.findOne({
    where: { planId: options.planId, state: 'draft' },
    attributes: ['id'],
  });
  if (!plan || !draft) return refuse('NOT_FOUND');
  const report = await ProofReport.create({
    id: randomUUID(),
    planId: plan.id,
    revisionId: draft.id,
    userId: user.id,
    verdict: options.verdict,
    body: options.body.trim(),
  });
  const writers = await ImprintMember.findAll({
    where: { imprintId: plan.imprintId, role: ['owner', 'editor'] },
    include: [{ model: User, as: 'user', attributes: ['id', 'name', 'email'] }],
  });
  for (const { user: writer } of writers) {
    if (!writer) continue;
    await writeEmail({
      kind: 'proof-report',
      reference: `proof-report:${report.id}:${writer.id}`,
      to: { name: writer.name, address: writer.email },
      subject: `A proof builder reports on ${plan.title}`,
      paragraphs: [
        options.verdict === 'holds'
          ? `${user.name} says that the plan holds:`
          : `${user.name} found something to mend:`,
        options.body.slice(0, 600),
      ],
      action: { label: 'Open the plan', url: new URL(paths.officePlan(plan.id), env.SITE_URL).href },
    });
  }
}
