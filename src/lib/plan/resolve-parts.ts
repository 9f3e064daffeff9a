import { faultsOfShape } from './check-shape.ts';
import { printValue } from './print-value.ts';
import { dataOf, isPresent, keptNumber, numberOf, reportFormula } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import type {
  Formula,
  Grain,
  MaterialDeclaration,
  PartDeclaration,
  ResolvedPart,
  ResolvedShape,
  ShapeDeclaration,
  Value,
} from './types.ts';

/** More pieces of one part than anybody cuts; a slip in a formula must not make a table of a million rows. */
export const MAX_PIECES = 10_000;
/** Stock sizes of a material as numbers: [length, width] or [length], widths of bars from the material. */
export function stockSizes(resolving: Resolving, material: MaterialDeclaration): number[][] {
  if (!material.sizes) return [];
  const value = dataOf(resolving, `Material “${material.name}”`, 'sizes', material.sizes);
  if (!Array.isArray(value)) return [];
  const rows = value.map((row: Value) => (Array.isArray(row) ? row : [row]));
  const wanted = material.kind === 'bar' ? 1 : 2;
  const sizes = rows.flatMap((row) => {
    const numbers = row.filter((each): each is number => typeof each === 'number' && each > 0);
    return numbers.length >= wanted ? [numbers.slice(0, wanted)] : [];
  });
  if (sizes.length < rows.length) {
    reportFormula(resolving, 'sizes', material.sizes, {
      rule: 'stock-size',
      message: `Material “${material.name}”: a stock size is not ${wanted === 2 ? 'a length and a width' : 'a length'} above zero`,
      hint: wanted === 2 ? 'Write sizes={[[2440*mm, 1220*mm]]}.' : 'Write sizes={[2400*mm]}.',
    });
  }
  return sizes;
}

/** The part's grain as it must run: solid stock always along something, sheets only where they have a grain. */
function grainOf(part: PartDeclaration, material: MaterialDeclaration | undefined): Grain {
  if (material?.grain === 'none') return 'none';
  return part.grain ?? 'length';
}

function nameOf(part: PartDeclaration): string {
  return `Part ${part.mark} “${part.name}”`;
}

const DIMENSIONS = [
  ['length', 'long'],
  ['width', 'wide'],
  ['thickness', 'thick'],
] as const;

function formulaOf(
  part: PartDeclaration,
  dimension: 'length' | 'width' | 'thickness',
  material: MaterialDeclaration | undefined,
): Formula {
  return dimension === 'thickness' ? (part.thickness ?? material?.thickness ?? part.length) : part[dimension];
}

/** Reports sizes that no piece can have: zero, negative, or more than any stock it could be cut from. */
function checkSizes(
  resolving: Resolving,
  part: PartDeclaration,
  resolved: ResolvedPart,
  material: MaterialDeclaration | undefined,
): void {
  const { units } = resolving;
  let isWhole = true;
  for (const [dimension, word] of DIMENSIONS) {
    const value = resolved[dimension];
    if (value > 0) continue;
    isWhole = false;
    const slot = resolving.program.slotOf.get(`${part.mark}.${dimension}`);
    if (slot !== undefined && !Number.isFinite(resolving.slots[slot])) continue;
    const shown = printValue('length', value, units);
    reportFormula(resolving, dimension, formulaOf(part, dimension, material), {
      rule: 'part-impossible',
      message: `${nameOf(part)} would be ${shown} ${word}`,
      value: shown,
      hint: 'Exclude such sizes with <Require that={…}>, or leave the part out with when={…}.',
    });
  }
  if (!isWhole || !material) return;
  const nominal = keptNumber(resolving, `${material.name}.thickness`);
  if (resolved.thickness > nominal) {
    reportFormula(resolving, 'thickness', formulaOf(part, 'thickness', material), {
      rule: 'part-beyond-stock',
      message: `${nameOf(part)} would be ${printValue('length', resolved.thickness, units)} thick, and “${material.label}” is ${printValue('length', nominal, units)}`,
      value: printValue('length', resolved.thickness, units),
      hint: 'Choose a thicker material.',
    });
  }
  checkStock(resolving, part, resolved, material);
}

function checkStock(
  resolving: Resolving,
  part: PartDeclaration,
  resolved: ResolvedPart,
  material: MaterialDeclaration,
): void {
  const sizes = stockSizes(resolving, material);
  if (sizes.length === 0) return;
  const { units } = resolving;
  // The side of the part that lies along the stock's length; free grain lets it lie either way.
  const isAcross = material.grain !== 'none' && (resolved.grain === 'width') !== (material.grain === 'width');
  const isFree = material.kind === 'sheet' && (material.grain === 'none' || resolved.grain === 'none');
  const [run, across] = isAcross ? [resolved.width, resolved.length] : [resolved.length, resolved.width];
  const fits = sizes.some(([stockLength = 0, stockWidth = Infinity]) =>
    isFree
      ? Math.max(run, across) <= Math.max(stockLength, stockWidth) &&
        Math.min(run, across) <= Math.min(stockLength, stockWidth)
      : run <= stockLength && across <= stockWidth,
  );
  if (fits) return;
  const fitsLength = sizes.some(([stockLength = 0]) => run <= stockLength);
  const isGluedUp = material.kind === 'board' && fitsLength;
  const dimension = isGluedUp || fitsLength ? (isAcross ? 'length' : 'width') : isAcross ? 'width' : 'length';
  reportFormula(resolving, dimension, part[dimension], {
    rule: isGluedUp ? 'glue-up' : 'part-beyond-stock',
    severity: isGluedUp ? 'advice' : 'error',
    message: `${nameOf(part)} would be ${printValue('length', resolved.length, units)} by ${printValue('length', resolved.width, units)}, ${
      isGluedUp
        ? `wider than any board of “${material.label}”`
        : `larger than any stock of “${material.label}”`
    }`,
    value: printValue('length', resolved[dimension], units),
    hint: isGluedUp
      ? 'Say in a step that it is glued up from several boards.'
      : 'Exclude such sizes with <Require that={…}>, or add a larger stock size.',
  });
}

function resolveShape(resolving: Resolving, part: PartDeclaration, shape: ShapeDeclaration): ResolvedShape {
  const values: Record<string, Value> = {};
  for (const [name, formula] of Object.entries(shape.formulas))
    values[name] = dataOf(resolving, nameOf(part), name, formula);
  return { type: shape.type, at: shape.at, values, words: { ...shape.words }, flags: [...shape.flags] };
}

function tripleOf(
  resolving: Resolving,
  part: PartDeclaration,
  name: 'at' | 'every',
  formula: Formula,
): [number, number, number] | undefined {
  const value = dataOf(resolving, nameOf(part), name, formula);
  const numbers = Array.isArray(value)
    ? value.filter((each): each is number => typeof each === 'number')
    : [];
  const [x, y, z] = numbers;
  if (numbers.length === 3 && x !== undefined && y !== undefined && z !== undefined) return [x, y, z];
  reportFormula(resolving, name, formula, {
    rule: 'wrong-kind',
    message: `${nameOf(part)}: ${name} has ${numbers.length} lengths, and three are wanted`,
    hint: `Write ${name}={[0*mm, 0*mm, 0*mm]}.`,
  });
  return undefined;
}

/** How many pieces to cut: a whole number; none leaves the part out. */
function pieceCount(resolving: Resolving, part: PartDeclaration): number {
  const qty = keptNumber(resolving, `${part.mark}.qty`);
  const isGood = Number.isInteger(qty) && qty >= 0 && qty <= MAX_PIECES;
  if (isGood) return qty;
  reportFormula(resolving, 'qty', part.qty, {
    rule: 'part-quantity',
    message: `${nameOf(part)} would be cut ${printValue('number', qty, resolving.units)} times`,
    value: printValue('number', qty, resolving.units),
    wanted: `a whole number from 0 to ${MAX_PIECES}`,
    hint: 'Round it: qty={ceil(…)}, or leave the part out with when={…}.',
  });
  return Math.min(MAX_PIECES, Math.max(0, Math.round(qty)));
}

function resolvePart(
  resolving: Resolving,
  part: PartDeclaration,
  material: MaterialDeclaration | undefined,
): ResolvedPart {
  const { mark } = part;
  const resolved: ResolvedPart = {
    mark,
    name: part.name,
    material: part.material,
    qty: pieceCount(resolving, part),
    length: keptNumber(resolving, `${mark}.length`),
    width: keptNumber(resolving, `${mark}.width`),
    thickness: keptNumber(resolving, `${mark}.thickness`),
    grain: grainOf(part, material),
    handed: part.handed,
    edges: [...part.edges],
    shape: [],
    at: part.at,
  };
  if (part.along) resolved.along = [part.along[0], part.along[1]];
  const position = part.position && tripleOf(resolving, part, 'at', part.position);
  if (position) resolved.position = position;
  const every = part.every && tripleOf(resolving, part, 'every', part.every);
  if (every) resolved.every = every;
  if (part.turn?.expression.op === 'list') {
    const [axis, angle] = part.turn.expression.items;
    if (axis?.op === 'value' && angle) {
      resolved.turn = [
        String(axis.value),
        numberOf(resolving, nameOf(part), 'turn', { ...part.turn, expression: angle }),
      ];
    }
  }
  return resolved;
}

/** Every part that is cut at this fit, in the order of the file, with its shape; impossible ones are reported and kept. */
export function resolveParts(resolving: Resolving): ResolvedPart[] {
  const materials = new Map(
    resolving.plan.declarations.flatMap((each) =>
      each.type === 'material' ? [[each.name, each] as const] : [],
    ),
  );
  const parts: ResolvedPart[] = [];
  for (const declaration of resolving.plan.declarations) {
    if (declaration.type !== 'part' || !isPresent(resolving, declaration)) continue;
    const material = materials.get(declaration.material);
    const part = resolvePart(resolving, declaration, material);
    if (part.qty === 0) continue;
    if (material && !isPresent(resolving, material)) {
      resolving.problems.add(declaration.at, {
        rule: 'material-left-out',
        message: `${nameOf(declaration)} is cut from “${material.name}”, which is left out at these sizes.`,
        hint: 'Give both the same when={…}.',
      });
    }
    checkSizes(resolving, declaration, part, material);
    const isWhole = part.length > 0 && part.width > 0 && part.thickness > 0;
    for (const shape of declaration.shape) {
      if (!isPresent(resolving, shape)) continue;
      const resolved = resolveShape(resolving, declaration, shape);
      part.shape.push(resolved);
      // On a part that is itself impossible, its shape has nothing to be measured against.
      for (const fault of isWhole ? faultsOfShape(resolved, part) : []) {
        const formula = shape.formulas[fault.name] ?? Object.values(shape.formulas)[0];
        if (!formula) continue;
        const value = resolved.values[fault.name];
        const shown = value === undefined ? '' : printValue(formula.expression.kind, value, resolving.units);
        reportFormula(resolving, fault.name, formula, {
          rule: 'shape-impossible',
          message: `${nameOf(declaration)}: ${fault.message}${shown && `, at ${shown}`}`,
          value: shown,
          hint: 'Exclude such sizes with <Require that={…}>, or leave it out with when={…}.',
        });
      }
    }
    parts.push(part);
  }
  return parts;
}
