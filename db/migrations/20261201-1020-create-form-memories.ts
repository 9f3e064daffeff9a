import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `
    -- What a person typed into a form that was refused, kept for a few minutes so that nothing is lost.
    create table form_memories (
      id text primary key check (id ~ '^[0-9a-f]{64}$'),
      data jsonb not null,
      expires_at timestamptz not null
    );
    create index form_memories_expiry on form_memories (expires_at);`);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `drop table form_memories`);
};
