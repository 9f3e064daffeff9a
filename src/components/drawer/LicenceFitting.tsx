import { QueryClient, QueryClientProvider, useMutation } from '@tanstack/react-query';
import { useDeferredValue, useEffect, useMemo, useState } from 'react';
import { MeasuredFields } from '#components/fitting/MeasuredFields.tsx';
import { RequirementList } from '#components/fitting/RequirementList.tsx';
import { SizeFields } from '#components/fitting/SizeFields.tsx';
import { useUnits } from '#components/fitting/unit-choice.ts';
import type { ShownPicture } from '#components/plan/ProseView.tsx';
import { StepList } from '#components/plan/StepList.tsx';
import { ChoiceField } from '#components/ui/ChoiceField.tsx';
import { Notice } from '#components/ui/Notice.tsx';
import { allowedStretches, type Stretch } from '#lib/plan/allowed-stretches.ts';
import { writeFitQuery } from '#lib/plan/fit-query.ts';
import { publicFigures } from '#lib/plan/public-figures.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { CompiledPlan, Fit } from '#lib/plan/types.ts';
import { PublicResults } from '#components/fitting/PublicResults.tsx';
import { paths } from '#lib/paths.ts';
import type { CopyView } from '#server/copies/view-copy.ts';
import type { SavedFitView } from '#server/licences/save-fit.ts';
import { CopyList } from './CopyList.tsx';
import { PartsTable } from './PartsTable.tsx';

interface LicenceFittingProps {
  licenceId: string;
  plan: CompiledPlan;
  initialFit: Fit;
  refused: Record<string, string>;
  fits: SavedFitView[];
  copies: CopyView[];
  pictures: Record<string, ShownPicture>;
}

const client = new QueryClient();

/**
 * Sizing a plan that one has bought: the plan is resolved here in the browser by the same function that the server uses, so the table on the
 * screen and the copy agree to the last digit.
 */
export function LicenceFitting(props: LicenceFittingProps) {
  return (
    <QueryClientProvider client={client}>
      <Fitting {...props} />
    </QueryClientProvider>
  );
}

/** Sends JSON and gives the answer; a refusal is thrown with the sentence that the server gave. */
async function post<Answer>(path: string, body: unknown): Promise<Answer> {
  const response = await fetch(path, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(body),
  });
  const answer: unknown = await response.json().catch(() => null);
  if (response.ok) return answer as Answer;
  const detail =
    typeof answer === 'object' && answer !== null && 'detail' in answer
      ? String(answer.detail)
      : 'The server does not answer just now. Try again.';
  throw new Error(detail);
}

function Fitting({
  licenceId,
  plan,
  initialFit,
  refused: initialRefused,
  fits: initialFits,
  copies: initialCopies,
  pictures,
}: LicenceFittingProps) {
  const units = useUnits(initialFit.units);
  const [chosen, setChosen] = useState(initialFit);
  const [refused, setRefused] = useState(initialRefused);
  const [paper, setPaper] = useState<'a4' | 'letter'>(initialFit.units === 'in' ? 'letter' : 'a4');
  const [fits, setFits] = useState(initialFits);
  const [copies, setCopies] = useState(initialCopies);
  const [fitName, setFitName] = useState('');
  const fit = useMemo<Fit>(() => ({ ...chosen, units }), [chosen, units]);
  const shownFit = useDeferredValue(fit);
  const resolved = useMemo(() => resolvePlan(plan, shownFit), [plan, shownFit]);
  const figures = useMemo(() => publicFigures(resolved), [resolved]);
  const stretches = useMemo<Record<string, Stretch[]>>(
    () =>
      Object.fromEntries(
        resolved.sizes.map((size) => [
          size.name,
          size.kind === 'length' ? allowedStretches(plan, shownFit, size.name) : [],
        ]),
      ),
    [plan, shownFit, resolved.sizes],
  );
  const impossible = resolved.problems
    .filter((problem) => problem.severity === 'error')
    .map((problem) => problem.message);

  useEffect(() => {
    const url = new URL(window.location.href);
    for (const key of [...url.searchParams.keys()]) if (/^[scm]\./.test(key)) url.searchParams.delete(key);
    for (const [key, value] of Object.entries(writeFitQuery(shownFit, resolved.sizes)))
      url.searchParams.set(key, value);
    if (url.href !== window.location.href) window.history.replaceState(null, '', url);
  }, [shownFit, resolved.sizes]);

  const makeCopy = useMutation({
    mutationFn: () => post<CopyView>(paths.copies(licenceId), { fit, paper }),
    onSuccess: (copy) => {
      setCopies((before) => [copy, ...before.filter((each) => each.id !== copy.id)]);
    },
  });
  const keepFit = useMutation({
    mutationFn: () => post<SavedFitView>(paths.fits(licenceId), { name: fitName, fit }),
    onSuccess: (saved) => {
      setFits((before) => [saved, ...before]);
      setFitName('');
    },
  });

  const set = (change: Partial<Fit>) => {
    setRefused({});
    setChosen((before) => ({ ...before, ...change }));
  };
  return (
    <>
      <div className="fitting">
        <div className="fitting__set">
          {fits.length > 0 ? (
            <div className="fit-saved">
              <p className="choices__legend">Your fits</p>
              <ul className="actions">
                {fits.map((saved) => (
                  <li key={saved.id}>
                    <button
                      type="button"
                      className="button button--plain"
                      onClick={() => {
                        set({ values: { ...fit.values, ...saved.fit.values }, measured: saved.fit.measured });
                      }}
                    >
                      {saved.name}
                    </button>
                  </li>
                ))}
              </ul>
            </div>
          ) : null}
          <SizeFields
            sizes={resolved.sizes.map((size) => ({
              ...size,
              value: Number(fit.values[size.name] ?? size.value),
            }))}
            choices={resolved.choices.map((choice) => ({
              ...choice,
              value: fit.values[choice.name] ?? choice.value,
            }))}
            units={units}
            stretches={stretches}
            refused={refused}
            onSize={(name, value) => {
              set({ values: { ...fit.values, [name]: value } });
            }}
            onChoice={(name, value) => {
              set({ values: { ...fit.values, [name]: value } });
            }}
          />
          <MeasuredFields
            materials={resolved.materials.filter((material) => material.measured)}
            measured={fit.measured}
            units={units}
            refused={refused}
            onMeasure={(name, nm) => {
              const { [name]: _gone, ...rest } = fit.measured;
              set({ measured: nm === null ? rest : { ...rest, [name]: nm } });
            }}
          />
          <form
            className="fit-keep"
            onSubmit={(event) => {
              event.preventDefault();
              keepFit.mutate();
            }}
          >
            <div className="field">
              <label className="field__label" htmlFor="fit-name">
                Keep these sizes as
              </label>
              <input
                id="fit-name"
                className="field__input"
                value={fitName}
                maxLength={120}
                placeholder="Hall, left wall"
                onChange={(event) => {
                  setFitName(event.target.value);
                }}
              />
            </div>
            <button type="submit" className="button" disabled={keepFit.isPending || fitName.trim() === ''}>
              Keep the fit
            </button>
          </form>
          <div role="status">
            {keepFit.isError ? (
              <Notice kind="error" title="Not kept">
                <p>{keepFit.error.message}</p>
              </Notice>
            ) : null}
          </div>
        </div>
        <div className="fitting__results">
          <RequirementList requirements={resolved.requirements} impossible={impossible} />
          <PartsTable parts={resolved.parts} materials={resolved.materials} units={units} />
          <PublicResults figures={figures} units={units} />
        </div>
      </div>
      <section className="section" id="copies" aria-labelledby="copies-title">
        <div className="section__head">
          <h2 id="copies-title">Copies</h2>
        </div>
        <p>A copy is a numbered PDF at the sizes and units above. Your name stands on each page.</p>
        <ChoiceField
          legend="Paper"
          name="paper"
          value={paper}
          options={[
            { value: 'a4', label: 'A4' },
            { value: 'letter', label: 'Letter' },
          ]}
          onChange={(value) => {
            setPaper(value === 'letter' ? 'letter' : 'a4');
          }}
        />
        <div className="actions">
          <button
            type="button"
            className="button button--main"
            disabled={makeCopy.isPending}
            onClick={() => {
              makeCopy.mutate();
            }}
          >
            Make a copy
          </button>
        </div>
        {makeCopy.isError ? (
          <Notice kind="error" title="The copy was not ordered">
            <p>{makeCopy.error.message}</p>
          </Notice>
        ) : null}
        <CopyList copies={copies} isUsable />
      </section>
      <section className="section" aria-labelledby="steps-title">
        <div className="section__head">
          <h2 id="steps-title">Steps</h2>
        </div>
        <StepList steps={resolved.steps} units={units} pictures={pictures} />
      </section>
    </>
  );
}
