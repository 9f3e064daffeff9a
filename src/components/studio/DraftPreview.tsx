import { useMemo, useState } from 'react';
import { PartsTable } from '#components/drawer/PartsTable.tsx';
import { MeasuredFields } from '#components/fitting/MeasuredFields.tsx';
import { PublicResults } from '#components/fitting/PublicResults.tsx';
import { RequirementList } from '#components/fitting/RequirementList.tsx';
import { SizeFields } from '#components/fitting/SizeFields.tsx';
import { useUnits } from '#components/fitting/unit-choice.ts';
import { StepList } from '#components/plan/StepList.tsx';
import { allowedStretches } from '#lib/plan/allowed-stretches.ts';
import { defaultFit } from '#lib/plan/check-fit.ts';
import { publicFigures } from '#lib/plan/public-figures.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { CompiledPlan, Fit, UnitSystem } from '#lib/plan/types.ts';
import type { ShownPicture } from '#components/plan/ProseView.tsx';

interface DraftPreviewProps {
  plan: CompiledPlan;
  units: UnitSystem;
  pictures: Readonly<Record<string, ShownPicture>>;
}

/** The draft as a buyer would see it, at sizes that the author can move. */
export function DraftPreview({ plan, units: initialUnits, pictures }: DraftPreviewProps) {
  const units = useUnits(initialUnits);
  const [values, setValues] = useState<Fit['values']>({});
  const [measured, setMeasured] = useState<Fit['measured']>({});
  // Sizes that the text no longer declares are forgotten without a word; the author is in the middle of writing.
  const fit = useMemo<Fit>(() => {
    const initial = defaultFit(plan, units);
    const kept = Object.fromEntries(Object.entries(values).filter(([name]) => name in initial.values));
    return { values: { ...initial.values, ...kept }, measured, units };
  }, [plan, units, values, measured]);
  const resolved = useMemo(() => resolvePlan(plan, fit), [plan, fit]);
  const stretches = useMemo(
    () =>
      Object.fromEntries(
        resolved.sizes.map((size) => [
          size.name,
          size.kind === 'length' ? allowedStretches(plan, fit, size.name) : [],
        ]),
      ),
    [plan, fit, resolved.sizes],
  );
  return (
    <div className="studio__preview">
      <SizeFields
        sizes={resolved.sizes}
        choices={resolved.choices}
        units={units}
        stretches={stretches}
        refused={{}}
        onSize={(name, value) => {
          setValues((before) => ({ ...before, [name]: value }));
        }}
        onChoice={(name, value) => {
          setValues((before) => ({ ...before, [name]: value }));
        }}
      />
      <MeasuredFields
        materials={resolved.materials.filter((material) => material.measured)}
        measured={measured}
        units={units}
        refused={{}}
        onMeasure={(name, nm) => {
          setMeasured(({ [name]: _gone, ...rest }) => (nm === null ? rest : { ...rest, [name]: nm }));
        }}
      />
      <RequirementList
        requirements={resolved.requirements}
        impossible={resolved.problems
          .filter((problem) => problem.severity === 'error')
          .map((problem) => problem.message)}
      />
      <PartsTable parts={resolved.parts} materials={resolved.materials} units={units} />
      <PublicResults figures={publicFigures(resolved)} units={units} />
      <StepList steps={resolved.steps} units={units} pictures={pictures} />
    </div>
  );
}
