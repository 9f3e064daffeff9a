import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint, jsonEndpoint } from '#server/http/endpoint.ts';
import { startDraft } from '#server/publishing/get-draft.ts';
import { saveDraft } from '#server/publishing/save-draft.ts';

/** Saves the text of a draft. */
export const PUT = jsonEndpoint(
  z.object({
    source: z.string().max(400_000, 'A plan has 400,000 characters at most.'),
    version: z.number().int().min(1),
  }),
  ({ actor, input, context }) => saveDraft({ actor, planId: context.params['planId'] ?? '', ...input }),
);

/** Opens a draft from the published revision. */
export const POST = formEndpoint({
  schema: z.object({}),
  back: (context) => paths.officePlan(context.params['planId'] ?? ''),
  run: async ({ actor, context }) => {
    const planId = context.params['planId'] ?? '';
    await startDraft(actor, planId);
    return { to: paths.officePlan(planId) };
  },
});
