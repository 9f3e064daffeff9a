import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { createSource } from '#server/sales/manage-sources.ts';

/** Makes a tracked link. */
export const POST = formEndpoint({
  schema: z.object({
    label: z.string().trim().min(3, 'Give the link a name of three letters or more.').max(80),
    kind: z.enum(['video', 'page', 'newsletter', 'talk', 'other']),
  }),
  back: (context) => paths.salesSources(context.params['imprint'] ?? ''),
  run: async ({ actor, input, context }) => {
    const imprintSlug = context.params['imprint'] ?? '';
    await createSource({ actor, imprintSlug, ...input });
    return { to: paths.salesSources(imprintSlug), notice: 'The link is ready.' };
  },
});
