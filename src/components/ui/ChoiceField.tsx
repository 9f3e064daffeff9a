import { useId } from 'react';

interface ChoiceFieldOption {
  value: string;
  label: string;
  /** A line beneath the label: what this choice means, or why it cannot be taken. */
  note?: string;
  isDisabled?: boolean;
}

interface ChoiceFieldProps {
  legend: string;
  /** Name in the form, so that the choice is also sent without JavaScript. */
  name: string;
  value: string;
  options: readonly ChoiceFieldOption[];
  onChange: (value: string) => void;
  hint?: string;
  error?: string | undefined;
}

/** One of several, as a group of radio buttons in ruled cells. Twin of sheet/ChoiceCells.astro. */
export function ChoiceField({ legend, name, value, options, onChange, hint, error }: ChoiceFieldProps) {
  const id = useId();
  const described = [hint && `${id}-hint`, error && `${id}-error`].filter(Boolean).join(' ') || undefined;
  return (
    <fieldset className="choices" aria-describedby={described}>
      <legend className="choices__legend">{legend}</legend>
      {hint ? (
        <span className="field__hint" id={`${id}-hint`}>
          {hint}
        </span>
      ) : null}
      <div className="choices__cells">
        {options.map((option) => (
          <label className="choices__cell" key={option.value}>
            <input
              type="radio"
              name={name}
              value={option.value}
              checked={option.value === value}
              disabled={option.isDisabled}
              onChange={() => onChange(option.value)}
            />
            <span>
              {option.label}
              {option.note ? <span className="choices__note">{option.note}</span> : null}
            </span>
          </label>
        ))}
      </div>
      {error ? (
        <span className="field__error" id={`${id}-error`}>
          {error}
        </span>
      ) : null}
    </fieldset>
  );
}
