import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    create table users (
      id uuid primary key default gen_random_uuid(),
      name text not null check (length(name) between 1 and 200),
      email text not null check (email = lower(email) and length(email) <= 254 and email !~ '[\\s,;<>]'),
      email_verified boolean not null default false,
      image text,
      role text not null default 'member' check (role in ('member', 'staff')),
      units text not null default 'mm' check (units in ('mm', 'in')),
      erased_at timestamptz,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      unique (email)
    );
    create table sessions (
      id uuid primary key default gen_random_uuid(),
      user_id uuid not null references users on delete cascade,
      token text not null unique,
      expires_at timestamptz not null,
      ip_address text,
      user_agent text,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create index sessions_user on sessions (user_id);
    create table accounts (
      id uuid primary key default gen_random_uuid(),
      user_id uuid not null references users on delete cascade,
      account_id text not null,
      provider_id text not null,
      access_token text,
      refresh_token text,
      id_token text,
      access_token_expires_at timestamptz,
      refresh_token_expires_at timestamptz,
      scope text,
      password text,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      unique (provider_id, account_id)
    );
    create index accounts_user on accounts (user_id);
    create table verifications (
      id uuid primary key default gen_random_uuid(),
      identifier text not null,
      value text not null,
      expires_at timestamptz not null,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now()
    );
    create index verifications_identifier on verifications (identifier);
    create table rate_limits (
      id uuid primary key default gen_random_uuid(),
      key text not null unique,
      count integer not null,
      last_request bigint not null
    );
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `drop table rate_limits, verifications, accounts, sessions, users`);
};
