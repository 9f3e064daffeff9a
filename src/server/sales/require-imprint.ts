import { Imprint } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { refuse } from '../errors.ts';

type ImprintAction =
  | 'sales:read'
  | 'payout:start'
  | 'sources:manage'
  | 'codes:manage'
  | 'imprint:read'
  | 'imprint:edit'
  | 'members:manage';

/** Finds an imprint by its slug and checks the right to do something with it. @throws NOT_FOUND, FORBIDDEN, SIGN_IN_REQUIRED */
export async function requireImprint(actor: Actor, slug: string, action: ImprintAction): Promise<Imprint> {
  const imprint = await Imprint.findOne({ where: { slug } });
  if (!imprint) return refuse(actor.kind === 'visitor' ? 'SIGN_IN_REQUIRED' : 'NOT_FOUND');
  requireMay(actor, action, { imprintId: imprint.id });
  return imprint;
}
