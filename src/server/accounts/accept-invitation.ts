import { sequelize } from '#db/client.ts';
import { ImprintInvite, ImprintMember, ProofInvite } from '#db/models/index.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import type { Actor } from './actor.ts';
import { countTry } from './allowances.ts';
import { findInvitation, type Invitation } from './find-invitation.ts';
import { requireUser } from './may.ts';

/**
 * Takes up an invitation, once. A forwarded link gives nothing: only the account with the invited address may.
 * Somebody who is in the imprint already keeps the role.
 * @throws AppError SIGN_IN_REQUIRED, TOO_MANY, TOKEN_SPENT, FORBIDDEN for an account with another address
 */
export async function acceptInvitation(options: {
  actor: Actor;
  secret: string;
  headers: Headers;
}): Promise<Invitation> {
  const actor = requireUser(options.actor);
  await countTry('open-link', options.headers, actor.id);
  const spent = { detail: 'This invitation has been used, was withdrawn or has run out. Ask for a new one.' };
  const invitation = (await findInvitation(options.secret)) ?? refuse('TOKEN_SPENT', spent);
  if (!actor.isVerified) refuse('EMAIL_UNVERIFIED');
  if (invitation.email !== actor.email)
    refuse('FORBIDDEN', {
      detail:
        'This invitation was sent to another address. Sign in with that one, or ask for an invitation to this one.',
    });
  await sequelize.transaction(async (transaction) => {
    const now = new Date();
    const where = { id: invitation.id, acceptedAt: null };
    if (invitation.kind === 'imprint') {
      // Deciding and using up in one statement: a double click is one membership.
      const [, [invite]] = await ImprintInvite.update(
        { acceptedAt: now },
        { where, returning: true, transaction },
      );
      if (!invite) refuse('TOKEN_SPENT', spent);
      const member = { imprintId: invite.imprintId, userId: actor.id, role: invite.role };
      await ImprintMember.bulkCreate([member], { ignoreDuplicates: true, transaction });
    } else {
      const [count] = await ProofInvite.update(
        { acceptedAt: now, userId: actor.id },
        { where: { ...where, revokedAt: null }, transaction },
      );
      if (!count) refuse('TOKEN_SPENT', spent);
    }
    await writeAudit(
      { actor, action: 'invitation:accept', thing: { kind: `${invitation.kind}-invite`, id: invitation.id } },
      transaction,
    );
  });
  return invitation;
}
