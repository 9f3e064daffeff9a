import type { UnitSystem } from '#lib/units/length.ts';

/** How the units switch names the two systems, short on the face and long for the ear. */
export const unitNames: readonly { units: UnitSystem; name: string; long: string }[] = [
  { units: 'in', name: 'in', long: 'Inches' },
  { units: 'mm', name: 'mm', long: 'Millimetres' },
];
