import * as z from 'zod';
import { jsonEndpoint } from '#server/http/endpoint.ts';
import { monthSchema } from '#server/sales/month.ts';
import { writeStatement } from '#server/sales/write-statement.ts';
import { attachmentHeader } from '#server/storage/object-store.ts';

/** The statement of a month in one currency, as CSV for an accountant. */
export const GET = jsonEndpoint(
  z.object({
    month: monthSchema,
    currency: z.string().regex(/^[A-Z]{3}$/, 'A currency has three capitals.'),
  }),
  async ({ actor, input, context }) => {
    const statement = await writeStatement({ actor, slug: context.params['imprint'] ?? '', ...input });
    return new Response(statement.csv, {
      headers: {
        'content-type': 'text/csv; charset=utf-8; header=present',
        'content-disposition': attachmentHeader(statement.fileName),
        'cache-control': 'private, no-store',
      },
    });
  },
);
