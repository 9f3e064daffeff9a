import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    create table licence_offers (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      kind text not null check (kind in ('personal', 'workshop')),
      price_minor integer not null check (price_minor >= 0 and price_minor <= 100000000),
      currency text not null check (currency in ('EUR', 'USD', 'GBP', 'CAD', 'AUD', 'JPY')),
      -- How many pieces a workshop may sell.
      pieces integer check (pieces > 0),
      is_active boolean not null default true,
      created_at timestamptz not null default now(),
      check ((kind = 'workshop') = (pieces is not null))
    );
    create unique index licence_offers_active on licence_offers (plan_id, kind, currency) where is_active;
    create table fits (
      id uuid primary key default gen_random_uuid(),
      user_id uuid not null references users on delete cascade,
      plan_id uuid not null references plans on delete cascade,
      name text not null check (length(name) between 1 and 120),
      values jsonb not null default '{}',
      measured jsonb not null default '{}',
      prices jsonb not null default '{}',
      units text not null check (units in ('mm', 'in')),
      kerf_nm bigint not null default 3000000 check (kerf_nm between 0 and 20000000),
      stock jsonb not null default '[]',
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create index fits_owner on fits (user_id, plan_id, updated_at desc);
    create table sources (
      id uuid primary key default gen_random_uuid(),
      imprint_id uuid not null references imprints on delete cascade,
      slug text not null unique check (slug ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length(slug) <= 40),
      label text not null check (length(label) between 1 and 120),
      kind text not null check (kind in ('video', 'page', 'newsletter', 'talk', 'other')),
      created_at timestamptz not null default now()
    );
    create index sources_imprint on sources (imprint_id, created_at desc);
    create table visit_days (
      plan_id uuid not null references plans on delete cascade,
      source_id uuid references sources on delete cascade,
      day date not null,
      visits integer not null default 0 check (visits >= 0),
      unique nulls not distinct (plan_id, day, source_id)
    );
    create table codes (
      id uuid primary key default gen_random_uuid(),
      imprint_id uuid not null references imprints on delete cascade,
      plan_id uuid references plans on delete cascade,
      code text not null check (code ~ '^[A-Z0-9][A-Z0-9-]{2,29}$'),
      percent_off integer check (percent_off between 1 and 100),
      amount_off_minor integer check (amount_off_minor > 0),
      currency text,
      max_uses integer check (max_uses > 0),
      used integer not null default 0 check (used >= 0),
      per_person integer not null default 1 check (per_person > 0),
      starts_at timestamptz not null default now(),
      ends_at timestamptz,
      source_id uuid references sources on delete set null,
      note text not null default '',
      is_active boolean not null default true,
      created_at timestamptz not null default now(),
      unique (code),
      check ((percent_off is null) <> (amount_off_minor is null)),
      check ((amount_off_minor is null) = (currency is null)),
      check (max_uses is null or used <= max_uses)
    );
    create index codes_imprint on codes (imprint_id, created_at desc);
    create sequence order_numbers start 1001;
    create table orders (
      id uuid primary key default gen_random_uuid(),
      number bigint not null unique default nextval('order_numbers'),
      user_id uuid references users on delete set null,
      email text not null,
      name text not null,
      state text not null default 'pending'
        check (state in ('pending', 'paid', 'partly_refunded', 'refunded', 'expired', 'failed')),
      currency text not null check (currency ~ '^[A-Z]{3}$'),
      subtotal_minor integer not null check (subtotal_minor >= 0),
      discount_minor integer not null default 0 check (discount_minor >= 0),
      tax_minor integer not null default 0 check (tax_minor >= 0),
      total_minor integer not null check (total_minor >= 0),
      refunded_minor integer not null default 0 check (refunded_minor >= 0 and refunded_minor <= total_minor),
      fee_minor integer not null default 0 check (fee_minor >= 0),
      country text check (country ~ '^[A-Z]{2}$'),
      source_id uuid references sources on delete set null,
      code_id uuid references codes on delete set null,
      -- What was agreed to at the time: the consent to immediate supply, in the words shown.
      consent text not null default '',
      request_key text not null,
      checkout_session_id text unique,
      checkout_url text,
      payment_intent_id text unique,
      charge_id text unique,
      created_at timestamptz not null default now(),
      expires_at timestamptz,
      paid_at timestamptz,
      updated_at timestamptz not null default now(),
      unique (user_id, request_key),
      -- Prices include the tax, as a person buying must be told: it is a part of the total and not on top.
      check (total_minor = subtotal_minor - discount_minor and tax_minor <= total_minor),
      check ((state in ('paid', 'partly_refunded', 'refunded')) = (paid_at is not null))
    );
    create index orders_user on orders (user_id, created_at desc, id);
    create index orders_paid on orders (paid_at desc, id) where paid_at is not null;
    create table order_lines (
      id uuid primary key default gen_random_uuid(),
      order_id uuid not null references orders on delete restrict,
      plan_id uuid not null references plans on delete restrict,
      revision_id uuid not null references revisions on delete restrict,
      offer_id uuid references licence_offers on delete set null,
      fit_id uuid references fits on delete set null,
      kind text not null check (kind in ('personal', 'workshop')),
      pieces integer check (pieces > 0),
      title text not null,
      price_minor integer not null check (price_minor >= 0),
      discount_minor integer not null default 0 check (discount_minor >= 0 and discount_minor <= price_minor),
      tax_minor integer not null default 0 check (tax_minor >= 0),
      -- The payment service's fee and the imprint's share as they stood when the line was paid, so that a refund undoes the same.
      fee_minor integer not null default 0 check (fee_minor >= 0),
      share_permille integer not null default 0 check (share_permille between 0 and 1000),
      refunded_minor integer not null default 0
        check (refunded_minor >= 0 and refunded_minor <= price_minor - discount_minor),
      unique (order_id, plan_id, kind)
    );
    create index order_lines_plan on order_lines (plan_id, order_id);
    create table code_uses (
      id uuid primary key default gen_random_uuid(),
      code_id uuid not null references codes on delete restrict,
      order_id uuid not null unique references orders on delete cascade,
      user_id uuid references users on delete set null,
      state text not null default 'held' check (state in ('held', 'used', 'released')),
      created_at timestamptz not null default now()
    );
    create index code_uses_code on code_uses (code_id, user_id);
    create table refunds (
      id uuid primary key default gen_random_uuid(),
      order_id uuid not null references orders on delete restrict,
      payment_refund_id text not null unique,
      amount_minor integer not null check (amount_minor > 0),
      reason text not null default '',
      requested_by uuid references users on delete set null,
      created_at timestamptz not null default now()
    );
    create index refunds_order on refunds (order_id);
    create sequence licence_numbers start 2001;
    create table licences (
      id uuid primary key default gen_random_uuid(),
      number bigint not null unique default nextval('licence_numbers'),
      order_line_id uuid unique references order_lines on delete restrict,
      user_id uuid references users on delete set null,
      plan_id uuid not null references plans on delete restrict,
      kind text not null check (kind in ('personal', 'workshop')),
      pieces integer check (pieces > 0),
      state text not null default 'active' check (state in ('active', 'refunded', 'revoked')),
      -- The name printed on copies.
      holder_name text not null check (length(holder_name) between 1 and 200),
      granted_at timestamptz not null default now(),
      ended_at timestamptz,
      check ((state = 'active') = (ended_at is null))
    );
    create index licences_user on licences (user_id, granted_at desc);
    create index licences_plan on licences (plan_id);
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `
    drop table licences, refunds, code_uses, order_lines, orders, codes, visit_days, sources, fits, licence_offers;
    drop sequence licence_numbers, order_numbers`);
};
