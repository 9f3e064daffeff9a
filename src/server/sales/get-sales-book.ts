import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Actor } from '../accounts/actor.ts';
import { may } from '../accounts/may.ts';
import { listMovements, type Movement } from './list-movements.ts';
import { monthBounds } from './month.ts';
import { requireImprint } from './require-imprint.ts';
import { groupSales, sumImprint, type Grouped, type ImprintBalance } from './sum-imprint.ts';

export interface SalesBook {
  imprint: { id: string; slug: string; name: string; sharePermille: number; payoutsEnabled: boolean };
  month: string | null;
  /** Months in which something happened, newest first. */
  months: string[];
  balances: ImprintBalance[];
  movements: Movement[];
  next: string | null;
  bySource: Grouped[];
  byPlan: Grouped[];
  byCountry: Grouped[];
  mayPayOut: boolean;
  mayRefund: boolean;
}

const PAGE = 25;

async function listMonths(imprintId: string): Promise<string[]> {
  const rows = await sequelize.query<{ month: string }>(
    `select distinct to_char(t.happened_at at time zone 'UTC', 'YYYY-MM') as month
     from ledger_entries e join ledger_accounts a on a.id = e.account_id and a.imprint_id = :imprintId
     join ledger_transactions t on t.id = e.transaction_id order by month desc limit 60`,
    { replacements: { imprintId }, type: QueryTypes.SELECT },
  );
  return rows.map((row) => row.month);
}

/**
 * The sales book of an imprint, over all time or one month: balances, movements, and what sold through which link, of which plan, in which country.
 * @throws NOT_FOUND to people who may not read it
 */
export async function getSalesBook(
  actor: Actor,
  slug: string,
  query: { after?: string | undefined; month?: string | undefined },
): Promise<SalesBook> {
  const imprint = await requireImprint(actor, slug, 'sales:read');
  const period = query.month ? monthBounds(query.month) : {};
  const [months, balances, page, bySource, byPlan, byCountry] = await Promise.all([
    listMonths(imprint.id),
    sumImprint(imprint.id),
    listMovements({ imprintId: imprint.id, ...period, after: query.after, limit: PAGE, order: 'newest' }),
    groupSales(imprint.id, 'source', period),
    groupSales(imprint.id, 'plan', period),
    groupSales(imprint.id, 'country', period),
  ]);
  return {
    imprint: {
      id: imprint.id,
      slug: imprint.slug,
      name: imprint.name,
      sharePermille: imprint.sharePermille,
      payoutsEnabled: imprint.payoutsEnabled,
    },
    month: query.month ?? null,
    months,
    balances,
    movements: page.movements,
    next: page.next,
    bySource,
    byPlan,
    byCountry,
    mayPayOut: may(actor, 'payout:start', { imprintId: imprint.id }),
    mayRefund: may(actor, 'order:refund', { imprintIds: [imprint.id] }),
  };
}
