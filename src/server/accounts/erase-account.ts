import { Op, QueryTypes, type Transaction } from 'sequelize';
import { sequelize } from '#db/client.ts';
import {
  Account,
  Answer,
  Build,
  Copy,
  ImprintInvite,
  ImprintMember,
  Licence,
  Order,
  OutboxEmail,
  ProofInvite,
  Question,
  SavedFit,
  Session,
  User,
  Verification,
} from '#db/models/index.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { log } from '../log.ts';
import { deleteObject } from '../storage/object-store.ts';
import type { SignedInUser } from './actor.ts';
import { checkPassword } from './check-password.ts';
import { nameEmailChange } from './pending-email-change.ts';

/** Stands where a name stood. */
const ERASED_NAME = 'Erased reader';

async function requireNotLastOwner(userId: string, transaction: Transaction): Promise<void> {
  const orphaned = await sequelize.query<{ name: string }>(
    `select imprints.name from imprint_members mine join imprints on imprints.id = mine.imprint_id
     where mine.user_id = :userId and mine.role = 'owner' and not exists (
       select 1 from imprint_members other
       where other.imprint_id = mine.imprint_id and other.role = 'owner' and other.user_id <> :userId)`,
    { replacements: { userId }, type: QueryTypes.SELECT, transaction },
  );
  if (orphaned.length) {
    const names = orphaned.map(({ name }) => name).join(', ');
    refuse('CONFLICT', {
      detail: `You are the only owner of ${names}. Make somebody else an owner first, or write to us to close it.`,
    });
  }
}

/** Every page of a copy carries the name, so the files go; the rows stay, for the numbers. @returns the keys of the files */
async function retireCopies(userId: string, transaction: Transaction): Promise<string[]> {
  const copies = await Copy.findAll({
    include: [{ model: Licence, as: 'licence', attributes: [], where: { userId }, required: true }],
    transaction,
  });
  const keys = copies.flatMap(({ objectKey }) => (objectKey ? [objectKey] : []));
  await Copy.update(
    { state: 'failed', failure: 'erased', objectKey: null },
    { where: { id: copies.map(({ id }) => id) }, transaction },
  );
  return keys;
}

async function removeFiles(keys: readonly string[]): Promise<void> {
  for (const objectKey of keys) {
    try {
      await deleteObject(objectKey);
    } catch (err) {
      // The person is erased already; the file has to be removed by hand.
      log.error({ err, objectKey }, 'a copy of an erased account could not be removed from the store');
    }
  }
}

/**
 * Erases a person and keeps the books: the row of the account stays without name or address, orders and licences stay
 * with their numbers and amounts, the ledger is untouched. Copies are removed from the store, for they carry the name. What was written in public stays without its name.
 * It cannot be taken back, so the password is asked for.
 * @throws AppError TOO_MANY, BAD_INPUT on `erasePassword`, CONFLICT for the only owner of an imprint
 */
export async function eraseAccount(options: {
  actor: SignedInUser;
  currentPassword: string;
  headers: Headers;
}): Promise<void> {
  const { actor, currentPassword, headers } = options;
  const userId = actor.id;
  await checkPassword({ userId, password: currentPassword, headers, field: 'erasePassword' });
  const files = await sequelize.transaction(async (transaction) => {
    await requireNotLastOwner(userId, transaction);
    const own = { where: { userId }, transaction };
    const address = `erased-${userId}@erased.example`;
    await Session.destroy(own);
    await Account.destroy(own);
    await Verification.destroy({
      where: { [Op.or]: [{ identifier: nameEmailChange(userId) }, { value: userId }] },
      transaction,
    });
    await ImprintMember.destroy(own);
    await ImprintInvite.destroy({ where: { email: actor.email }, transaction });
    await ProofInvite.destroy({ where: { [Op.or]: [{ userId }, { email: actor.email }] }, transaction });
    await SavedFit.destroy(own);
    await OutboxEmail.destroy({ where: { toAddress: actor.email }, transaction });
    await Order.update({ name: ERASED_NAME, email: address }, own);
    const keys = await retireCopies(userId, transaction);
    await Licence.update({ holderName: ERASED_NAME }, own);
    await Question.update({ authorName: ERASED_NAME }, own);
    await Answer.update({ authorName: ERASED_NAME }, own);
    await Build.update({ authorName: ERASED_NAME }, own);
    await User.update(
      {
        name: ERASED_NAME,
        email: address,
        emailVerified: false,
        image: null,
        role: 'member',
        erasedAt: new Date(),
        updatedAt: new Date(),
      },
      { where: { id: userId }, transaction },
    );
    await writeAudit({ actor, action: 'account:erase', thing: { kind: 'user', id: userId } }, transaction);
    return keys;
  });
  await removeFiles(files);
}
