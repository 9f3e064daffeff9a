import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    create table ledger_accounts (
      id uuid primary key default gen_random_uuid(),
      -- clearing: held by the payment service; fees, tax, house: what they say; imprint: owed to one imprint; paid_out: sent to it.
      kind text not null check (kind in ('clearing', 'fees', 'tax', 'house', 'imprint')),
      imprint_id uuid references imprints on delete restrict,
      currency text not null check (currency ~ '^[A-Z]{3}$'),
      created_at timestamptz not null default now(),
      unique nulls not distinct (kind, imprint_id, currency),
      check ((kind = 'imprint') = (imprint_id is not null)),
      unique (id, currency)
    );
    create table ledger_transactions (
      id uuid primary key default gen_random_uuid(),
      -- Names what happened once, e.g. sale:<order line>, refund:<payment refund>:<line>, payout:<payout>.
      reference text not null unique,
      kind text not null check (kind in ('sale', 'refund', 'dispute', 'payout', 'adjustment')),
      order_line_id uuid references order_lines on delete restrict,
      memo text not null default '',
      happened_at timestamptz not null default now(),
      created_at timestamptz not null default now()
    );
    create index ledger_transactions_line on ledger_transactions (order_line_id);
    create table ledger_entries (
      id uuid primary key default gen_random_uuid(),
      transaction_id uuid not null references ledger_transactions on delete restrict,
      account_id uuid not null,
      currency text not null,
      -- Positive: the account receives (debit); negative: it gives (credit).
      amount_minor bigint not null check (amount_minor <> 0),
      foreign key (account_id, currency) references ledger_accounts (id, currency)
    );
    create index ledger_entries_transaction on ledger_entries (transaction_id);
    create index ledger_entries_account on ledger_entries (account_id);
    create function check_ledger_sum() returns trigger language plpgsql as $$
      begin
        if exists (
          select 1 from ledger_entries where transaction_id = new.transaction_id
          group by currency having sum(amount_minor) <> 0
        ) or not exists (select 1 from ledger_entries where transaction_id = new.transaction_id) then
          raise exception 'ledger transaction % does not sum to zero', new.transaction_id using errcode = 'check_violation';
        end if;
        return null;
      end $$;
    create constraint trigger ledger_entries_sum after insert on ledger_entries
      deferrable initially deferred for each row execute function check_ledger_sum();
    create function check_ledger_transaction() returns trigger language plpgsql as $$
      begin
        if not exists (select 1 from ledger_entries where transaction_id = new.id) then
          raise exception 'ledger transaction % has no entries', new.id using errcode = 'check_violation';
        end if;
        return null;
      end $$;
    create constraint trigger ledger_transactions_filled after insert on ledger_transactions
      deferrable initially deferred for each row execute function check_ledger_transaction();
    create function refuse_ledger_change() returns trigger language plpgsql as $$
      begin
        raise exception 'the ledger is only ever added to' using errcode = 'check_violation';
      end $$;
    create trigger ledger_entries_kept before update or delete on ledger_entries
      for each row execute function refuse_ledger_change();
    create trigger ledger_transactions_kept before update or delete on ledger_transactions
      for each row execute function refuse_ledger_change();
    create trigger ledger_entries_untruncated before truncate on ledger_entries
      for each statement execute function refuse_ledger_change();
    create table payouts (
      id uuid primary key default gen_random_uuid(),
      imprint_id uuid not null references imprints on delete restrict,
      amount_minor integer not null check (amount_minor > 0),
      currency text not null check (currency ~ '^[A-Z]{3}$'),
      state text not null default 'started' check (state in ('started', 'sent', 'failed')),
      payment_transfer_id text unique,
      failure text,
      created_at timestamptz not null default now(),
      sent_at timestamptz
    );
    create index payouts_imprint on payouts (imprint_id, created_at desc);
    create table statements (
      id uuid primary key default gen_random_uuid(),
      imprint_id uuid not null references imprints on delete restrict,
      currency text not null check (currency ~ '^[A-Z]{3}$'),
      period_start date not null,
      period_end date not null check (period_end > period_start),
      opening_minor bigint not null,
      closing_minor bigint not null,
      csv text not null,
      created_at timestamptz not null default now(),
      unique (imprint_id, currency, period_start, period_end)
    );
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `
    drop table statements, payouts, ledger_entries, ledger_transactions, ledger_accounts;
    drop function check_ledger_sum(); drop function check_ledger_transaction(); drop function refuse_ledger_change()`);
};
