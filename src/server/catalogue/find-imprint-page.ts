import { Imprint } from '#db/models/index.ts';
import { chestQuerySchema, listPlans, type ChestEntry } from './list-plans.ts';

export interface ImprintPage {
  imprint: { slug: string; name: string; about: string };
  plans: ChestEntry[];
  next: string | null;
}

/** The public page of an admitted imprint, or null. */
export async function findImprintPage(slug: string, after: string): Promise<ImprintPage | null> {
  const imprint = await Imprint.findOne({
    where: { slug, state: 'active' },
    attributes: ['slug', 'name', 'about'],
  });
  if (!imprint) return null;
  const { plans, next } = await listPlans(chestQuerySchema.parse({ after }), slug);
  return { imprint: { slug: imprint.slug, name: imprint.name, about: imprint.about }, plans, next };
}
