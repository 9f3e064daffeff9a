import { writeCsv } from '#lib/money/csv.ts';
import { writeAmount } from '#lib/money/format-money.ts';
import type { Actor } from '../accounts/actor.ts';
import { listMovements, type Movement } from './list-movements.ts';
import { monthBounds } from './month.ts';
import { requireImprint } from './require-imprint.ts';
import { sumImprint } from './sum-imprint.ts';

export interface StatementFile {
  fileName: string;
  csv: string;
  openingMinor: number;
  closingMinor: number;
}

const HEAD = [
  'date (UTC)',
  'what',
  'order',
  'plan',
  'licence',
  'country',
  'tracked link',
  'code',
  'currency',
  'paid by buyer',
  'of which tax',
  'payment fee',
  'house',
  'imprint',
  'balance',
];
const PAGE = 500;

const WORDS: Record<Movement['kind'], string> = {
  sale: 'sale',
  refund: 'refund',
  dispute: 'disputed payment',
  payout: 'paid out',
  adjustment: 'adjustment',
};

/**
 * The statement of one month in one currency, for an accountant: what was owed at its start, every movement with its shares and the running balance,
 * and what is owed at its end. In each row: paid = tax + fee + house + imprint; and opening + all rows = closing, to the minor unit.
 * @throws NOT_FOUND to people who may not read the sales book
 * @throws Error when the rows do not add up to the ledger's own balance, which would be a fault of ours that no statement may hide
 */
export async function writeStatement(options: {
  actor: Actor;
  slug: string;
  month: string;
  currency: string;
}): Promise<StatementFile> {
  const { currency } = options;
  const imprint = await requireImprint(options.actor, options.slug, 'sales:read');
  const { from, until } = monthBounds(options.month);
  const owedAt = async (at: Date) =>
    (await sumImprint(imprint.id, at)).find((balance) => balance.currency === currency)?.owedMinor ?? 0;
  const openingMinor = await owedAt(from);
  const closingMinor = await owedAt(until);

  const amount = (minor: number) => writeAmount(minor, currency);
  const blank = (count: number) => Array.from({ length: count }, () => '');
  const rows: (string | number)[][] = [HEAD];
  rows.push([
    from.toISOString().slice(0, 10),
    'owed at the start',
    ...blank(6),
    currency,
    ...blank(5),
    amount(openingMinor),
  ]);
  let balance = openingMinor;
  let after: string | undefined;
  do {
    const page = await listMovements({
      imprintId: imprint.id,
      from,
      until,
      currency,
      after,
      limit: PAGE,
      order: 'oldest',
    });
    for (const movement of page.movements) {
      balance += movement.imprintMinor;
      rows.push([
        movement.happenedAt.toISOString().slice(0, 10),
        WORDS[movement.kind],
        movement.orderNumber ?? '',
        movement.planTitle ?? '',
        movement.licenceKind ?? '',
        movement.country ?? '',
        movement.sourceLabel ?? '',
        movement.code ?? '',
        currency,
        amount(movement.grossMinor),
        amount(movement.taxMinor),
        amount(movement.feeMinor),
        amount(movement.houseMinor),
        amount(movement.imprintMinor),
        amount(balance),
      ]);
    }
    after = page.next ?? undefined;
  } while (after);
  const lastDay = new Date(until.getTime() - 86_400_000).toISOString().slice(0, 10);
  rows.push([lastDay, 'owed at the end', ...blank(6), currency, ...blank(5), amount(balance)]);
  if (balance !== closingMinor)
    throw new Error(
      `statement of ${imprint.slug} ${options.month} ends at ${balance}, the ledger says ${closingMinor}`,
    );
  return {
    fileName: `benchleaf-${imprint.slug}-${options.month}-${currency}.csv`,
    csv: writeCsv(rows),
    openingMinor,
    closingMinor,
  };
}
