import { Asset, Imprint, Licence, Plan, Revision } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { may } from '../accounts/may.ts';
import { findObject } from '../storage/object-store.ts';

export interface Picture {
  sha256: string;
  bytes: Uint8Array;
  contentType: string;
  /** Public pictures may be kept by anybody; others only by the reader's own browser. */
  isPublic: boolean;
}

/**
 * A picture by its hash, for those who may see it: anybody for the public ones of a published plan, otherwise the people of the imprint, invited
 * proof builders, and holders of a licence. Null stands for "not there" and "not yours" alike.
 */
export async function findPicture(actor: Actor, sha256: string): Promise<Picture | null> {
  if (!/^[0-9a-f]{64}$/.test(sha256)) return null;
  const assets = await Asset.findAll({
    where: { sha256 },
    include: [
      {
        model: Revision,
        as: 'revision',
        attributes: ['id', 'state', 'planId'],
        include: [
          {
            model: Plan,
            as: 'plan',
            attributes: ['id', 'state', 'imprintId'],
            include: [{ model: Imprint, as: 'imprint', attributes: ['state'] }],
          },
        ],
      },
    ],
    limit: 50,
  });
  const isOpen = (asset: Asset) =>
    asset.isPublic &&
    asset.revision?.state === 'published' &&
    asset.revision.plan?.state === 'published' &&
    asset.revision.plan.imprint?.state === 'active';
  const open = assets.find(isOpen);
  const shown = open ?? (await findReadable(actor, assets));
  if (!shown) return null;
  const bytes = await findObject(shown.objectKey);
  return bytes && { sha256, bytes, contentType: shown.contentType, isPublic: open !== undefined };
}

async function findReadable(actor: Actor, assets: readonly Asset[]): Promise<Asset | null> {
  if (actor.kind === 'visitor') return null;
  for (const asset of assets) {
    const plan = asset.revision?.plan;
    if (!plan || !asset.revision) continue;
    const licences = await Licence.findAll({
      where: { planId: plan.id, userId: actor.id },
      attributes: ['userId', 'state'],
    });
    const thing = {
      planId: plan.id,
      imprintId: plan.imprintId,
      state: plan.state,
      revisionState: asset.revision.state,
      licences,
    };
    if (may(actor, 'plan:read-whole', thing)) return asset;
  }
  return null;
}
