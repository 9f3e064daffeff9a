import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { applyForImprint } from '#server/publishing/apply-for-imprint.ts';

/** Applies for an imprint. */
export const POST = formEndpoint({
  schema: z.object({
    name: z.string().trim().min(2, 'Give the imprint a name.').max(60),
    about: z.string().trim().min(10, 'Say a little more.').max(1000),
  }),
  back: () => paths.applyForImprint(),
  run: async ({ actor, input }) => {
    const { slug } = await applyForImprint({ actor, ...input });
    return {
      to: paths.officeImprint(slug),
      notice: 'The application is with the staff. You can begin to write.',
    };
  },
});
