import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    -- Events from the payment service, stored once and worked off later.
    create table inbox_events (
      id text primary key check (length(id) <= 255),
      type text not null,
      object_id text not null,
      received_at timestamptz not null default now(),
      processed_at timestamptz,
      attempts integer not null default 0,
      error text
    );
    create index inbox_events_waiting on inbox_events (received_at) where processed_at is null;
    -- E-mails, written in the transaction that causes them and sent later.
    create table outbox_emails (
      id uuid primary key default gen_random_uuid(),
      kind text not null,
      -- Says what the mail is about, so that the same one is never written twice.
      reference text not null unique,
      to_name text not null default '',
      to_address text not null check (to_address ~ '^[^\\s,;<>@]+@[^\\s,;<>@]+$'),
      subject text not null check (subject !~ '[\\r\\n]'),
      text_body text not null,
      html_body text not null,
      state text not null default 'waiting' check (state in ('waiting', 'sent', 'failed')),
      attempts integer not null default 0,
      error text,
      created_at timestamptz not null default now(),
      sent_at timestamptz
    );
    create index outbox_emails_waiting on outbox_emails (created_at) where state = 'waiting';
    create table audits (
      id bigint generated always as identity primary key,
      actor_id uuid,
      action text not null,
      thing_kind text not null,
      thing_id text not null,
      details jsonb not null default '{}',
      created_at timestamptz not null default now()
    );
    create index audits_thing on audits (thing_kind, thing_id, id desc);
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `drop table audits, outbox_emails, inbox_events`);
};
