import { NM2_PER_M2 } from '#lib/units/format-measure.ts';
import { toInches } from '#lib/units/length.ts';

import { massOf } from './resolve-load.ts';
import { stockSizes } from './resolve-parts.ts';
import { isPresent, keptNumber, numberOf, reportFormula } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import type {
  ConsumableDeclaration,
  HardwareDeclaration,
  MaterialDeclaration,
  ResolvedConsumable,
  ResolvedHardware,
  ResolvedMaterial,
  ResolvedPart,
  WrittenPrice,
} from './types.ts';
import { roughInches } from './wood-figures.ts';

const NM_PER_M = 1e9;
/** A board foot is 144 cubic inches, in m³, exact. */
const M3_PER_BOARD_FOOT = 0.002359737216;
const M_PER_INCH = 0.0254;
const MAX_HARDWARE = 1_000_000;

interface Totals {
  pieces: number;
  areaM2: number;
  volumeM3: number;
  lengthM: number;
}

function totalsOf(parts: readonly ResolvedPart[], material: string): Totals {
  const totals: Totals = { pieces: 0, areaM2: 0, volumeM3: 0, lengthM: 0 };
  for (const part of parts) {
    if (part.material !== material) continue;
    const [length, width, thickness] = [part.length, part.width, part.thickness].map(
      (size) => Math.max(0, size) / NM_PER_M,
    );
    const [l, w, t] = [length ?? 0, width ?? 0, thickness ?? 0];
    totals.pieces += part.qty;
    totals.areaM2 += part.qty * l * w;
    totals.volumeM3 += part.qty * l * w * t;
    totals.lengthM += part.qty * l;
  }
  return totals;
}

/** The least number of stock pieces, by area (sheets, boards) or run (bars) of the largest size alone. */
function leastStockOf(kind: ResolvedMaterial['kind'], sizes: readonly number[][], totals: Totals): number {
  const content = kind === 'bar' ? totals.lengthM : totals.areaM2;
  const largest = Math.max(
    0,
    ...sizes.map(([length = 0, width = 0]) =>
      kind === 'bar' ? length / NM_PER_M : (length * width) / NM2_PER_M2,
    ),
  );
  // A hair of slack keeps rounding noise from asking for one sheet more.
  return largest > 0 ? Math.ceil(content / largest - 1e-9) : 0;
}

function costOf(price: WrittenPrice, totals: Totals & { boardFeet: number; leastStock: number }): number {
  switch (price.per) {
    case 'piece':
      return price.minor * totals.leastStock;
    case 'board-foot':
      return Math.round(price.minor * totals.boardFeet);
    case 'm3':
      return Math.round(price.minor * totals.volumeM3);
    case 'm2':
      return Math.round(price.minor * totals.areaM2);
    case 'm':
      return Math.round(price.minor * totals.lengthM);
  }
}

function resolveMaterial(
  resolving: Resolving,
  declaration: MaterialDeclaration,
  parts: readonly ResolvedPart[],
): ResolvedMaterial {
  const { name, kind } = declaration;
  const thickness = keptNumber(resolving, `${name}.thickness`);
  const totals = totalsOf(parts, name);
  const sizes = stockSizes(resolving, declaration);
  // Boards are tallied at their rough thickness (NHLA), other materials at what they measure.
  const boardFeet =
    kind === 'board'
      ? (totals.areaM2 * roughInches(toInches(thickness)) * M_PER_INCH) / M3_PER_BOARD_FOOT
      : totals.volumeM3 / M3_PER_BOARD_FOOT;
  const material: ResolvedMaterial = {
    name,
    label: declaration.label,
    kind,
    grain: declaration.grain,
    thickness,
    nominal: numberOf(resolving, `Material “${name}”`, 'thickness', declaration.thickness),
    measured: declaration.measured,
    sizes,
    ...totals,
    boardFeet,
    leastStock: leastStockOf(kind, sizes, totals),
  };
  if (declaration.species !== undefined) material.species = declaration.species;
  if (declaration.width) material.width = keptNumber(resolving, `${name}.width`);
  if (declaration.length) material.length = keptNumber(resolving, `${name}.length`);
  const massKg = massOf(material);
  if (massKg !== undefined) material.massKg = massKg;
  const own = resolving.prices.get(name);
  const price =
    declaration.price && (own === undefined ? declaration.price : { ...declaration.price, minor: own });
  if (price) {
    material.price = price;
    material.costMinor = costOf(price, material);
  }
  return material;
}

/** Materials that are present, in the order of the file, with what is cut from each. */
export function resolveMaterials(resolving: Resolving, parts: readonly ResolvedPart[]): ResolvedMaterial[] {
  return resolving.plan.declarations.flatMap((declaration) =>
    declaration.type === 'material' && isPresent(resolving, declaration)
      ? [resolveMaterial(resolving, declaration, parts)]
      : [],
  );
}

function resolveHardwareItem(resolving: Resolving, declaration: HardwareDeclaration): ResolvedHardware {
  const wanted = numberOf(resolving, `Hardware “${declaration.name}”`, 'qty', declaration.qty);
  if (wanted < 0 || wanted > MAX_HARDWARE) {
    reportFormula(resolving, 'qty', declaration.qty, {
      rule: 'hardware-quantity',
      message: `Hardware “${declaration.name}” would be needed ${wanted} times`,
      wanted: `0 to ${MAX_HARDWARE}`,
      hint: 'Check its formula.',
    });
  }
  // Nobody sells half a screw.
  const qty = Math.min(MAX_HARDWARE, Math.max(0, Math.ceil(wanted - 1e-9)));
  const packs = declaration.pack === undefined ? qty : Math.ceil(qty / declaration.pack);
  const hardware: ResolvedHardware = { name: declaration.name, qty, packs };
  if (declaration.unit !== undefined) hardware.unit = declaration.unit;
  if (declaration.note !== undefined) hardware.note = declaration.note;
  if (declaration.pack !== undefined) hardware.pack = declaration.pack;
  if (declaration.link !== undefined) hardware.link = declaration.link;
  if (declaration.price) {
    hardware.price = declaration.price;
    hardware.costMinor = declaration.price.minor * packs;
  }
  return hardware;
}

/** Hardware that is present and needed, in the order of the file; `packs` is how many to buy. */
export function resolveHardware(resolving: Resolving): ResolvedHardware[] {
  return resolving.plan.declarations
    .flatMap((declaration) =>
      declaration.type === 'hardware' && isPresent(resolving, declaration)
        ? [resolveHardwareItem(resolving, declaration)]
        : [],
    )
    .filter((hardware) => hardware.qty > 0);
}

/** The whole surface of all pieces in m²: both faces and all four edges, shapes not looked at. */
function surfaceM2(parts: readonly ResolvedPart[]): number {
  return parts.reduce((sum, { qty, length, width, thickness }) => {
    const [l, w, t] = [length, width, thickness].map((size) => Math.max(0, size) / NM_PER_M);
    return sum + qty * 2 * ((l ?? 0) * (w ?? 0) + (l ?? 0) * (t ?? 0) + (w ?? 0) * (t ?? 0));
  }, 0);
}

/**
 * Glue lines of all pieces in metres and their area in m². A line runs along every groove and rabbet, and across both ends of
 * every piece, because a joint is nearly always at an end or in a groove. It is an estimate for buying glue.
 */
function glueLines(parts: readonly ResolvedPart[]): { metres: number; areaM2: number } {
  let metres = 0;
  let areaM2 = 0;
  for (const part of parts) {
    const add = (run: number, across: number): void => {
      metres += (part.qty * Math.max(0, run)) / NM_PER_M;
      areaM2 += (part.qty * Math.max(0, run) * Math.max(0, across)) / NM2_PER_M2;
    };
    add(2 * part.width, part.thickness);
    for (const shape of part.shape) {
      if (shape.type !== 'groove' && shape.type !== 'rabbet') continue;
      const isEnd = shape.words['edge'] === 'left' || shape.words['edge'] === 'right';
      const width = shape.values['width'];
      add(isEnd ? part.width : part.length, typeof width === 'number' ? width : 0);
    }
  }
  return { metres, areaM2 };
}

function resolveConsumable(
  resolving: Resolving,
  declaration: ConsumableDeclaration,
  parts: readonly ResolvedPart[],
): ResolvedConsumable {
  const coats = Math.max(
    0,
    numberOf(resolving, `Consumable “${declaration.name}”`, 'coats', declaration.coats),
  );
  const { amount: covers, measure, unit } = declaration.coverage;
  const lines = glueLines(parts);
  const content =
    declaration.for === 'surface' ? surfaceM2(parts) : measure === 'm' ? lines.metres : lines.areaM2;
  const amount = (content * coats) / covers;
  const consumable: ResolvedConsumable = {
    name: declaration.name,
    for: declaration.for,
    coats,
    amount,
    unit,
  };
  // Opened tins cannot be bought.
  if (declaration.price) {
    consumable.price = declaration.price;
    consumable.costMinor = declaration.price.minor * Math.ceil(amount - 1e-9);
  }
  return consumable;
}

/** Consumables that are present, in the order of the file. */
export function resolveConsumables(
  resolving: Resolving,
  parts: readonly ResolvedPart[],
): ResolvedConsumable[] {
  return resolving.plan.declarations.flatMap((declaration) =>
    declaration.type === 'consumable' && isPresent(resolving, declaration)
      ? [resolveConsumable(resolving, declaration, parts)]
      : [],
  );
}

/** Sums of costs by currency, in the order in which currencies first appear. */
export function sumCosts(
  materials: readonly ResolvedMaterial[],
  hardware: readonly ResolvedHardware[],
  consumables: readonly ResolvedConsumable[],
): { currency: string; minor: number }[] {
  const sums = new Map<string, number>();
  const add = (currency: string | undefined, minor: number | undefined): void => {
    if (currency !== undefined && minor !== undefined) sums.set(currency, (sums.get(currency) ?? 0) + minor);
  };
  for (const each of materials) add(each.price?.currency, each.costMinor);
  for (const each of hardware) add(each.price?.currency, each.costMinor);
  for (const each of consumables) add(each.price?.currency, each.costMinor);
  return [...sums].map(([currency, minor]) => ({ currency, minor }));
}
