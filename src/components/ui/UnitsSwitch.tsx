import type { UnitSystem } from '#lib/units/length.ts';
import { unitNames } from './unit-names.ts';

interface UnitsSwitchProps {
  units: UnitSystem;
  onChange: (units: UnitSystem) => void;
}

/**
 * Inches or millimetres, for a view that an island draws whole, title block and all. Under an Astro title block use its
 * own links and `followUnits` instead: units are switched in the title block and nowhere else.
 */
export function UnitsSwitch({ units, onChange }: UnitsSwitchProps) {
  return (
    <span className="units" role="group" aria-label="Units">
      {unitNames.map(({ units: each, name, long }) => (
        <button
          key={each}
          type="button"
          className="units__unit"
          aria-label={long}
          aria-pressed={each === units}
          onClick={() => {
            if (each !== units) onChange(each);
          }}
        >
          {name}
        </button>
      ))}
    </span>
  );
}
