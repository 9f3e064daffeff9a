import { Imprint, LicenceOffer, Plan, Revision } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { may, requireUser } from '../accounts/may.ts';
import { requireImprint } from '../sales/require-imprint.ts';

export interface OfficeImprint {
  slug: string;
  name: string;
  state: 'applied' | 'active' | 'suspended';
  role: 'owner' | 'editor' | 'bookkeeper';
  plans: number;
}

/** The imprints that a person works for. @throws SIGN_IN_REQUIRED */
export async function listImprints(actor: Actor): Promise<OfficeImprint[]> {
  const user = requireUser(actor);
  const imprints = await Imprint.findAll({
    where: { id: [...user.imprints.keys()] },
    include: [{ model: Plan, as: 'plans', attributes: ['id'] }],
    order: [['name', 'ASC']],
  });
  return imprints.map((imprint) => ({
    slug: imprint.slug,
    name: imprint.name,
    state: imprint.state,
    role: user.imprints.get(imprint.id) ?? 'bookkeeper',
    plans: imprint.plans?.length ?? 0,
  }));
}

export interface OfficePlan {
  id: string;
  title: string;
  state: 'draft' | 'published' | 'unpublished';
  letter: string | null;
  hasDraft: boolean;
  hasPrice: boolean;
  updatedAt: string;
}

export interface OfficePage {
  imprint: {
    id: string;
    slug: string;
    name: string;
    about: string;
    state: 'applied' | 'active' | 'suspended';
  };
  plans: OfficePlan[];
  mayWrite: boolean;
  mayReadSales: boolean;
  mayManage: boolean;
}

/** The board of one imprint: its plans with their state. @throws NOT_FOUND */
export async function getOffice(actor: Actor, slug: string): Promise<OfficePage> {
  const imprint = await requireImprint(actor, slug, 'imprint:read');
  const plans = await Plan.findAll({
    where: { imprintId: imprint.id },
    include: [
      { model: Revision, as: 'revisions', attributes: ['letter', 'state', 'updatedAt'] },
      { model: LicenceOffer, as: 'offers', where: { isActive: true }, required: false, attributes: ['id'] },
    ],
    order: [['createdAt', 'DESC']],
    limit: 200,
  });
  const thing = { imprintId: imprint.id };
  return {
    imprint: {
      id: imprint.id,
      slug: imprint.slug,
      name: imprint.name,
      about: imprint.about,
      state: imprint.state,
    },
    plans: plans.map((plan) => {
      const revisions = plan.revisions ?? [];
      const newest = revisions
        .map((revision) => revision.updatedAt.toISOString())
        .sort()
        .at(-1);
      return {
        id: plan.id,
        title: plan.title,
        state: plan.state,
        letter: revisions.find((revision) => revision.state === 'published')?.letter ?? null,
        hasDraft: revisions.some((revision) => revision.state === 'draft'),
        hasPrice: (plan.offers ?? []).length > 0,
        updatedAt: newest ?? plan.updatedAt.toISOString(),
      };
    }),
    mayWrite: may(actor, 'draft:write', thing),
    mayReadSales: may(actor, 'sales:read', thing),
    mayManage: may(actor, 'members:manage', thing),
  };
}
