import { Op } from 'sequelize';
import { Imprint, ImprintInvite, Plan, ProofInvite, User } from '#db/models/index.ts';
import type { ImprintRole } from './actor.ts';
import { hashSecret } from './secret-token.ts';

/** An open invitation, as the person who holds its link may see it. */
export type Invitation =
  | { kind: 'imprint'; id: string; email: string; from: string; imprint: string; role: ImprintRole }
  | { kind: 'proof'; id: string; email: string; from: string; imprint: string; plan: string; planId: string };

/** The invitation of a link; null when there is none, or it was accepted, withdrawn or has run out. */
export async function findInvitation(secret: string): Promise<Invitation | null> {
  const tokenHash = hashSecret(secret);
  const where = { tokenHash, acceptedAt: null, expiresAt: { [Op.gt]: new Date() } };
  const inviter = { model: User, as: 'inviter', attributes: ['name'] };
  const invite = await ImprintInvite.findOne({
    where,
    include: [{ model: Imprint, as: 'imprint', attributes: ['name'] }, inviter],
  });
  if (invite) {
    return {
      kind: 'imprint',
      id: invite.id,
      email: invite.email,
      from: invite.inviter?.name ?? '',
      imprint: invite.imprint?.name ?? '',
      role: invite.role,
    };
  }
  const proof = await ProofInvite.findOne({
    where: { ...where, revokedAt: null },
    include: [
      {
        model: Plan,
        as: 'plan',
        attributes: ['title'],
        include: [{ model: Imprint, as: 'imprint', attributes: ['name'] }],
      },
      inviter,
    ],
  });
  if (!proof) return null;
  return {
    kind: 'proof',
    id: proof.id,
    email: proof.email,
    from: proof.inviter?.name ?? '',
    imprint: proof.plan?.imprint?.name ?? '',
    plan: proof.plan?.title ?? '',
    planId: proof.planId,
  };
}
