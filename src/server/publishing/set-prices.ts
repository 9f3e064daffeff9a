import { randomUUID } from 'node:crypto';
import { sequelize } from '#db/client.ts';
import { LicenceOffer } from '#db/models/index.ts';
import { minorDigits } from '#lib/money/format-money.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { requireDraftPlan } from './get-draft.ts';

export interface PriceToSet {
  kind: 'personal' | 'workshop';
  currency: 'EUR' | 'USD' | 'GBP' | 'CAD' | 'AUD' | 'JPY';
  priceMinor: number;
  pieces: number | null;
}

/**
 * Sets the licence prices of a plan. A changed price is a new offer; orders keep the one they were made at.
 * @throws BAD_INPUT for a price too small for the payment service to take (below 1.00, but 0 is free)
 */
export async function setPrices(options: {
  actor: Actor;
  planId: string;
  prices: PriceToSet[];
}): Promise<void> {
  const plan = await requireDraftPlan(options.actor, options.planId);
  requireMay(options.actor, 'plan:price', { imprintId: plan.imprintId });
  for (const { priceMinor, currency, kind } of options.prices) {
    const least = 10 ** minorDigits(currency) * (currency === 'JPY' ? 100 : 1);
    if (priceMinor !== 0 && priceMinor < least) {
      refuse('BAD_INPUT', {
        fields: {
          [kind]: 'The payment service takes no amount as small as that. Leave it at zero for a free plan.',
        },
      });
    }
  }
  await sequelize.transaction(async (transaction) => {
    const standing = await LicenceOffer.findAll({
      where: { planId: plan.id, isActive: true },
      transaction,
      lock: transaction.LOCK.UPDATE,
    });
    const isSame = (offer: LicenceOffer, price: PriceToSet) =>
      offer.kind === price.kind &&
      offer.currency === price.currency &&
      offer.priceMinor === price.priceMinor &&
      offer.pieces === price.pieces;
    for (const offer of standing) {
      if (!options.prices.some((price) => isSame(offer, price)))
        await offer.update({ isActive: false }, { transaction });
    }
    for (const price of options.prices) {
      if (standing.some((offer) => isSame(offer, price))) continue;
      await LicenceOffer.create({ id: randomUUID(), planId: plan.id, ...price }, { transaction });
    }
    await writeAudit(
      { actor: options.actor, action: 'plan:price', thing: { kind: 'plan', id: plan.id } },
      transaction,
    );
  });
}
