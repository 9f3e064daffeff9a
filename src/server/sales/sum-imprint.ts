import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';

/** What an imprint is owed now, in one currency, and how it came to that; minor units. */
export interface ImprintBalance {
  currency: string;
  /** Shares of sales, taken-back shares (negative), payouts (negative), and what is left: the sum of the three. */
  soldMinor: number;
  refundedMinor: number;
  paidOutMinor: number;
  owedMinor: number;
}

/** The balance of an imprint in every currency that it ever sold in, from the ledger; `until` leaves out what came at or after it. */
export async function sumImprint(imprintId: string, until?: Date): Promise<ImprintBalance[]> {
  const rows = await sequelize.query<{ currency: string; sold: string; refunded: string; paid_out: string }>(
    `select e.currency,
       coalesce(-sum(e.amount_minor) filter (where t.kind in ('sale', 'adjustment')), 0) as sold,
       coalesce(-sum(e.amount_minor) filter (where t.kind in ('refund', 'dispute')), 0) as refunded,
       coalesce(-sum(e.amount_minor) filter (where t.kind = 'payout'), 0) as paid_out
     from ledger_entries e
     join ledger_accounts a on a.id = e.account_id and a.imprint_id = :imprintId
     join ledger_transactions t on t.id = e.transaction_id
     where cast(:until as timestamptz) is null or t.happened_at < :until
     group by e.currency order by e.currency`,
    { replacements: { imprintId, until: until?.toISOString() ?? null }, type: QueryTypes.SELECT },
  );
  return rows.map((row) => {
    const [soldMinor, refundedMinor, paidOutMinor] = [
      Number(row.sold),
      Number(row.refunded),
      Number(row.paid_out),
    ];
    return {
      currency: row.currency,
      soldMinor,
      refundedMinor,
      paidOutMinor,
      owedMinor: soldMinor + refundedMinor + paidOutMinor,
    };
  });
}

/** Sales grouped by one thing, for the tables of the sales book. */
export interface Grouped {
  label: string;
  currency: string;
  sales: number;
  grossMinor: number;
  refundedMinor: number;
  imprintMinor: number;
}

const GROUPS = {
  source: `coalesce(s.label, 'no tracked link')`,
  plan: `p.title`,
  country: `coalesce(o.country, 'unknown')`,
} as const;

/** What sold, grouped by tracked link, plan or country, from `from` on and before `until`; the largest first, fifty at most. */
export async function groupSales(
  imprintId: string,
  by: keyof typeof GROUPS,
  period: { from?: Date | undefined; until?: Date | undefined },
): Promise<Grouped[]> {
  const rows = await sequelize.query<{
    label: string;
    currency: string;
    sales: number;
    gross: string;
    refunded: string;
    imprint: string;
  }>(
    `with mine as (
       select l.id, l.order_id, l.plan_id, l.price_minor - l.discount_minor as gross, l.refunded_minor,
         coalesce((select -sum(e.amount_minor) from ledger_transactions t join ledger_entries e on e.transaction_id = t.id
           join ledger_accounts a on a.id = e.account_id and a.kind = 'imprint' where t.order_line_id = l.id), 0) as imprint
       from order_lines l join plans pl on pl.id = l.plan_id where pl.imprint_id = :imprintId
     )
     select ${GROUPS[by]} as label, o.currency, count(*)::int as sales,
       sum(m.gross) as gross, sum(m.refunded_minor) as refunded, sum(m.imprint) as imprint
     from mine m join orders o on o.id = m.order_id and o.paid_at is not null
     join plans p on p.id = m.plan_id left join sources s on s.id = o.source_id
     where (cast(:from as timestamptz) is null or o.paid_at >= :from) and (cast(:until as timestamptz) is null or o.paid_at < :until)
     group by 1, 2 order by gross desc, 1 limit 50`,
    {
      replacements: {
        imprintId,
        from: period.from?.toISOString() ?? null,
        until: period.until?.toISOString() ?? null,
      },
      type: QueryTypes.SELECT,
    },
  );
  return rows.map((row) => ({
    label: row.label,
    currency: row.currency,
    sales: row.sales,
    grossMinor: Number(row.gross),
    refundedMinor: Number(row.refunded),
    imprintMinor: Number(row.imprint),
  }));
}
