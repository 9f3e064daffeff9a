import { sequelize } from '#db/client.ts';
import { ImprintMember } from '#db/models/index.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import type { Actor } from './actor.ts';
import { requireMay, requireUser } from './may.ts';

/**
 * Takes a person out of an imprint; everybody may take themselves out. An imprint keeps at least one owner.
 * Their next request has lost the rights: memberships are read afresh each time.
 * @throws AppError NOT_FOUND, FORBIDDEN, CONFLICT for the last owner
 */
export async function removeMember(options: {
  actor: Actor;
  imprintId: string;
  userId: string;
}): Promise<void> {
  const { actor, imprintId, userId } = options;
  if (requireUser(actor).id !== userId) requireMay(actor, 'members:manage', { imprintId });
  await sequelize.transaction(async (transaction) => {
    // All rows are held, so that two owners cannot take each other out at the same moment.
    const members = await ImprintMember.findAll({
      where: { imprintId },
      order: ['userId'],
      lock: transaction.LOCK.UPDATE,
      transaction,
    });
    const leaving = members.find((member) => member.userId === userId) ?? refuse('NOT_FOUND');
    if (leaving.role === 'owner' && members.filter(({ role }) => role === 'owner').length === 1)
      refuse('CONFLICT', { detail: 'An imprint needs an owner. Make somebody else an owner first.' });
    await leaving.destroy({ transaction });
    await writeAudit(
      {
        actor,
        action: 'members:manage',
        thing: { kind: 'imprint', id: imprintId },
        details: { removed: userId },
      },
      transaction,
    );
  });
}
