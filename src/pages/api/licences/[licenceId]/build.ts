import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { writeBuild } from '#server/catalogue/talk.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

/** Shows a finished piece on the plan's page. */
export const POST = formEndpoint({
  schema: z.object({
    body: z.string().trim().min(1, 'Write a few words about the build.').max(4000),
    verdict: z.coerce.number('Choose one.').int().min(1).max(5),
  }),
  back: (context) => paths.licence(context.params['licenceId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const licenceId = context.params['licenceId'] ?? '';
    await writeBuild({ actor, licenceId, ...input });
    return { to: paths.licence(licenceId), notice: 'Your build stands on the page of the plan.' };
  },
});
