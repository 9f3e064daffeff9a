import { sequelize } from '#db/client.ts';
import { Imprint, Plan, ProofInvite } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { countTry } from '../accounts/allowances.ts';
import { requireMay, requireUser } from '../accounts/may.ts';
import { hashSecret, makeSecret } from '../accounts/secret-token.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { writeEmail } from '../mail/write-email.ts';

const DAYS = 30;

/**
 * Invites somebody to build from a plan's draft and report. The link holds for thirty days and works once, for an account
 * with this address. Inviting the same address again renews the link, also after the invitation was withdrawn.
 * @throws AppError SIGN_IN_REQUIRED, NOT_FOUND, TOO_MANY, CONFLICT when the person is proving this plan already
 */
export async function inviteProofBuilder(options: {
  actor: Actor;
  planId: string;
  email: string;
  headers: Headers;
}): Promise<{ inviteId: string }> {
  const { actor, planId, email, headers } = options;
  const inviter = requireUser(actor);
  const plan =
    (await Plan.findByPk(planId, {
      attributes: ['id', 'title', 'imprintId'],
      include: [{ model: Imprint, as: 'imprint', attributes: ['name'] }],
    })) ?? refuse('NOT_FOUND');
  requireMay(actor, 'proof:invite', { imprintId: plan.imprintId });
  await countTry('invite', headers, plan.imprintId);
  const secret = makeSecret();
  return sequelize.transaction(async (transaction) => {
    const open = await ProofInvite.findOne({
      where: { planId, email },
      lock: transaction.LOCK.UPDATE,
      transaction,
    });
    if (open?.acceptedAt && !open.revokedAt)
      refuse('CONFLICT', { detail: 'This person is proving the plan already.' });
    // A fresh row, so that nothing of a withdrawn invitation lives on.
    if (open) await open.destroy({ transaction });
    const invite = await ProofInvite.create(
      {
        planId,
        email,
        tokenHash: hashSecret(secret),
        invitedBy: inviter.id,
        expiresAt: new Date(Date.now() + DAYS * 86_400_000),
      },
      { transaction },
    );
    const letter = {
      kind: 'proof-invite',
      reference: `proof-invite:${invite.id}`,
      to: { name: '', address: email },
      subject: `Will you prove “${plan.title}”?`,
      paragraphs: [
        `${inviter.name} of ${plan.imprint?.name ?? 'an imprint'} asks you to build “${plan.title}” from its draft, before it is sold, and to report what holds and what has to be mended.`,
        'The link holds for thirty days. Sign in, or make an account, with this e-mail address. Please keep the draft to yourself.',
      ],
      action: { label: 'See the invitation', url: `${env.SITE_URL}/invitations/${secret}` },
    };
    await writeEmail(letter, transaction);
    await writeAudit({ actor, action: 'proof:invite', thing: { kind: 'plan', id: planId } }, transaction);
    return { inviteId: invite.id };
  });
}
