import type { APIRoute } from 'astro';
import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { requestCopy } from '#server/copies/request-copy.ts';
import { formEndpoint, jsonEndpoint } from '#server/http/endpoint.ts';

const paper = z.enum(['a4', 'letter']);
const json = jsonEndpoint(
  z.object({ fit: z.unknown(), fitId: z.uuid().optional(), paper }),
  ({ actor, input, context }) =>
    requestCopy({
      actor,
      licenceId: context.params['licenceId'] ?? '',
      fit: input.fit,
      fitId: input.fitId,
      paper: input.paper,
    }),
);
const form = formEndpoint({
  schema: z.object({
    fit: z
      .string()
      .max(20_000)
      .transform((text, context) => {
        try {
          return JSON.parse(text) as unknown;
        } catch {
          context.addIssue({
            code: 'custom',
            message: 'The sizes did not arrive whole. Load the page again.',
          });
          return z.NEVER;
        }
      }),
    paper,
  }),
  back: (context) => paths.licence(context.params['licenceId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const licenceId = context.params['licenceId'] ?? '';
    const copy = await requestCopy({ actor, licenceId, fit: input.fit, paper: input.paper });
    return {
      to: `${paths.licence(licenceId)}#copies`,
      notice: `Copy ${copy.number} is on its way; it appears under Copies.`,
    };
  },
});

/** Orders a copy: JSON from the island, form fields from the plain page. */
export const POST: APIRoute = (context) =>
  /^application\/json\b/i.test(context.request.headers.get('content-type') ?? '')
    ? json(context)
    : form(context);
