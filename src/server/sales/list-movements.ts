import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';

/** One line of an imprint's sales book: money that came in, went back, or was paid out. */
export interface Movement {
  transactionId: string;
  kind: 'sale' | 'refund' | 'dispute' | 'payout' | 'adjustment';
  happenedAt: Date;
  currency: string;
  memo: string;
  orderId: string | null;
  orderNumber: number | null;
  planTitle: string | null;
  licenceKind: 'personal' | 'workshop' | null;
  country: string | null;
  sourceLabel: string | null;
  code: string | null;
  /** What the buyer paid (negative: got back), tax in it, the payment fee, the house's part after that fee, and what the imprint gets. */
  grossMinor: number;
  taxMinor: number;
  feeMinor: number;
  houseMinor: number;
  imprintMinor: number;
}

interface Row {
  transaction_id: string;
  kind: Movement['kind'];
  happened_at: Date;
  currency: string;
  memo: string;
  order_id: string | null;
  order_number: string | null;
  plan_title: string | null;
  licence_kind: Movement['licenceKind'];
  country: string | null;
  source_label: string | null;
  code: string | null;
  clearing: string;
  fees: string;
  tax: string;
  house: string;
  imprint: string;
  cursor: string;
}

export interface MovementQuery {
  imprintId: string;
  /** From this instant on, before that one; in UTC. */
  from?: Date | undefined;
  until?: Date | undefined;
  currency?: string | undefined;
  orderId?: string | undefined;
  after?: string | undefined;
  limit: number;
  /** Newest first for the screen, oldest first for a statement. */
  order: 'newest' | 'oldest';
}

const CURSOR = /^(\d{1,17})_([0-9a-f-]{36})$/;

/**
 * An imprint's movements straight from the ledger, a page at a time.
 * Amounts are signed as a person reads them: positive is money for the imprint, the house or the state, negative is money that went back.
 */
export async function listMovements(
  query: MovementQuery,
): Promise<{ movements: Movement[]; next: string | null }> {
  const cursor = CURSOR.exec(query.after ?? '');
  const direction = query.order === 'newest' ? 'desc' : 'asc';
  const past = query.order === 'newest' ? '<' : '>';
  const rows = await sequelize.query<Row>(
    `with mine as (
       -- The imprint's own transactions: those that moved its account, and those of its order lines that moved only others.
       select t.id from ledger_transactions t join ledger_entries e on e.transaction_id = t.id
       join ledger_accounts a on a.id = e.account_id where a.imprint_id = :imprintId
       union
       select t.id from ledger_transactions t join order_lines l on l.id = t.order_line_id join plans p on p.id = l.plan_id
       where p.imprint_id = :imprintId
     )
     select t.id as transaction_id, t.kind, t.happened_at, e.currency, t.memo,
       o.id as order_id, o.number as order_number, l.title as plan_title, l.kind as licence_kind, o.country,
       s.label as source_label, c.code,
       coalesce(sum(e.amount_minor) filter (where a.kind = 'clearing'), 0) as clearing,
       coalesce(sum(e.amount_minor) filter (where a.kind = 'fees'), 0) as fees,
       coalesce(sum(e.amount_minor) filter (where a.kind = 'tax'), 0) as tax,
       coalesce(sum(e.amount_minor) filter (where a.kind = 'house'), 0) as house,
       coalesce(sum(e.amount_minor) filter (where a.kind = 'imprint' and a.imprint_id = :imprintId), 0) as imprint,
       (extract(epoch from t.happened_at) * 1000000)::bigint || '_' || t.id as cursor
     from mine
     join ledger_transactions t on t.id = mine.id
     join ledger_entries e on e.transaction_id = t.id
     join ledger_accounts a on a.id = e.account_id
     left join order_lines l on l.id = t.order_line_id
     left join orders o on o.id = l.order_id
     left join sources s on s.id = o.source_id
     left join codes c on c.id = o.code_id
     where (cast(:from as timestamptz) is null or t.happened_at >= :from)
       and (cast(:until as timestamptz) is null or t.happened_at < :until)
       and (cast(:currency as text) is null or e.currency = :currency)
       and (cast(:orderId as uuid) is null or o.id = :orderId)
       and (cast(:at as bigint) is null or (t.happened_at, t.id) ${past} (timestamptz 'epoch' + cast(:at as bigint) * interval '1 microsecond', cast(:id as uuid)))
     group by t.id, e.currency, o.id, l.id, s.id, c.id
     order by t.happened_at ${direction}, t.id ${direction}
     limit :limit`,
    {
      replacements: {
        imprintId: query.imprintId,
        from: query.from?.toISOString() ?? null,
        until: query.until?.toISOString() ?? null,
        currency: query.currency ?? null,
        orderId: query.orderId ?? null,
        at: cursor?.[1] ?? null,
        id: cursor?.[2] ?? null,
        limit: query.limit + 1,
      },
      type: QueryTypes.SELECT,
    },
  );
  const shown = rows.slice(0, query.limit);
  return {
    movements: shown.map(readRow),
    next: rows.length > query.limit ? (shown.at(-1)?.cursor ?? null) : null,
  };
}

function readRow(row: Row): Movement {
  const fees = Number(row.fees);
  const isPayout = row.kind === 'payout';
  return {
    transactionId: row.transaction_id,
    kind: row.kind,
    happenedAt: row.happened_at,
    currency: row.currency,
    memo: row.memo,
    orderId: row.order_id,
    orderNumber: row.order_number === null ? null : Number(row.order_number),
    planTitle: row.plan_title,
    licenceKind: row.licence_kind,
    country: row.country,
    sourceLabel: row.source_label,
    code: row.code,
    grossMinor: isPayout ? 0 : Number(row.clearing) + fees,
    taxMinor: 0 - Number(row.tax),
    feeMinor: fees,
    houseMinor: 0 - Number(row.house) - fees,
    imprintMinor: 0 - Number(row.imprint),
  };
}
