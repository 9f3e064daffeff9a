import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { answerQuestion } from '#server/catalogue/talk.ts';
import { formEndpoint } from '#server/http/endpoint.ts';

/** Answers a question on a plan. */
export const POST = formEndpoint({
  schema: z.object({ body: z.string().trim().min(1, 'Write an answer.').max(8000) }),
  back: () => paths.office(),
  run: async ({ actor, input, context }) => {
    const { planId } = await answerQuestion({
      actor,
      questionId: context.params['questionId'] ?? '',
      body: input.body,
    });
    return {
      to: `${paths.officePlan(planId)}#questions`,
      notice: 'The answer stands with the plan, and whoever asked was told.',
    };
  },
});
