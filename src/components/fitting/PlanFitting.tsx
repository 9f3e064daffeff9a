import { keepPreviousData, QueryClient, QueryClientProvider, useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { Notice } from '#components/ui/Notice.tsx';
import { writeFitQuery } from '#lib/plan/fit-query.ts';
import type { Fit } from '#lib/plan/types.ts';
import { paths } from '#lib/paths.ts';
import type { PublicFit } from '#server/catalogue/get-plan-page.ts';
import { BuyForm, type Offer } from './BuyForm.tsx';
import { MeasuredFields } from './MeasuredFields.tsx';
import { PublicResults } from './PublicResults.tsx';
import { RequirementList } from './RequirementList.tsx';
import { SizeFields } from './SizeFields.tsx';
import { useUnits } from './unit-choice.ts';
import { useSettled } from './use-settled.ts';

interface PlanFittingProps {
  planId: string;
  slug: string;
  initial: PublicFit;
  offers: Offer[];
  owned: { licenceId: string; kind: 'personal' | 'workshop' }[];
  from: string;
  requestKey: string;
  consentText: string;
  typed: { offerId: string; code: string };
  errors: Record<string, string>;
}

const client = new QueryClient({
  defaultOptions: { queries: { retry: 1, staleTime: 60_000, refetchOnWindowFocus: false } },
});

/**
 * Sizing a plan before paying: the reader's sizes go to the server, which answers with what may be seen. The formulas stay there.
 * Without scripts the same fields are a plain form that loads the page again.
 */
export function PlanFitting(props: PlanFittingProps) {
  return (
    <QueryClientProvider client={client}>
      <Fitting {...props} />
    </QueryClientProvider>
  );
}

async function askServer(slug: string, fit: Fit, signal: AbortSignal): Promise<PublicFit> {
  const response = await fetch(paths.planFitCheck(slug), {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ fit }),
    signal,
  });
  if (!response.ok) throw new Error(`the server answered ${String(response.status)}`);
  return (await response.json()) as PublicFit;
}

function Fitting({
  planId,
  slug,
  initial,
  offers,
  owned,
  from,
  requestKey,
  consentText,
  typed,
  errors,
}: PlanFittingProps) {
  const units = useUnits(initial.fit.units);
  const [chosen, setChosen] = useState(initial.fit);
  const [refused, setRefused] = useState(initial.refused);
  const fit: Fit = { ...chosen, units };
  const settled = useSettled(fit, 120);
  const isFirst = JSON.stringify(settled) === JSON.stringify(initial.fit);
  const query = useQuery({
    queryKey: ['fit', slug, settled],
    queryFn: ({ signal }) => askServer(slug, settled, signal),
    ...(isFirst ? { initialData: initial } : {}),
    placeholderData: keepPreviousData,
  });
  const shown = query.data ?? initial;
  const { figures } = shown;

  // The address keeps the sizes, so that a reload, a bookmark, the way through sign-in and the units links all come back to them.
  useEffect(() => {
    const url = new URL(window.location.href);
    for (const key of [...url.searchParams.keys()]) if (/^[scm]\./.test(key)) url.searchParams.delete(key);
    for (const [key, value] of Object.entries(writeFitQuery(settled, initial.figures.sizes)))
      url.searchParams.set(key, value);
    if (url.href !== window.location.href && !isFirst) window.history.replaceState(null, '', url);
  }, [settled, isFirst, initial.figures.sizes]);

  // A visit is counted once for each time the page is opened, by day and tracked link, and never by person.
  useEffect(() => {
    void fetch(paths.planVisits(slug), {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify({ from }),
      keepalive: true,
    }).catch(() => undefined);
  }, [slug, from]);

  const set = (change: Partial<Fit>) => {
    setRefused({});
    setChosen((before) => ({ ...before, ...change }));
  };
  const measurable = figures.materials
    .filter((material) => material.measured)
    .map((material) => ({ ...material, thickness: fit.measured[material.name] ?? material.nominal }));

  return (
    <div className="fitting">
      <div className="fitting__set">
        <form method="get" action={paths.plan(slug)}>
          {from ? <input type="hidden" name="from" value={from} /> : null}
          <input type="hidden" name="units" value={units} />
          <SizeFields
            sizes={figures.sizes.map((size) => ({
              ...size,
              value: Number(fit.values[size.name] ?? size.value),
            }))}
            choices={figures.choices.map((choice) => ({
              ...choice,
              value: fit.values[choice.name] ?? choice.value,
            }))}
            units={units}
            stretches={shown.stretches}
            refused={refused}
            onSize={(name, value) => {
              set({ values: { ...fit.values, [name]: value } });
            }}
            onChoice={(name, value) => {
              set({ values: { ...fit.values, [name]: value } });
            }}
          />
          <MeasuredFields
            materials={measurable}
            measured={fit.measured}
            units={units}
            refused={refused}
            onMeasure={(name, nm) => {
              const { [name]: _gone, ...rest } = fit.measured;
              set({ measured: nm === null ? rest : { ...rest, [name]: nm } });
            }}
          />
          <noscript>
            <div className="actions">
              <button type="submit" className="button">
                Work it out
              </button>
            </div>
          </noscript>
        </form>
      </div>
      <div className="fitting__results" aria-busy={query.isFetching}>
        {query.isError ? (
          <Notice kind="error" title="The figures could not be fetched">
            <p>Your sizes are kept. They are worked out again when you move one, or load the page anew.</p>
          </Notice>
        ) : null}
        <RequirementList
          requirements={figures.requirements}
          impossible={
            !figures.canBeBuilt && figures.requirements.every((requirement) => requirement.holds)
              ? ['A part would come out impossible at these sizes. Move one of them a little.']
              : []
          }
        />
        <PublicResults figures={figures} units={units} />
      </div>
      <section className="fitting__buy" id="buy" aria-labelledby="buy-title">
        <h2 id="buy-title">Licence</h2>
        {owned.length > 0 ? (
          <Notice kind="holds" title="You have this plan">
            <p>
              <a href={paths.licence(owned[0]?.licenceId ?? '')}>Open it in your drawer</a> to see the parts
              and make copies.
            </p>
          </Notice>
        ) : null}
        {offers.length > 0 ? (
          <BuyForm
            planId={planId}
            slug={slug}
            offers={offers}
            fit={fit}
            from={from}
            requestKey={requestKey}
            consentText={consentText}
            typed={typed}
            errors={errors}
          />
        ) : (
          <p className="secondary">This plan is not for sale just now.</p>
        )}
      </section>
    </div>
  );
}
