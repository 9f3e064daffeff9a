import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { startCheckout } from '#server/checkout/start-checkout.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { requireUser } from '#server/accounts/may.ts';
import { saveFit } from '#server/licences/save-fit.ts';

const schema = z.object({
  offerId: z.uuid(),
  planId: z.uuid(),
  slug: z.string().max(80),
  /** The fit as the page had it, as JSON; checked again against the plan. */
  fit: z.string().max(20_000).default(''),
  code: z.string().max(40).default(''),
  from: z.string().max(40).default(''),
  requestKey: z.string().min(8).max(80),
  consent: z.string().optional(),
});

function readFit(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return null;
  }
}

export const POST = formEndpoint({
  schema,
  // The page's address holds the sizes as they were set, so that they are there again after signing in.
  back: (context, typed) => {
    const referer = context.request.headers.get('referer');
    const from = referer && URL.canParse(referer) ? new URL(referer) : null;
    const slug = String(typed['slug'] ?? '');
    return from?.pathname === paths.plan(slug)
      ? `${from.pathname}${from.search}#buy`
      : `${paths.plan(slug)}#buy`;
  },
  run: async ({ actor, input }) => {
    requireUser(actor);
    const fit = readFit(input.fit);
    const saved = fit ? await saveFit({ actor, planId: input.planId, name: 'Bought with', fit }) : null;
    const { url } = await startCheckout({
      actor,
      offerId: input.offerId,
      fitId: saved?.id ?? null,
      code: input.code,
      sourceSlug: input.from || null,
      requestKey: input.requestKey,
      hasConsented: input.consent === 'yes',
    });
    return { to: url };
  },
});
