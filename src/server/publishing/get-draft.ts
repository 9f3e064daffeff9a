import { randomUUID } from 'node:crypto';
import { sequelize } from '#db/client.ts';
import {
  Asset,
  Imprint,
  LicenceOffer,
  Plan,
  ProofInvite,
  ProofReport,
  Revision,
  User,
} from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import type { ProofRecord } from '#lib/plan/proof-record.ts';

export interface AssetView {
  name: string;
  sha256: string;
  width: number;
  height: number;
  bytes: number;
}

/** Everything that the drawing office shows of one plan. */
export interface DraftPage {
  plan: { id: string; slug: string; title: string; state: 'draft' | 'published' | 'unpublished' };
  imprint: { id: string; slug: string; name: string; state: 'applied' | 'active' | 'suspended' };
  /** Null while nothing is being changed: the published revision stands alone. */
  draft: {
    id: string;
    source: string;
    version: number;
    notes: string;
    updatedAt: string;
    proof: ProofRecord | null;
  } | null;
  revisions: {
    id: string;
    letter: string;
    state: 'published' | 'superseded';
    publishedAt: string;
    notes: string;
  }[];
  nextLetter: string;
  assets: AssetView[];
  offers: {
    id: string;
    kind: 'personal' | 'workshop';
    priceMinor: number;
    currency: string;
    pieces: number | null;
  }[];
  proofInvites: { id: string; email: string; state: 'sent' | 'accepted' | 'revoked' }[];
  proofReports: { id: string; by: string; verdict: 'holds' | 'mend'; body: string; createdAt: string }[];
}

/** A, B … Z, AA, AB …: the letter after this one. */
export function letterAfter(letter: string | null): string {
  if (!letter) return 'A';
  const last = letter.charCodeAt(letter.length - 1);
  if (last < 90) return letter.slice(0, -1) + String.fromCharCode(last + 1);
  return letter.length === 1 ? 'AA' : `${letterAfter(letter.slice(0, -1))}A`;
}

/** Finds a plan and checks the right to write it. @throws NOT_FOUND, FORBIDDEN */
export async function requireDraftPlan(actor: Actor, planId: string): Promise<Plan> {
  const plan = await Plan.findByPk(planId);
  if (!plan) return refuse('NOT_FOUND');
  requireMay(actor, 'draft:write', { imprintId: plan.imprintId });
  return plan;
}

/** The plan as it lies on the board. @throws NOT_FOUND, FORBIDDEN */
export async function getDraft(actor: Actor, planId: string): Promise<DraftPage> {
  const plan = await requireDraftPlan(actor, planId);
  const [imprint, revisions, offers, invites, reports] = await Promise.all([
    Imprint.findByPk(plan.imprintId, { rejectOnEmpty: true }),
    Revision.findAll({
      where: { planId },
      order: [['createdAt', 'ASC']],
      attributes: { exclude: ['compiled'] },
    }),
    LicenceOffer.findAll({
      where: { planId, isActive: true },
      order: [
        ['kind', 'ASC'],
        ['currency', 'ASC'],
      ],
    }),
    ProofInvite.findAll({ where: { planId }, order: [['createdAt', 'DESC']], limit: 50 }),
    ProofReport.findAll({
      where: { planId },
      include: [{ model: User, as: 'user', attributes: ['name'] }],
      order: [['createdAt', 'DESC']],
      limit: 50,
    }),
  ]);
  const draft = revisions.find((revision) => revision.state === 'draft') ?? null;
  const published = revisions.filter((revision) => revision.state !== 'draft');
  const shown = draft ?? published.at(-1);
  const assets = shown
    ? await Asset.findAll({ where: { revisionId: shown.id }, order: [['name', 'ASC']] })
    : [];
  return {
    plan: { id: plan.id, slug: plan.slug, title: plan.title, state: plan.state },
    imprint: { id: imprint.id, slug: imprint.slug, name: imprint.name, state: imprint.state },
    draft: draft && {
      id: draft.id,
      source: draft.source,
      version: draft.version,
      notes: draft.notes,
      updatedAt: draft.updatedAt.toISOString(),
      proof: draft.proof,
    },
    revisions: published.map((revision) => ({
      id: revision.id,
      letter: revision.letter ?? '',
      state: revision.state === 'published' ? 'published' : 'superseded',
      publishedAt: revision.publishedAt?.toISOString() ?? '',
      notes: revision.notes,
    })),
    nextLetter: letterAfter(published.at(-1)?.letter ?? null),
    assets: assets.map(({ name, sha256, width, height, bytes }) => ({ name, sha256, width, height, bytes })),
    offers: offers.map(({ id, kind, priceMinor, currency, pieces }) => ({
      id,
      kind,
      priceMinor,
      currency,
      pieces,
    })),
    proofInvites: invites.map((invite) => ({
      id: invite.id,
      email: invite.email,
      state: invite.revokedAt ? 'revoked' : invite.acceptedAt ? 'accepted' : 'sent',
    })),
    proofReports: reports.map((report) => ({
      id: report.id,
      by: report.user?.name ?? 'somebody who has left',
      verdict: report.verdict,
      body: report.body,
      createdAt: report.createdAt.toISOString(),
    })),
  };
}

/** Opens a new draft from the published revision, with its text and pictures; gives the open one where there is one. */
export async function startDraft(actor: Actor, planId: string): Promise<void> {
  const plan = await requireDraftPlan(actor, planId);
  await sequelize.transaction(async (transaction) => {
    await Plan.findByPk(plan.id, { transaction, lock: transaction.LOCK.UPDATE });
    if (await Revision.count({ where: { planId, state: 'draft' }, transaction })) return;
    const current = await Revision.findOne({
      where: { planId, state: 'published' },
      transaction,
      rejectOnEmpty: true,
    });
    const draft = await Revision.create(
      {
        id: randomUUID(),
        planId,
        source: current.source,
        createdBy: actor.kind === 'user' ? actor.id : null,
      },
      { transaction },
    );
    const assets = await Asset.findAll({ where: { revisionId: current.id }, transaction });
    await Asset.bulkCreate(
      assets.map(({ name, contentType, width, height, bytes, sha256, objectKey }) => ({
        id: randomUUID(),
        revisionId: draft.id,
        name,
        contentType,
        width,
        height,
        bytes,
        sha256,
        objectKey,
      })),
      { transaction },
    );
  });
}
