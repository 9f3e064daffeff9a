import { PartMark } from '#components/ui/PartMark.tsx';
import type { ResolvedStep, UnitSystem } from '#lib/plan/types.ts';
import { ProseView, type ShownPicture } from './ProseView.tsx';

interface StepListProps {
  steps: readonly ResolvedStep[];
  units: UnitSystem;
  pictures: Readonly<Record<string, ShownPicture>>;
}

/** The steps in order, with their values in the reader's units. */
export function StepList({ steps, units, pictures }: StepListProps) {
  return (
    <ol className="step-list">
      {steps.map((step) => (
        <li key={step.number} className="step-list__step">
          <h3>
            <span className="section__number">{step.number}</span> {step.title}
          </h3>
          <p className="small secondary">
            {step.parts.map((mark) => (
              <PartMark key={mark} mark={mark} />
            ))}{' '}
            {[step.tools.join(', '), step.minutes ? `about ${step.minutes} minutes` : '']
              .filter(Boolean)
              .join('; ')}
          </p>
          <div className="prose">
            <ProseView prose={step.body} units={units} pictures={pictures} headingLevel={4} />
          </div>
        </li>
      ))}
    </ol>
  );
}
