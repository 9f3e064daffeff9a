/** The two systems of units that a reader can have the sheet in. */
export type Units = 'mm' | 'in';

/** How the switch names them, short on the face and long for the ear. */
export const unitNames: readonly { unit: Units; name: string; long: string }[] = [
  { unit: 'in', name: 'in', long: 'Inches' },
  { unit: 'mm', name: 'mm', long: 'Millimetres' },
];
