import { Op } from 'sequelize';
import { Copy, Imprint, Licence, Plan, Revision } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { refuse } from '../errors.ts';

/** One licence as the drawer lists it. */
export interface DrawerEntry {
  licenceId: string;
  number: number;
  kind: 'personal' | 'workshop';
  state: 'active' | 'refunded' | 'revoked';
  title: string;
  slug: string;
  imprintName: string;
  revisionLetter: string;
  grantedAt: string;
  copies: number;
}

const PAGE = 20;

/** A person's licences, newest first, a page at a time; `after` is the number of the last one seen. */
export async function listDrawer(
  actor: Actor,
  after?: number,
): Promise<{ entries: DrawerEntry[]; next: number | null }> {
  if (actor.kind === 'visitor') return refuse('SIGN_IN_REQUIRED');
  const licences = await Licence.findAll({
    where: { userId: actor.id, ...(after ? { number: { [Op.lt]: after } } : {}) },
    include: [
      {
        model: Plan,
        as: 'plan',
        include: [
          { model: Imprint, as: 'imprint', attributes: ['name'] },
          { model: Revision, as: 'currentRevision', attributes: ['letter'] },
        ],
      },
      { model: Copy, as: 'copies', attributes: ['id'] },
    ],
    order: [['number', 'DESC']],
    limit: PAGE + 1,
  });
  const shown = licences.slice(0, PAGE);
  return {
    entries: shown.map((licence) => ({
      licenceId: licence.id,
      number: licence.number,
      kind: licence.kind,
      state: licence.state,
      title: licence.plan?.title ?? '',
      slug: licence.plan?.slug ?? '',
      imprintName: licence.plan?.imprint?.name ?? '',
      revisionLetter: licence.plan?.currentRevision?.letter ?? '',
      grantedAt: licence.grantedAt.toISOString(),
      copies: licence.copies?.length ?? 0,
    })),
    next: licences.length > PAGE ? (shown.at(-1)?.number ?? null) : null,
  };
}
