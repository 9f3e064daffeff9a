import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { createCode, switchCode } from '#server/sales/manage-codes.ts';

/** An optional field: an empty one counts as left out. */
const optional = <Schema extends z.ZodType>(schema: Schema) =>
  z.preprocess((value) => (value === '' ? undefined : value), schema.optional());

const DAY_MS = 86_400_000;

const schema = z.discriminatedUnion('what', [
  z.object({
    what: z.literal('create'),
    code: z
      .string()
      .trim()
      .regex(/^[A-Za-z0-9][A-Za-z0-9-]{2,29}$/, 'Use three to thirty letters, digits and hyphens.'),
    percentOff: z.coerce
      .number('Write a whole number.')
      .int('Write a whole number.')
      .min(1, 'At least 1.')
      .max(100, 'At most 100.'),
    planId: optional(z.uuid()),
    maxUses: optional(z.coerce.number('Write a whole number.').int().min(1).max(1_000_000)),
    endsAt: optional(z.iso.date('Write the day like 2026-12-31.')),
    note: z.string().max(200).default(''),
  }),
  z.object({ what: z.literal('switch'), codeId: z.uuid(), isActive: z.enum(['yes', 'no']) }),
]);

/** Makes a code, stops one, or starts it again. */
export const POST = formEndpoint({
  schema,
  back: (context) => paths.salesCodes(context.params['imprint'] ?? ''),
  run: async ({ actor, input, context }) => {
    const imprintSlug = context.params['imprint'] ?? '';
    const to = paths.salesCodes(imprintSlug);
    if (input.what === 'switch') {
      await switchCode({ actor, imprintSlug, codeId: input.codeId, isActive: input.isActive === 'yes' });
      return { to, notice: input.isActive === 'yes' ? 'The code holds again.' : 'The code is stopped.' };
    }
    await createCode({
      actor,
      imprintSlug,
      code: input.code,
      percentOff: input.percentOff,
      planId: input.planId ?? null,
      maxUses: input.maxUses ?? null,
      // The whole of the last day still counts.
      endsAt: input.endsAt ? new Date(Date.parse(`${input.endsAt}T00:00:00Z`) + DAY_MS) : null,
      note: input.note,
    });
    return { to, notice: 'The code is ready.' };
  },
});
