import { QueryTypes, type Transaction } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { Code, CodeUse } from '#db/models/index.ts';
import { refuse } from '../errors.ts';

export interface CodeTarget {
  userId: string;
  imprintId: string;
  planId: string;
  priceMinor: number;
  currency: string;
}

/** What a code takes off a price, in minor units; never more than the price. */
export function discountOf(code: Pick<Code, 'percentOff' | 'amountOffMinor'>, priceMinor: number): number {
  if (code.percentOff !== null) return Math.floor((priceMinor * code.percentOff) / 100);
  return Math.min(priceMinor, code.amountOffMinor ?? 0);
}

const refuseCode = (sentence: string): never =>
  refuse('CODE_REFUSED', { detail: sentence, fields: { code: sentence } });

/**
 * Finds the code that a buyer typed and checks that it holds for this plan, now, for this person.
 * @throws CODE_REFUSED with a sentence that says why
 */
export async function requireCode(
  typed: string,
  target: CodeTarget,
  transaction: Transaction,
): Promise<Code> {
  const code = await Code.findOne({ where: { code: typed.trim().toUpperCase() }, transaction });
  // A code of another imprint is told from no code at all by nobody.
  if (!code || code.imprintId !== target.imprintId || !code.isActive)
    return refuseCode('There is no such code for this plan.');
  if (code.planId !== null && code.planId !== target.planId)
    return refuseCode('This code is for another plan.');
  const now = Date.now();
  if (code.startsAt.getTime() > now) return refuseCode('This code does not hold yet.');
  if (code.endsAt && code.endsAt.getTime() <= now) return refuseCode('This code has run out.');
  if (code.currency !== null && code.currency !== target.currency)
    return refuseCode(`This code is for prices in ${code.currency}.`);
  const uses = await CodeUse.count({
    where: { codeId: code.id, userId: target.userId, state: ['held', 'used'] },
    transaction,
  });
  if (uses >= code.perPerson) return refuseCode('You have used this code already.');
  return code;
}

/**
 * Takes one use of a code for an order. One conditional update decides, so that fifty buyers at once cannot take six of five.
 * @throws CODE_REFUSED when all uses are taken
 */
export async function holdCode(
  code: Code,
  orderId: string,
  userId: string,
  transaction: Transaction,
): Promise<void> {
  const taken = await sequelize.query(
    `update codes set used = used + 1 where id = :id and (max_uses is null or used < max_uses) returning id`,
    { replacements: { id: code.id }, type: QueryTypes.SELECT, transaction },
  );
  if (taken.length === 0) refuseCode('All uses of this code are taken.');
  await CodeUse.create({ codeId: code.id, orderId, userId, state: 'held' }, { transaction });
}

/** Marks the code of a paid order as used. */
export async function spendCode(orderId: string, transaction: Transaction): Promise<void> {
  await CodeUse.update({ state: 'used' }, { where: { orderId, state: 'held' }, transaction });
}

/** Gives the use of a code back when its order was not paid. */
export async function releaseCode(orderId: string, transaction: Transaction): Promise<void> {
  const released = await sequelize.query<{ code_id: string }>(
    `update code_uses set state = 'released' where order_id = :orderId and state = 'held' returning code_id`,
    { replacements: { orderId }, type: QueryTypes.SELECT, transaction },
  );
  for (const { code_id: id } of released) {
    await sequelize.query(`update codes set used = used - 1 where id = :id`, {
      replacements: { id },
      type: QueryTypes.UPDATE,
      transaction,
    });
  }
}
