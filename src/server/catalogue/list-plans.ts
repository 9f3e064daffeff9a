import { QueryTypes } from 'sequelize';
import * as z from 'zod';
import { sequelize } from '#db/client.ts';

/** What a visitor may ask of the plan chest. Anything else in the address is ignored; anything unusable counts as left out. */
export const chestQuerySchema = z.object({
  q: z.string().trim().max(120).catch('').default(''),
  space: z.string().trim().max(40).catch('').default(''),
  tag: z.string().trim().max(40).catch('').default(''),
  skill: z.coerce.number().int().min(1).max(5).optional().catch(undefined),
  after: z.string().max(120).catch('').default(''),
});
export type ChestQuery = z.infer<typeof chestQuerySchema>;

/** One plan as the plan chest lists it; none of its facts depends on a size. */
export interface ChestEntry {
  id: string;
  slug: string;
  title: string;
  summary: string;
  skill: number;
  hours: [number, number];
  spaces: string[];
  imprint: { slug: string; name: string };
  cover: { sha256: string; width: number; height: number } | null;
  /** The lowest price in each currency that the plan is sold in. */
  prices: { priceMinor: number; currency: string }[];
}

interface Row {
  id: string;
  slug: string;
  title: string;
  summary: string;
  skill: number;
  hours_low: string;
  hours_high: string;
  spaces: string[];
  imprint_slug: string;
  imprint_name: string;
  cover_sha256: string | null;
  cover_width: number | null;
  cover_height: number | null;
  prices: { priceMinor: number; currency: string }[] | null;
  cursor: string;
}

const PAGE = 24;
const CURSOR = /^(\d{1,17})_([0-9a-f-]{36})$/;

const COLUMNS = `
  p.id, p.slug, p.title, p.summary, p.skill, p.hours_low, p.hours_high, p.spaces,
  i.slug as imprint_slug, i.name as imprint_name,
  cover.sha256 as cover_sha256, cover.width as cover_width, cover.height as cover_height,
  (select json_agg(json_build_object('priceMinor', o.price_minor, 'currency', o.currency) order by o.currency)
     from (select currency, min(price_minor) as price_minor from licence_offers where plan_id = p.id and is_active group by currency) o) as prices,
  (extract(epoch from p.published_at) * 1000000)::bigint || '_' || p.id as cursor`;

const JOINS = `
  from plans p
  join imprints i on i.id = p.imprint_id and i.state = 'active'
  join revisions r on r.id = p.current_revision_id
  left join lateral (
    select sha256, width, height from assets a
    where a.revision_id = r.id and a.is_public and a.name = r.compiled->'front'->>'cover'
  ) cover on true`;

function viewRow(row: Row): ChestEntry {
  return {
    id: row.id,
    slug: row.slug,
    title: row.title,
    summary: row.summary,
    skill: row.skill,
    hours: [Number(row.hours_low), Number(row.hours_high)],
    spaces: row.spaces,
    imprint: { slug: row.imprint_slug, name: row.imprint_name },
    cover:
      row.cover_sha256 && row.cover_width && row.cover_height
        ? { sha256: row.cover_sha256, width: row.cover_width, height: row.cover_height }
        : null,
    prices: row.prices ?? [],
  };
}

/**
 * The published plans, newest first, a page at a time; words are searched in title, summary and story.
 * `next` goes into `after` for the following page, null at the end.
 */
export async function listPlans(
  query: ChestQuery,
  imprintSlug?: string,
): Promise<{ plans: ChestEntry[]; next: string | null }> {
  const cursor = CURSOR.exec(query.after);
  const rows = await sequelize.query<Row>(
    `select ${COLUMNS} ${JOINS}
     where p.state = 'published'
       and (:q = '' or p.search @@ websearch_to_tsquery('english', :q))
       and (:space = '' or :space = any (p.spaces))
       and (:tag = '' or :tag = any (p.tags))
       and (cast(:skill as integer) is null or p.skill = :skill)
       and (cast(:imprint as text) is null or i.slug = :imprint)
       and (cast(:at as bigint) is null or (p.published_at, p.id) < (timestamptz 'epoch' + cast(:at as bigint) * interval '1 microsecond', cast(:id as uuid)))
     order by p.published_at desc, p.id desc
     limit ${PAGE + 1}`,
    {
      replacements: {
        q: query.q,
        space: query.space,
        tag: query.tag,
        skill: query.skill ?? null,
        imprint: imprintSlug ?? null,
        at: cursor?.[1] ?? null,
        id: cursor?.[2] ?? null,
      },
      type: QueryTypes.SELECT,
    },
  );
  const shown = rows.slice(0, PAGE);
  return { plans: shown.map(viewRow), next: rows.length > PAGE ? (shown.at(-1)?.cursor ?? null) : null };
}

/** The spaces that published plans are for, with their number, most first: the filter of the plan chest. */
export async function listSpaces(): Promise<{ space: string; plans: number }[]> {
  return sequelize.query<{ space: string; plans: number }>(
    `select space, count(*)::int as plans from plans p join imprints i on i.id = p.imprint_id and i.state = 'active', unnest(p.spaces) as space
     where p.state = 'published' group by space order by plans desc, space limit 24`,
    { type: QueryTypes.SELECT },
  );
}
