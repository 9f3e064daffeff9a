import { ImprintInvite } from '#db/models/index.ts';
import { refuse } from '../errors.ts';
import type { Actor } from './actor.ts';
import { requireMay } from './may.ts';

/**
 * Withdraws an open invitation to an imprint; its link stops working.
 * @throws AppError SIGN_IN_REQUIRED, FORBIDDEN, NOT_FOUND
 */
export async function withdrawInvite(options: {
  actor: Actor;
  imprintId: string;
  inviteId: string;
}): Promise<void> {
  const { actor, imprintId, inviteId } = options;
  requireMay(actor, 'members:manage', { imprintId });
  const count = await ImprintInvite.destroy({ where: { id: inviteId, imprintId, acceptedAt: null } });
  if (!count) refuse('NOT_FOUND');
}
