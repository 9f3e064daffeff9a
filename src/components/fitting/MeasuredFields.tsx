import { useId, useState } from 'react';
import { FIT_FIELD } from '#lib/plan/fit-query.ts';
import type { UnitSystem } from '#lib/plan/types.ts';
import { formatExactLength, formatLength } from '#lib/units/format-length.ts';
import { parseLength } from '#lib/units/parse-length.ts';

/** A material whose real thickness the buyer may enter; nanometres. */
export interface MeasurableMaterial {
  name: string;
  label: string;
  thickness: number;
  nominal: number;
}

interface MeasuredFieldsProps {
  materials: readonly MeasurableMaterial[];
  measured: Readonly<Record<string, number>>;
  units: UnitSystem;
  refused: Readonly<Record<string, string>>;
  /** Null takes the measured thickness back to the nominal one. */
  onMeasure: (name: string, nm: number | null) => void;
}

/** One field a material: a sheet is hardly ever as thick as its name says, and grooves are cut to what it is. */
export function MeasuredFields({ materials, measured, units, refused, onMeasure }: MeasuredFieldsProps) {
  if (materials.length === 0) return null;
  return (
    <fieldset className="fit-measured">
      <legend className="choices__legend">Measured thickness</legend>
      <p className="field__hint">
        Measure the sheet in your rack in three places and enter the middle one. Leave it as it is to use the
        nominal thickness.
      </p>
      {materials.map((material) => (
        <ThicknessField
          // Drawn anew when the units switch, so that a half-typed number never changes its meaning.
          key={`${material.name}-${units}`}
          material={material}
          nm={measured[material.name]}
          units={units}
          error={refused[FIT_FIELD.measured + material.name]}
          onMeasure={onMeasure}
        />
      ))}
    </fieldset>
  );
}

interface ThicknessFieldProps {
  material: MeasurableMaterial;
  nm: number | undefined;
  units: UnitSystem;
  error: string | undefined;
  onMeasure: MeasuredFieldsProps['onMeasure'];
}

function ThicknessField({ material, nm, units, error, onMeasure }: ThicknessFieldProps) {
  const id = useId();
  const [typed, setTyped] = useState<string | null>(null);
  const [refusal, setRefusal] = useState<string | null>(null);
  const nominal = formatLength(material.nominal, { units, denominator: 64, decimals: 0.1 }).text;
  const shown = nm === undefined ? '' : formatExactLength(nm, units);
  const trouble = refusal ?? error;

  function settle() {
    if (typed === null) return;
    if (typed.trim() === '') {
      onMeasure(material.name, null);
      setRefusal(null);
    } else {
      const read = parseLength(typed, units);
      if (!read.ok) {
        setRefusal(`${read.message} ${read.hint}`.trim());
        return;
      }
      onMeasure(material.name, read.nm);
      setRefusal(null);
    }
    setTyped(null);
  }

  return (
    <div className="field">
      <label className="field__label" htmlFor={id}>
        {material.label}
      </label>
      <input
        id={id}
        className="field__input field__input--figure"
        name={FIT_FIELD.measured + material.name}
        value={typed ?? shown}
        placeholder={nominal}
        autoComplete="off"
        aria-describedby={trouble ? `${id}-error` : undefined}
        aria-invalid={trouble ? true : undefined}
        onChange={(event) => {
          setTyped(event.target.value);
        }}
        onBlur={settle}
        onKeyDown={(event) => {
          if (event.key === 'Enter') {
            event.preventDefault();
            settle();
          }
        }}
      />
      {trouble ? (
        <p className="field__error" id={`${id}-error`} role="alert">
          {trouble}
        </p>
      ) : null}
    </div>
  );
}
