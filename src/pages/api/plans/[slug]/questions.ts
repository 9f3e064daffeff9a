import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { askQuestion } from '#server/catalogue/talk.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

/** Asks the author of a plan. */
export const POST = formEndpoint({
  schema: z.object({ body: z.string().trim().min(3, 'Write what you want to know.').max(4000) }),
  back: (context) => `${paths.plan(context.params['slug'] ?? '')}#questions`,
  run: async ({ actor, input, context }) => {
    const slug = context.params['slug'] ?? '';
    await askQuestion({ actor, slug, body: input.body });
    return { to: `${paths.plan(slug)}#questions` };
  },
});
