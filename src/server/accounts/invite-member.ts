import { sequelize } from '#db/client.ts';
import { Imprint, ImprintInvite, ImprintMember, User } from '#db/models/index.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { writeEmail } from '../mail/write-email.ts';
import type { Actor, ImprintRole } from './actor.ts';
import { countTry } from './allowances.ts';
import { requireMay, requireUser } from './may.ts';
import { hashSecret, makeSecret } from './secret-token.ts';

const DAYS = 14;

const duties: Record<ImprintRole, string> = {
  owner: 'an owner: write and publish plans, set prices, see the sales book, pay out and invite people',
  editor: 'an editor: write, prove and publish plans, answer questions and hand out codes',
  bookkeeper: 'the bookkeeper: see the sales book and its statements, and nothing else',
};

/**
 * Invites somebody to an imprint by e-mail. The link holds for two weeks, works once, and only for an account with this
 * address. A new invitation of the same address replaces the open one.
 * @throws AppError NOT_FOUND, FORBIDDEN, TOO_MANY, CONFLICT when the person is a member already
 */
export async function inviteMember(options: {
  actor: Actor;
  imprintId: string;
  email: string;
  role: ImprintRole;
  headers: Headers;
}): Promise<{ inviteId: string }> {
  const { actor, imprintId, email, role, headers } = options;
  const inviter = requireUser(actor);
  requireMay(actor, 'members:manage', { imprintId });
  await countTry('invite', headers, imprintId);
  const imprint = (await Imprint.findByPk(imprintId, { attributes: ['id', 'name'] })) ?? refuse('NOT_FOUND');
  const isMember = await ImprintMember.count({
    where: { imprintId },
    include: [{ model: User, as: 'user', where: { email }, required: true }],
  });
  if (isMember) refuse('CONFLICT', { detail: 'This person belongs to the imprint already.' });
  const secret = makeSecret();
  return sequelize.transaction(async (transaction) => {
    await ImprintInvite.destroy({ where: { imprintId, email, acceptedAt: null }, transaction });
    const invite = await ImprintInvite.create(
      {
        imprintId,
        email,
        role,
        tokenHash: hashSecret(secret),
        invitedBy: inviter.id,
        expiresAt: new Date(Date.now() + DAYS * 86_400_000),
      },
      { transaction },
    );
    const letter = {
      kind: 'imprint-invite',
      reference: `imprint-invite:${invite.id}`,
      to: { name: '', address: email },
      subject: `${imprint.name} invites you`,
      paragraphs: [
        `${inviter.name} invites you to ${imprint.name} at Benchleaf, as ${duties[role]}.`,
        'The link holds for two weeks. Sign in, or make an account, with this e-mail address.',
      ],
      action: { label: 'See the invitation', url: `${env.SITE_URL}/invitations/${secret}` },
    };
    await writeEmail(letter, transaction);
    await writeAudit(
      {
        actor,
        action: 'members:manage',
        thing: { kind: 'imprint', id: imprintId },
        details: { invited: role },
      },
      transaction,
    );
    return { inviteId: invite.id };
  });
}
