import { sequelize } from '#db/client.ts';
import { ImprintMember } from '#db/models/index.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import type { Actor, ImprintRole } from './actor.ts';
import { requireMay } from './may.ts';

/**
 * Gives a member of an imprint another role. An imprint keeps at least one owner.
 * @throws AppError SIGN_IN_REQUIRED, FORBIDDEN, NOT_FOUND, CONFLICT for the last owner
 */
export async function changeMemberRole(options: {
  actor: Actor;
  imprintId: string;
  userId: string;
  role: ImprintRole;
}): Promise<void> {
  const { actor, imprintId, userId, role } = options;
  requireMay(actor, 'members:manage', { imprintId });
  await sequelize.transaction(async (transaction) => {
    const members = await ImprintMember.findAll({
      where: { imprintId },
      order: ['userId'],
      lock: transaction.LOCK.UPDATE,
      transaction,
    });
    const member = members.find((each) => each.userId === userId) ?? refuse('NOT_FOUND');
    const owners = members.filter((each) => each.role === 'owner').length;
    if (member.role === 'owner' && role !== 'owner' && owners === 1)
      refuse('CONFLICT', { detail: 'An imprint needs an owner. Make somebody else an owner first.' });
    await member.update({ role }, { fields: ['role'], transaction });
    await writeAudit(
      {
        actor,
        action: 'members:manage',
        thing: { kind: 'imprint', id: imprintId },
        details: { userId, role },
      },
      transaction,
    );
  });
}
