import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    -- An unstamped book, made once for everything that shapes it and stamped for each licence.
    create table books (
      content_key text primary key check (content_key ~ '^[0-9a-f]{64}$'),
      object_key text not null,
      sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
      bytes integer not null check (bytes > 0),
      pages integer not null check (pages > 0),
      created_at timestamptz not null default now()
    );
    create sequence copy_numbers start 10001;
    create table copies (
      id uuid primary key default gen_random_uuid(),
      number bigint not null unique default nextval('copy_numbers'),
      licence_id uuid not null references licences on delete restrict,
      revision_id uuid not null references revisions on delete restrict,
      fit_id uuid references fits on delete set null,
      fit jsonb not null,
      units text not null check (units in ('mm', 'in')),
      paper text not null check (paper in ('a4', 'letter')),
      content_key text not null check (content_key ~ '^[0-9a-f]{64}$'),
      state text not null default 'queued' check (state in ('queued', 'making', 'ready', 'failed')),
      progress smallint not null default 0 check (progress between 0 and 100),
      stage text not null default 'waiting',
      failure text,
      object_key text,
      sha256 text check (sha256 ~ '^[0-9a-f]{64}$'),
      bytes integer,
      pages integer,
      created_at timestamptz not null default now(),
      ready_at timestamptz,
      unique (licence_id, content_key),
      check (state <> 'ready' or (object_key is not null and sha256 is not null and ready_at is not null))
    );
    create index copies_licence on copies (licence_id, created_at desc);
    create table bench_states (
      licence_id uuid not null references licences on delete cascade,
      fit_id uuid not null references fits on delete cascade,
      ticked jsonb not null default '{}',
      updated_at timestamptz not null default now(),
      primary key (licence_id, fit_id)
    );
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `drop table bench_states, copies, books; drop sequence copy_numbers`);
};
