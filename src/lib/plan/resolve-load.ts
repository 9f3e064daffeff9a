import { roundNm } from '#lib/units/length.ts';

import { printValue } from './print-value.ts';
import { isPresent, numberOf } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import type { ResolvedMaterial, ResolvedPart, ResolvedShelf, ShelfDeclaration } from './types.ts';
import { woodFigures } from './wood-figures.ts';

/** Standard gravity in m/s². */
const GRAVITY = 9.80665;
const NM_PER_M = 1e9;
/** Shear modulus over the modulus of elasticity where nothing better is known (Wood Handbook, ch. 9). */
const SHEAR_SHARE = 1 / 16;

/** A simply supported board: metres, newtons, pascals. */
interface Beam {
  spanM: number;
  widthM: number;
  thicknessM: number;
  forceN: number;
  stiffnessPa: number;
  isMiddle: boolean;
}

/**
 * Deflection in metres of a board that rests free on both ends, bending and shear (Wood Handbook Eq. 9-2, Table 9-1):
 * 5/384 and 1/8 for a spread load, 1/48 and 1/4 for one in the middle.
 */
export function sagOf({ spanM, widthM, thicknessM, forceN, stiffnessPa, isMiddle }: Beam): number {
  const [bending, shear] = isMiddle ? [1 / 48, 1 / 4] : [5 / 384, 1 / 8];
  const inertia = (widthM * thicknessM ** 3) / 12;
  const area = (5 / 6) * widthM * thicknessM;
  const bend = (bending * forceN * spanM ** 3) / (stiffnessPa * inertia);
  return bend + (shear * forceN * spanM) / (stiffnessPa * SHEAR_SHARE * area);
}

/** Usual limits of shelves (common practice, no source): a share of the span, and what the eye begins to see. */
const LIMITS: readonly (readonly [name: string, share: number])[] = [
  ['span / 360', 1 / 360],
  ['span / 240, loose', 1 / 240],
  ['what the eye sees, 1/32 in a foot', 1 / 384],
];

function resolveShelf(
  resolving: Resolving,
  declaration: ShelfDeclaration,
  part: ResolvedPart,
  material: ResolvedMaterial | undefined,
): ResolvedShelf | null {
  const what = `Shelf ${declaration.part}`;
  const span = numberOf(resolving, what, 'span', declaration.span);
  const loadKg = numberOf(resolving, what, 'load', declaration.load);
  const species = declaration.species ?? material?.species;
  const figures = species === undefined ? undefined : woodFigures(species);
  if (species === undefined || figures === undefined) {
    resolving.problems.add(declaration.at, {
      rule: 'species-unknown',
      severity: 'advice',
      message:
        species === undefined
          ? `The sag of part ${part.mark} is not shown, because its species is not said.`
          : `The sag of part ${part.mark} is not shown, because no figures of “${species}” are known.`,
      hint: 'Write species="red oak" or another usual name.',
    });
    return null;
  }
  if (span <= 0 || loadKg <= 0 || part.width <= 0 || part.thickness <= 0) return null;
  const sag = roundNm(
    NM_PER_M *
      sagOf({
        spanM: span / NM_PER_M,
        widthM: part.width / NM_PER_M,
        thicknessM: part.thickness / NM_PER_M,
        forceN: loadKg * GRAVITY,
        stiffnessPa: figures.stiffnessMpa * 1e6,
        isMiddle: declaration.position === 'middle',
      }),
  );
  const limits = LIMITS.map(([name, share]) => {
    const limit = roundNm(span * share);
    return { name, limit, holds: sag <= limit };
  });
  const { units } = resolving;
  const place = declaration.position === 'middle' ? 'in the middle of' : 'spread over';
  return {
    part: part.mark,
    span,
    loadKg,
    at: declaration.position,
    species: figures.name,
    sag,
    limits,
    approximate: figures.isRough,
    guidance: `With ${printValue('mass', loadKg, units)} ${place} a clear span of ${printValue('length', span, units)}, part ${part.mark} sags about ${printValue('length', sag, units)} at first, and about half as much again over the years. This is guidance from ${figures.isRough ? 'rough' : 'mean'} figures for ${figures.name}, resting free on both ends: it is no approval, and says nothing about its fixings or its strength.`,
  };
}

/** Shelves whose parts are cut at this fit, with their sag as guidance. */
export function resolveShelves(
  resolving: Resolving,
  parts: readonly ResolvedPart[],
  materials: readonly ResolvedMaterial[],
): ResolvedShelf[] {
  return resolving.plan.declarations.flatMap((declaration) => {
    if (declaration.type !== 'shelf' || !isPresent(resolving, declaration)) return [];
    const part = parts.find((each) => each.mark === declaration.part);
    if (!part) return [];
    return (
      resolveShelf(
        resolving,
        declaration,
        part,
        materials.find((each) => each.name === part.material),
      ) ?? []
    );
  });
}

/** Mass of what is cut from a material in kg, where its species is known. */
export function massOf(material: Pick<ResolvedMaterial, 'species' | 'volumeM3'>): number | undefined {
  const figures = material.species === undefined ? undefined : woodFigures(material.species);
  return figures && material.volumeM3 * figures.densityKgM3;
}

/** Mass of all parts in kg, or undefined where the species of anything that is cut is not known. */
export function totalMass(materials: readonly ResolvedMaterial[]): number | undefined {
  const used = materials.filter((material) => material.pieces > 0);
  if (used.length === 0 || used.some((material) => material.massKg === undefined)) return undefined;
  return used.reduce((sum, material) => sum + (material.massKg ?? 0), 0);
}
