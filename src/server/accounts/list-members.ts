import { Op } from 'sequelize';
import { ImprintInvite, ImprintMember, User } from '#db/models/index.ts';
import type { Actor, ImprintRole } from './actor.ts';
import { requireMay } from './may.ts';

export interface ListedMember {
  userId: string;
  name: string;
  email: string;
  role: ImprintRole;
  since: Date;
}
export interface ListedInvite {
  inviteId: string;
  email: string;
  role: ImprintRole;
  expiresAt: Date;
}

/**
 * The people of an imprint and its open invitations.
 * @throws AppError SIGN_IN_REQUIRED, FORBIDDEN
 */
export async function listMembers(options: {
  actor: Actor;
  imprintId: string;
}): Promise<{ members: ListedMember[]; invites: ListedInvite[] }> {
  const { actor, imprintId } = options;
  requireMay(actor, 'members:manage', { imprintId });
  const [members, invites] = await Promise.all([
    ImprintMember.findAll({
      where: { imprintId },
      include: [{ model: User, as: 'user', attributes: ['name', 'email'], required: true }],
      order: ['createdAt'],
    }),
    ImprintInvite.findAll({
      where: { imprintId, acceptedAt: null, expiresAt: { [Op.gt]: new Date() } },
      order: ['createdAt'],
    }),
  ]);
  return {
    members: members.map(({ userId, role, createdAt, user }) => ({
      userId,
      name: user?.name ?? '',
      email: user?.email ?? '',
      role,
      since: createdAt,
    })),
    invites: invites.map(({ id, email, role, expiresAt }) => ({ inviteId: id, email, role, expiresAt })),
  };
}
