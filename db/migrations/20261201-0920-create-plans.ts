import type { Migration } from '../migrate.ts';

export const up: Migration = async ({ sql }) => {
  await sql(/* sql */ `

    create table plans (
      id uuid primary key default gen_random_uuid(),
      imprint_id uuid not null references imprints on delete restrict,
      slug text not null unique check (slug ~ '^[a-z0-9]+(-[a-z0-9]+)*$' and length(slug) <= 80),
      title text not null check (length(title) between 1 and 160),
      state text not null default 'draft' check (state in ('draft', 'published', 'unpublished')),
      -- Facts for the plan chest, taken from the current revision; none of them depends on a size that a buyer sets.
      summary text not null default '',
      skill smallint check (skill between 1 and 5),
      hours_low numeric(6, 1),
      hours_high numeric(6, 1),
      spaces text[] not null default '{}',
      tags text[] not null default '{}',
      story text not null default '',
      current_revision_id uuid,
      published_at timestamptz,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      search tsvector generated always as (
        setweight(to_tsvector('english', title), 'A') || setweight(to_tsvector('english', summary), 'B')
        || setweight(to_tsvector('english', story), 'C')
      ) stored,
      check (state = 'draft' or current_revision_id is not null)
    );
    create index plans_imprint on plans (imprint_id, created_at desc);
    create index plans_search on plans using gin (search);
    create index plans_chest on plans (published_at desc, id) where state = 'published';
    create table revisions (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      -- A, B, C …; a draft has none yet.
      letter text check (letter ~ '^[A-Z]{1,2}$'),
      state text not null default 'draft' check (state in ('draft', 'published', 'superseded')),
      source text not null default '' check (length(source) <= 400000),
      compiled jsonb,
      -- Outcome of the range proof: {state, proved, tried, failures, ranAt, sourceHash}.
      proof jsonb,
      notes text not null default '',
      -- Counts saves, so that two editors cannot overwrite each other unseen.
      version integer not null default 1,
      created_by uuid references users on delete set null,
      created_at timestamptz not null default now(),
      updated_at timestamptz not null default now(),
      published_at timestamptz,
      unique (plan_id, letter),
      unique (plan_id, id),
      check ((state = 'draft') = (letter is null)),
      check (state = 'draft' or (compiled is not null and published_at is not null))
    );
    create unique index revisions_one_draft on revisions (plan_id) where state = 'draft';
    create unique index revisions_one_published on revisions (plan_id) where state = 'published';
    alter table plans add foreign key (id, current_revision_id) references revisions (plan_id, id) deferrable initially deferred;
    create function keep_published_revision() returns trigger language plpgsql as $$
      begin
        if old.state <> 'draft' and (new.source, new.letter, new.plan_id) is distinct from (old.source, old.letter, old.plan_id) then
          raise exception 'a published revision is frozen' using errcode = 'check_violation';
        end if;
        return new;
      end $$;
    create trigger revisions_frozen before update on revisions for each row execute function keep_published_revision();
    create table assets (
      id uuid primary key default gen_random_uuid(),
      revision_id uuid not null references revisions on delete cascade,
      -- The name that the plan's text uses.
      name text not null check (name ~ '^[A-Za-z0-9][A-Za-z0-9._-]{0,119}$'),
      content_type text not null check (content_type in ('image/jpeg', 'image/png', 'image/webp')),
      width integer not null check (width > 0),
      height integer not null check (height > 0),
      bytes integer not null check (bytes > 0),
      sha256 text not null check (sha256 ~ '^[0-9a-f]{64}$'),
      object_key text not null,
      -- Shown on the public page (the cover and pictures outside the steps); set when the revision is published.
      is_public boolean not null default false,
      created_at timestamptz not null default now(),
      unique (revision_id, name)
    );
    create index assets_sha on assets (sha256);
    create table proof_invites (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      email text not null check (email = lower(email)),
      user_id uuid references users on delete cascade,
      token_hash text not null unique,
      invited_by uuid references users on delete set null,
      expires_at timestamptz not null,
      accepted_at timestamptz,
      revoked_at timestamptz,
      created_at timestamptz not null default now(),
      unique (plan_id, email)
    );
    create index proof_invites_user on proof_invites (user_id);
    create table proof_reports (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      revision_id uuid not null references revisions on delete cascade,
      user_id uuid references users on delete set null,
      verdict text not null check (verdict in ('holds', 'mend')),
      body text not null check (length(body) between 1 and 8000),
      created_at timestamptz not null default now()
    );
    create index proof_reports_plan on proof_reports (plan_id, created_at desc);
    create table corrections (
      id uuid primary key default gen_random_uuid(),
      plan_id uuid not null references plans on delete cascade,
      revision_id uuid not null references revisions on delete cascade,
      fixed_revision_id uuid references revisions on delete set null,
      summary text not null check (length(summary) between 1 and 2000),
      reported_by uuid references users on delete set null,
      created_at timestamptz not null default now()
    );
    create index corrections_plan on corrections (plan_id, created_at desc);
  `);
};

export const down: Migration = async ({ sql }) => {
  await sql(/* sql */ `
    drop table corrections, proof_reports, proof_invites, assets;
    alter table plans drop constraint plans_id_current_revision_id_fkey;
    drop table revisions; drop function keep_published_revision(); drop table plans`);
};
