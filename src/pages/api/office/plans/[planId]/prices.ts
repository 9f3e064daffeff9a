import * as z from 'zod';
import { parseAmount } from '#lib/money/format-money.ts';
import { paths } from '#lib/paths.ts';
import { refuse } from '#server/errors.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { setPrices, type PriceToSet } from '#server/publishing/set-prices.ts';

const schema = z.object({
  currency: z.enum(['EUR', 'USD', 'GBP', 'CAD', 'AUD', 'JPY']),
  personal: z.string().max(20),
  workshop: z.string().max(20).default(''),
  pieces: z.string().max(6).default(''),
});

/** Sets the licence prices of a plan. */
export const POST = formEndpoint({
  schema,
  back: (context) => paths.officePrices(context.params['planId'] ?? ''),
  run: async ({ actor, input, context }) => {
    const planId = context.params['planId'] ?? '';
    const { currency } = input;
    const read = (field: 'personal' | 'workshop') =>
      parseAmount(input[field], currency) ??
      refuse('BAD_INPUT', { fields: { [field]: 'Write the price like 24.00, with a point.' } });
    const prices: PriceToSet[] = [{ kind: 'personal', currency, priceMinor: read('personal'), pieces: null }];
    if (input.workshop.trim() !== '') {
      const pieces = Number(input.pieces);
      if (!Number.isInteger(pieces) || pieces < 1)
        refuse('BAD_INPUT', { fields: { pieces: 'Write a whole number, one or more.' } });
      prices.push({ kind: 'workshop', currency, priceMinor: read('workshop'), pieces });
    }
    await setPrices({ actor, planId, prices });
    return { to: paths.officePrices(planId), notice: 'The prices hold from the next order on.' };
  },
});
