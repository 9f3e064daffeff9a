import { Asset, Copy, Imprint, Licence, Plan, Revision, SavedFit } from '#db/models/index.ts';
import { paths } from '#lib/paths.ts';
import type { CompiledPlan } from '#lib/plan/types.ts';
import type { Actor } from '../accounts/actor.ts';
import { may } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import { viewCopy, type CopyView } from '../copies/view-copy.ts';
import { getCompiledPlan } from '../publishing/get-compiled-plan.ts';
import { viewFit, type SavedFitView } from './save-fit.ts';

/** Everything that the page of one licence shows. The whole plan is in it: only its holder gets this. */
export interface LicencePage {
  licence: {
    id: string;
    number: number;
    kind: 'personal' | 'workshop';
    pieces: number | null;
    state: 'active' | 'refunded' | 'revoked';
    holderName: string;
    grantedAt: string;
  };
  plan: { id: string; slug: string; title: string; imprintName: string };
  revision: { id: string; letter: string; publishedAt: string; notes: string };
  /** Null when the licence has ended: nothing of the plan is handed out any more. */
  compiled: CompiledPlan | null;
  fits: SavedFitView[];
  copies: CopyView[];
  /** The revision's pictures by the name that its text uses. */
  pictures: Record<string, { href: string; width: number; height: number }>;
}

async function listPictures(revisionId: string): Promise<LicencePage['pictures']> {
  const assets = await Asset.findAll({ where: { revisionId } });
  return Object.fromEntries(
    assets.map(({ name, sha256, width, height }) => [
      name,
      { href: paths.picture(sha256, 960), width, height },
    ]),
  );
}

/**
 * A licence and what belongs to it, for its holder.
 * @throws SIGN_IN_REQUIRED, NOT_FOUND for another's licence
 */
export async function getLicence(actor: Actor, licenceId: string): Promise<LicencePage> {
  if (actor.kind === 'visitor') return refuse('SIGN_IN_REQUIRED');
  const licence = await Licence.findOne({
    where: { id: licenceId, userId: actor.id },
    include: [
      {
        model: Plan,
        as: 'plan',
        include: [
          { model: Imprint, as: 'imprint' },
          { model: Revision, as: 'currentRevision', attributes: ['id', 'letter', 'publishedAt', 'notes'] },
        ],
      },
    ],
  });
  const plan = licence?.plan;
  const revision = plan?.currentRevision;
  if (!licence || !plan || !revision?.letter || !revision.publishedAt) return refuse('NOT_FOUND');
  const isUsable = may(actor, 'licence:use', licence);
  const fits = await SavedFit.findAll({
    where: { userId: actor.id, planId: plan.id },
    order: [['updatedAt', 'DESC']],
    limit: 50,
  });
  const copies = await Copy.findAll({
    where: { licenceId: licence.id },
    include: [{ model: Revision, as: 'revision', attributes: ['letter', 'publishedAt'] }],
    order: [['number', 'DESC']],
    limit: 100,
  });
  return {
    licence: {
      id: licence.id,
      number: licence.number,
      kind: licence.kind,
      pieces: licence.pieces,
      state: licence.state,
      holderName: licence.holderName,
      grantedAt: licence.grantedAt.toISOString(),
    },
    plan: { id: plan.id, slug: plan.slug, title: plan.title, imprintName: plan.imprint?.name ?? '' },
    revision: {
      id: revision.id,
      letter: revision.letter,
      publishedAt: revision.publishedAt.toISOString(),
      notes: revision.notes,
    },
    compiled: isUsable ? await getCompiledPlan(revision.id) : null,
    fits: fits.map(viewFit),
    copies: copies.map((copy) => viewCopy(copy)),
    pictures: isUsable ? await listPictures(revision.id) : {},
  };
}
