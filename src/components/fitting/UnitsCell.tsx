import { useSyncExternalStore } from 'react';
import { UnitsSwitch } from '#components/ui/UnitsSwitch.tsx';
import { unitNames } from '#components/ui/unit-names.ts';
import type { UnitSystem } from '#lib/plan/types.ts';
import { chooseUnits, useUnits } from './unit-choice.ts';

interface UnitsCellProps {
  units: UnitSystem;
  /** Addresses of this page in either unit, for a browser without scripts. */
  links: Record<UnitSystem, string>;
}

const never = () => () => undefined;

/** The units switch of the title block: live where scripts run, two links where they do not. */
export function UnitsCell({ units: initial, links }: UnitsCellProps) {
  const units = useUnits(initial);
  const isLive = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  if (isLive) return <UnitsSwitch units={units} onChange={chooseUnits} />;
  return (
    <span className="units">
      {unitNames.map(({ units: each, name, long }) => (
        <a
          key={each}
          className="units__unit"
          href={links[each]}
          aria-label={long}
          aria-current={each === units ? 'true' : undefined}
        >
          {name}
        </a>
      ))}
    </span>
  );
}
