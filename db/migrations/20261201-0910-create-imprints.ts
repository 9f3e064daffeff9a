import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    create table imprints (
      id uuid primary key default gen_random_uuid(),
      slug text not null unique check (slug ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length(slug) <= 60),
      name text not null check (length(name) between 2 and 80),
      about text not null default '',
      state text not null default 'applied' check (state in ('applied', 'active', 'suspended')),
      -- The imprint's part of a sale after tax and fees, in thousandths.
      share_permille integer not null default 850 check (share_permille between 0 and 1000),
      payment_account_id text unique,
      payouts_enabled boolean not null default false,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create table imprint_members (
      imprint_id uuid not null references imprints on delete cascade,
      user_id uuid not null references users on delete cascade,
      role text not null check (role in ('owner', 'editor', 'bookkeeper')),
      created_at timestamptz not null default now(),
      primary key (imprint_id, user_id)
    );
    create index imprint_members_user on imprint_members (user_id);
    create table imprint_invites (
      id uuid primary key default gen_random_uuid(),
      imprint_id uuid not null references imprints on delete cascade,
      email text not null check (email = lower(email)),
      role text not null check (role in ('owner', 'editor', 'bookkeeper')),
      token_hash text not null unique,
      invited_by uuid references users on delete set null,
      expires_at timestamptz not null,
      accepted_at timestamptz,
      created_at timestamptz not null default now()
    );
    create index imprint_invites_imprint on imprint_invites (imprint_id);
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `drop table imprint_invites, imprint_members, imprints`);
};
