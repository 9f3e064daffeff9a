import { QueryTypes, type Transaction } from 'sequelize';
import { LedgerAccount, LedgerEntry, LedgerTransaction } from '#db/models/index.ts';
import { sequelize } from '#db/client.ts';
import type { LedgerSplit } from '#lib/money/split.ts';

type AccountKind = 'clearing' | 'fees' | 'tax' | 'house' | 'imprint';

/** The account of a kind in a currency, made when it is first needed. Safe when two do so at once. */
async function findOrOpenAccount(
  kind: AccountKind,
  imprintId: string | null,
  currency: string,
  transaction: Transaction,
): Promise<string> {
  await sequelize.query(
    `insert into ledger_accounts (kind, imprint_id, currency) values (:kind, :imprintId, :currency) on conflict do nothing`,
    { replacements: { kind, imprintId, currency }, type: QueryTypes.INSERT, transaction },
  );
  const account = await LedgerAccount.findOne({
    where: { kind, imprintId, currency },
    attributes: ['id'],
    transaction,
    rejectOnEmpty: true,
  });
  return account.id;
}

export interface LedgerPosting {
  /** Names what happened, once and for all; posting the same reference again does nothing. */
  reference: string;
  kind: 'sale' | 'refund' | 'dispute' | 'payout' | 'adjustment';
  imprintId: string;
  orderLineId: string | null;
  currency: string;
  memo: string;
  happenedAt: Date;
  split: LedgerSplit;
}

/**
 * Adds a transaction to the ledger, inside the caller's transaction. The database refuses one that does not sum to zero.
 * @returns false when this reference was posted before
 */
export async function postLedger(posting: LedgerPosting, transaction: Transaction): Promise<boolean> {
  const existing = await LedgerTransaction.findOne({
    where: { reference: posting.reference },
    attributes: ['id'],
    transaction,
  });
  if (existing) return false;
  const { split, currency } = posting;
  const amounts: [AccountKind, number][] = [
    ['clearing', split.clearingMinor],
    ['fees', split.feesMinor],
    ['tax', split.taxMinor],
    ['imprint', split.imprintMinor],
    ['house', split.houseMinor],
  ];
  const moved = amounts.filter(([, amountMinor]) => amountMinor !== 0);
  // A free copy moves no money and leaves no trace in the ledger.
  if (moved.length === 0) return false;
  const entry = await LedgerTransaction.create(
    {
      reference: posting.reference,
      kind: posting.kind,
      orderLineId: posting.orderLineId,
      memo: posting.memo,
      happenedAt: posting.happenedAt,
    },
    { transaction },
  );
  for (const [kind, amountMinor] of moved) {
    const accountId = await findOrOpenAccount(
      kind,
      kind === 'imprint' ? posting.imprintId : null,
      currency,
      transaction,
    );
    await LedgerEntry.create({ transactionId: entry.id, accountId, currency, amountMinor }, { transaction });
  }
  return true;
}
