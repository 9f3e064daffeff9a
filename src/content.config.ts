import { glob } from 'astro/loaders';
import { defineCollection, z } from 'astro:content';

/** Guides: for buyers and authors, on safety, and the legal pages. The demo plans in content/plans are read by the seeder and not by Astro. */
const guides = defineCollection({
  loader: glob({ pattern: '**/*.mdx', base: './content/guides' }),
  schema: z.object({
    title: z.string(),
    summary: z.string().max(200),
    audience: z.enum(['buyers', 'authors', 'safety', 'legal']),
    order: z.number().int(),
  }),
});

export const collections = { guides };
