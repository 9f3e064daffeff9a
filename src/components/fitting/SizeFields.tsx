import { useId } from 'react';
import { ChoiceField } from '#components/ui/ChoiceField.tsx';
import { Tape } from '#components/ui/Tape.tsx';
import type { Stretch } from '#lib/plan/allowed-stretches.ts';
import { FIT_FIELD } from '#lib/plan/fit-query.ts';
import type { ResolvedChoice, ResolvedSize, UnitSystem } from '#lib/plan/types.ts';

interface SizeFieldsProps {
  sizes: readonly ResolvedSize[];
  choices: readonly ResolvedChoice[];
  units: UnitSystem;
  /** Stretches of each size's range that a requirement excludes. */
  stretches: Readonly<Record<string, readonly Stretch[]>>;
  /** Sentences for fields that could not be taken, by field name. */
  refused: Readonly<Record<string, string>>;
  onSize: (name: string, value: number) => void;
  onChoice: (name: string, value: number | string) => void;
}

interface StepFieldProps {
  size: ResolvedSize;
  error: string | undefined;
  onChange: (value: number) => void;
}

/** A whole number or an angle: too few values for a tape, so a plain stepped field. */
function StepField({ size, error, onChange }: StepFieldProps) {
  const id = useId();
  const unit = size.kind === 'angle' ? '°' : '';
  return (
    <div className="field">
      <label className="field__label" htmlFor={id}>
        {size.label}
      </label>
      <span className="field__hint" id={`${id}-hint`}>
        {`${size.min}${unit} to ${size.max}${unit}`}
      </span>
      <input
        id={id}
        className="field__input field__input--figure"
        type="number"
        name={FIT_FIELD.size + size.name}
        value={size.value}
        min={size.min}
        max={size.max}
        step={size.step}
        aria-describedby={error ? `${id}-hint ${id}-error` : `${id}-hint`}
        aria-invalid={error ? true : undefined}
        onChange={(event) => {
          const value = event.target.valueAsNumber;
          if (Number.isFinite(value) && value >= size.min && value <= size.max) onChange(value);
        }}
      />
      {error ? (
        <p className="field__error" id={`${id}-error`}>
          {error}
        </p>
      ) : null}
    </div>
  );
}

/** Everything that a buyer may set of a plan: lengths on the tape, numbers and angles in fields, choices in cells. */
export function SizeFields({ sizes, choices, units, stretches, refused, onSize, onChoice }: SizeFieldsProps) {
  return (
    <div className="fit-fields">
      {sizes.map((size) =>
        size.kind === 'length' ? (
          <Tape
            key={size.name}
            label={size.label}
            name={FIT_FIELD.size + size.name}
            valueNm={size.value}
            minNm={size.min}
            maxNm={size.max}
            units={units}
            excluded={
              stretches[size.name]?.map(({ from, to, reason }) => ({ fromNm: from, toNm: to, reason })) ?? []
            }
            error={refused[FIT_FIELD.size + size.name]}
            onChange={(nm) => {
              onSize(size.name, nm);
            }}
          />
        ) : (
          <StepField
            key={size.name}
            size={size}
            error={refused[FIT_FIELD.size + size.name]}
            onChange={(value) => {
              onSize(size.name, value);
            }}
          />
        ),
      )}
      {choices.map((choice) => (
        <ChoiceField
          key={choice.name}
          legend={choice.label}
          name={FIT_FIELD.choice + choice.name}
          value={String(choice.value)}
          options={choice.options.map((option) => ({ value: String(option.value), label: option.label }))}
          error={refused[FIT_FIELD.choice + choice.name]}
          onChange={(text) => {
            const option = choice.options.find((each) => String(each.value) === text);
            if (option) onChoice(choice.name, option.value);
          }}
        />
      ))}
    </div>
  );
}
