import { Plan, ProofInvite } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';

/**
 * Withdraws an invitation to prove a plan, taken up or not: the draft is closed to that person at once.
 * @throws AppError SIGN_IN_REQUIRED, NOT_FOUND
 */
export async function withdrawProofInvite(options: { actor: Actor; inviteId: string }): Promise<void> {
  const { actor, inviteId } = options;
  const invite =
    (await ProofInvite.findByPk(inviteId, {
      include: [{ model: Plan, as: 'plan', attributes: ['imprintId'] }],
    })) ?? refuse('NOT_FOUND');
  requireMay(actor, 'proof:invite', { imprintId: invite.plan?.imprintId ?? '' });
  await invite.update({ revokedAt: new Date() }, { fields: ['revokedAt'] });
  await writeAudit({ actor, action: 'proof:invite', thing: { kind: 'plan', id: invite.planId } });
}
