import type { Transaction } from 'sequelize';
import { Licence, type Order, type OrderLine } from '#db/models/index.ts';

/** Gives the buyer a licence for each line of a paid order, once: the database allows one a line. */
export async function grantLicences(
  order: Order,
  lines: readonly OrderLine[],
  transaction: Transaction,
): Promise<Licence[]> {
  const licences: Licence[] = [];
  for (const line of lines) {
    const [licence] = await Licence.findOrCreate({
      where: { orderLineId: line.id },
      defaults: {
        orderLineId: line.id,
        userId: order.userId,
        planId: line.planId,
        kind: line.kind,
        pieces: line.pieces,
        holderName: order.name,
      },
      transaction,
    });
    licences.push(licence);
  }
  return licences;
}

/** Ends the licence of a line whose money went back in full. Ending it again changes nothing. */
export async function endLicence(
  orderLineId: string,
  state: 'refunded' | 'revoked',
  transaction: Transaction,
): Promise<void> {
  await Licence.update(
    { state, endedAt: new Date() },
    { where: { orderLineId, state: 'active' }, transaction },
  );
}
