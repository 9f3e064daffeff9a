import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { editImprint } from '#server/publishing/apply-for-imprint.ts';

/** Changes what stands on the imprint's page. */
export const POST = formEndpoint({
  schema: z.object({ about: z.string().trim().min(10, 'Say a little more.').max(1000) }),
  back: (context) => paths.officeImprint(context.params['imprint'] ?? ''),
  run: async ({ actor, input, context }) => {
    const slug = context.params['imprint'] ?? '';
    await editImprint({ actor, slug, about: input.about });
    return { to: paths.officeImprint(slug), notice: 'The page of the imprint is changed.' };
  },
});
