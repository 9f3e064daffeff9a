import { randomUUID } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { Source } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { refuse } from '../errors.ts';
import { slugOf } from '../publishing/slug.ts';
import { requireImprint } from './require-imprint.ts';

export interface SourceView {
  id: string;
  slug: string;
  label: string;
  kind: 'video' | 'page' | 'newsletter' | 'talk' | 'other';
  visits: number;
  sales: number;
}

/** The tracked links of an imprint with their visits and sales, newest first. */
export async function listSources(actor: Actor, imprintSlug: string): Promise<SourceView[]> {
  const imprint = await requireImprint(actor, imprintSlug, 'sources:manage');
  return sequelize.query<SourceView>(
    `select s.id, s.slug, s.label, s.kind,
       coalesce((select sum(visits) from visit_days v where v.source_id = s.id), 0)::int as visits,
       (select count(*) from orders o where o.source_id = s.id and o.paid_at is not null)::int as sales
     from sources s where s.imprint_id = :imprintId order by s.created_at desc limit 200`,
    { replacements: { imprintId: imprint.id }, type: QueryTypes.SELECT },
  );
}

/** Makes a tracked link. @throws CONFLICT when the short name is taken */
export async function createSource(options: {
  actor: Actor;
  imprintSlug: string;
  label: string;
  kind: SourceView['kind'];
}): Promise<void> {
  const imprint = await requireImprint(options.actor, options.imprintSlug, 'sources:manage');
  const slug = slugOf(options.label).slice(0, 32).replace(/-+$/, '');
  if (await Source.count({ where: { slug } })) {
    refuse('CONFLICT', { fields: { label: 'A link of that name exists already. Choose another name.' } });
  }
  await Source.create({
    id: randomUUID(),
    imprintId: imprint.id,
    slug,
    label: options.label.trim(),
    kind: options.kind,
  });
}

/** Counts a visit of a published plan's page that came by a tracked link of its imprint, or by none, in the rollup of the day (UTC). */
export async function countVisit(planSlug: string, sourceSlug: string | null): Promise<void> {
  await sequelize.query(
    `insert into visit_days (plan_id, source_id, day, visits)
     select p.id, (select s.id from sources s where s.slug = :source and s.imprint_id = p.imprint_id), (now() at time zone 'UTC')::date, 1
     from plans p where p.slug = :plan and p.state = 'published'
     on conflict (plan_id, day, source_id) do update set visits = visit_days.visits + 1`,
    { replacements: { plan: planSlug, source: sourceSlug ?? '' }, type: QueryTypes.INSERT },
  );
}
