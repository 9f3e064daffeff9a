import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    create table questions (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      user_id uuid references users on delete set null,
      author_name text not null,
      body text not null check (length(body) between 3 and 4000),
      state text not null default 'shown' check (state in ('shown', 'hidden')),
      created_at timestamptz not null default now()
    );
    create index questions_plan on questions (plan_id, created_at desc, id);
    create table answers (
      id uuid primary key default gen_random_uuid(),
      question_id uuid not null references questions on delete cascade,
      user_id uuid references users on delete set null,
      author_name text not null,
      is_imprint boolean not null default false,
      body text not null check (length(body) between 1 and 8000),
      created_at timestamptz not null default now()
    );
    create index answers_question on answers (question_id, created_at);
    create table builds (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      licence_id uuid references licences on delete set null,
      user_id uuid references users on delete set null,
      author_name text not null,
      body text not null check (length(body) between 1 and 4000),
      verdict smallint not null check (verdict between 1 and 5),
      state text not null default 'shown' check (state in ('shown', 'hidden')),
      created_at timestamptz not null default now(),
      unique (licence_id)
    );
    create index builds_plan on builds (plan_id, created_at desc, id);
    create table reports (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      revision_id uuid references revisions on delete set null,
      user_id uuid references users on delete set null,
      body text not null check (length(body) between 3 and 4000),
      state text not null default 'open' check (state in ('open', 'accepted', 'declined')),
      created_at timestamptz not null default now()
    );
    create index reports_plan on reports (plan_id, created_at desc, id);
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `drop table reports, builds, answers, questions`);
};
