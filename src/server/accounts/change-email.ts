import { UniqueConstraintError } from 'sequelize';
import * as z from 'zod';
import { sequelize } from '#db/client.ts';
import { User, Verification } from '#db/models/index.ts';
import { refuse } from '../errors.ts';
import { tellOldAddress, tellOldAddressOfMove, writeVerificationEmail } from './account-emails.ts';
import type { SignedInUser } from './actor.ts';
import { checkPassword } from './check-password.ts';
import { nameEmailChange } from './pending-email-change.ts';
import { hashSecret, makeSecret } from './secret-token.ts';

const HOURS = 24;
const pendingSchema = z.object({ hash: z.string(), from: z.string(), to: z.string() });

const tokenShape = /^change\.([0-9a-f-]{36})\.([\w-]{43})$/;

/** Whether the secret of a link belongs to a change of address, and not to a new account. */
export function isEmailChangeToken(token: string): boolean {
  return token.startsWith('change.');
}

/**
 * Starts the move of an account to another address: asks for the password, tells the old address, sends the new one the
 * link that completes the move. A later request replaces an earlier one. An address that has an account already gets
 * no mail and the caller learns nothing of that.
 * @throws AppError TOO_MANY, BAD_INPUT
 */
export async function changeEmail(options: {
  actor: SignedInUser;
  newEmail: string;
  currentPassword: string;
  headers: Headers;
}): Promise<void> {
  const { actor, newEmail, currentPassword, headers } = options;
  if (newEmail === actor.email) {
    const detail = 'This is your address already.';
    refuse('BAD_INPUT', { detail, fields: { newEmail: detail } });
  }
  await checkPassword({ userId: actor.id, password: currentPassword, headers, field: 'emailPassword' });
  const secret = makeSecret();
  await sequelize.transaction(async (transaction) => {
    // The row of the person is the lock: two requests at once leave one move.
    await User.findByPk(actor.id, { attributes: ['id'], lock: transaction.LOCK.UPDATE, transaction });
    await Verification.destroy({ where: { identifier: nameEmailChange(actor.id) }, transaction });
    await Verification.create(
      {
        identifier: nameEmailChange(actor.id),
        value: JSON.stringify({ hash: hashSecret(secret), from: actor.email, to: newEmail }),
        expiresAt: new Date(Date.now() + HOURS * 3_600_000),
      },
      { transaction },
    );
    await tellOldAddress(actor, newEmail, transaction);
    const isTaken = await User.count({ where: { email: newEmail }, transaction });
    if (!isTaken)
      await writeVerificationEmail(
        { ...actor, email: newEmail },
        `change.${actor.id}.${secret}`,
        transaction,
      );
  });
}

/**
 * Completes the move by the secret of the link.
 * @throws AppError TOKEN_SPENT, CONFLICT when another account took the address meanwhile
 */
export async function confirmEmailChange(token: string): Promise<void> {
  const [, userId = '', secret = ''] = tokenShape.exec(token) ?? refuse('TOKEN_SPENT');
  try {
    await sequelize.transaction(async (transaction) => {
      const user = await User.findByPk(userId, { lock: transaction.LOCK.UPDATE, transaction });
      const row = await Verification.findOne({
        where: { identifier: nameEmailChange(userId) },
        lock: transaction.LOCK.UPDATE,
        transaction,
      });
      const pending = row ? pendingSchema.parse(JSON.parse(row.value)) : undefined;
      if (
        !row ||
        !user ||
        !pending ||
        pending.hash !== hashSecret(secret) ||
        pending.from !== user.email ||
        row.expiresAt < new Date()
      )
        return refuse('TOKEN_SPENT', {
          detail: 'This link has been used or has run out. Ask for a new one.',
        });
      await row.destroy({ transaction });
      await user.update(
        { email: pending.to, emailVerified: true, updatedAt: new Date() },
        { fields: ['email', 'emailVerified', 'updatedAt'], transaction },
      );
      await tellOldAddressOfMove({ id: user.id, name: user.name, email: pending.from }, transaction);
    });
  } catch (cause) {
    if (cause instanceof UniqueConstraintError)
      refuse('CONFLICT', {
        detail: 'Another account has this address. Your account stays where it was.',
        cause,
      });
    throw cause;
  }
}
