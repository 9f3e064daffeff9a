/** What mass and sag are computed from. */
export interface WoodFigures {
  /** As it is called in the table. */
  name: string;
  /** At 12 % moisture, kg/m³. */
  densityKgM3: number;
  /** Modulus of elasticity along the grain (or the stronger way of a panel), N/mm². */
  stiffnessMpa: number;
  /** True for panels and groups, whose makes differ more than boards of one species do. */
  isRough: boolean;
}

const MPA_PER_MILLION_PSI = 6894.757;

/**
 * Specific gravity (oven-dry mass over volume at 12 % moisture) and modulus of elasticity in 10⁶ lbf/in², from the Wood
 * Handbook (FPL-GTR-282) Table 5-3; other names of a wood stand behind its own.
 */
const SOLID: readonly (readonly [names: string, gravity: number, stiffness: number])[] = [
  ['red alder, alder', 0.41, 1.38],
  ['white ash, ash', 0.6, 1.74],
  ['basswood', 0.37, 1.46],
  ['american beech, beech', 0.64, 1.72],
  ['paper birch', 0.55, 1.59],
  ['yellow birch, birch', 0.62, 2.01],
  ['butternut', 0.38, 1.18],
  ['black cherry, cherry', 0.5, 1.49],
  ['american elm, elm', 0.5, 1.34],
  ['hickory', 0.72, 2.16],
  ['red maple, soft maple', 0.54, 1.64],
  ['sugar maple, hard maple, maple', 0.63, 1.83],
  ['northern red oak, red oak', 0.63, 1.82],
  ['white oak, oak', 0.68, 1.78],
  ['black walnut, walnut', 0.55, 1.68],
  ['yellow-poplar, poplar, tulipwood', 0.42, 1.58],
  ['douglas-fir, douglas fir', 0.48, 1.95],
  ['western hemlock, hemlock', 0.45, 1.63],
  ['western larch, larch', 0.52, 1.87],
  ['eastern white pine, white pine, pine', 0.35, 1.24],
  ['ponderosa pine', 0.4, 1.29],
  ['southern pine, longleaf pine', 0.59, 1.98],
  ['redwood', 0.35, 1.1],
  ['sitka spruce, spruce', 0.4, 1.57],
  ['western redcedar, cedar', 0.32, 1.11],
  ['teak', 0.55, 1.55],
  ['mahogany', 0.45, 1.5],
  ['khaya, african mahogany', 0.42, 1.4],
  ['dark red meranti, meranti', 0.46, 1.77],
];

/**
 * Panels: density in kg/m³ and modulus in N/mm². Moduli of the Wood Handbook Table 12-1 at the low end of their range, densities
 * at the middle of its specific gravities; birch plywood from the Handbook of Finnish Plywood Table 3-1 (18 mm, along the face
 * grain; from memory).
 */
const PANELS: readonly (readonly [names: string, density: number, stiffness: number])[] = [
  ['birch plywood', 680, 10_048],
  ['plywood, softwood plywood', 560, 6960],
  ['mdf, medium-density fibreboard, medium-density fiberboard', 800, 3590],
  ['particleboard, chipboard', 700, 2760],
  ['osb', 650, 4410],
  ['hardboard', 1000, 3100],
];

const FIGURES: ReadonlyMap<string, WoodFigures> = new Map<string, WoodFigures>([
  ...SOLID.flatMap(([names, gravity, stiffness]) =>
    named(names, {
      densityKgM3: Math.round(gravity * 1120),
      stiffnessMpa: Math.round(stiffness * MPA_PER_MILLION_PSI),
      isRough: false,
    }),
  ),
  ...PANELS.flatMap(([names, densityKgM3, stiffnessMpa]) =>
    named(names, { densityKgM3, stiffnessMpa, isRough: true }),
  ),
]);

function named(names: string, figures: Omit<WoodFigures, 'name'>): [string, WoodFigures][] {
  const all = names.split(', ');
  return all.map((name) => [name, { name: all[0] ?? name, ...figures }]);
}

/** Figures of a wood or panel by any of its names, case ignored; undefined for one that the table does not have. */
export function woodFigures(species: string): WoodFigures | undefined {
  return FIGURES.get(species.trim().toLowerCase());
}

/** Rough thickness of hardwood in inches, and what it is usually surfaced to (NHLA rules, standard thicknesses). */
const ROUGH: readonly (readonly [rough: number, surfaced: number])[] = [
  [1, 13 / 16],
  [1.25, 1 + 1 / 16],
  [1.5, 1 + 5 / 16],
  [2, 1.75],
  [2.5, 2.25],
  [3, 2.75],
  [4, 3.75],
];

/**
 * The rough thickness in inches that a finished one is tallied at: the thinnest standard stock that surfaces to it, never less
 * than one inch; beyond the table the thickness itself.
 */
export function roughInches(finishedInches: number): number {
  return ROUGH.find(([, surfaced]) => finishedInches <= surfaced + 1e-9)?.[0] ?? finishedInches;
}
