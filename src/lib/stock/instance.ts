import * as z from 'zod';
import { buildBarModel } from './bar-model.ts';
import { buildSheetModel } from './sheet-model.ts';
import type { BarProblem, Layout, SheetProblem, StockProblem } from './types.ts';

/**
 * Instance files: what is to be cut, in millimetres with up to four decimals, as one instance or a list. Inside, lengths are
 * whole ten-thousandths of a millimetre.
 */

const UNITS_PER_MM = 10_000;

const lengthMm = z
  .number()
  .nonnegative()
  .max(1_000_000)
  .refine((mm) => Math.abs(mm * UNITS_PER_MM - Math.round(mm * UNITS_PER_MM)) < 1e-3, {
    error: 'A length has at most four decimals of a millimetre.',
  });
const sizeMm = lengthMm.refine((mm) => mm > 0, { error: 'A size is above 0 mm.' });
const quantity = z.number().int().nonnegative().max(100_000);
const shared = {
  name: z.string().default(''),
  kerf: lengthMm.default(0),
  trim: lengthMm.default(0),
};
const ofStock = {
  id: z.string().optional(),
  count: quantity.nullable().default(null),
  cost: z.number().nonnegative().default(1),
};

const sheetInstanceSchema = z.object({
  ...shared,
  stock: z.array(z.object({ ...ofStock, length: sizeMm, width: sizeMm })).min(1),
  items: z.array(
    z.object({
      id: z.string(),
      length: sizeMm,
      width: sizeMm,
      qty: quantity.default(1),
      turn: z.boolean().default(true),
    }),
  ),
});
const barInstanceSchema = z.object({
  ...shared,
  bars: z
    .array(
      z.object({
        ...ofStock,
        length: sizeMm,
        defects: z.array(z.object({ from: lengthMm, to: lengthMm })).optional(),
      }),
    )
    .min(1),
  pieces: z.array(z.object({ id: z.string(), length: sizeMm, qty: quantity.default(1) })),
});
const instanceSchema = z
  .union([sheetInstanceSchema, barInstanceSchema])
  .refine((i) => hasOwnIds('items' in i ? i.items : i.pieces), { error: 'Each part has an id of its own.' })
  .refine((i) => hasOwnIds(namedStock(i)), { error: 'Each stock has an id of its own.' });

/** One instance, or a list of them. */
export const instanceFileSchema = z.union([instanceSchema, z.array(instanceSchema)]);
export type Instance = z.output<typeof instanceSchema>;

function hasOwnIds(list: readonly { id: string }[]): boolean {
  return new Set(list.map((entry) => entry.id)).size === list.length;
}

function namedStock(
  instance: z.output<typeof sheetInstanceSchema> | z.output<typeof barInstanceSchema>,
): { id: string }[] {
  const stock = 'stock' in instance ? instance.stock : instance.bars;
  return stock.map((s, index) => ({ id: s.id ?? `S${index + 1}` }));
}

const toUnits = (mm: number) => Math.round(mm * UNITS_PER_MM);
const toMm = (units: number) => units / UNITS_PER_MM;

function toProblem(instance: Instance, trimMm: number, isRipFirst: boolean): StockProblem {
  const kerf = toUnits(instance.kerf);
  const trim = toUnits(trimMm);
  const ids = namedStock(instance);
  const idOf = (index: number) => ids[index]?.id ?? '';
  if ('stock' in instance) {
    const problem: SheetProblem = {
      kind: 'sheet',
      kerf,
      trim: { left: trim, right: trim, bottom: trim, top: trim },
      stock: instance.stock.map((s, index) => ({
        ...s,
        id: idOf(index),
        length: toUnits(s.length),
        width: toUnits(s.width),
      })),
      parts: instance.items.map((p) => ({ ...p, length: toUnits(p.length), width: toUnits(p.width) })),
      ripFirst: isRipFirst,
    };
    return problem;
  }
  const problem: BarProblem = {
    kind: 'bar',
    kerf,
    trim: { left: trim, right: trim },
    stock: instance.bars.map((s, index) => ({
      ...s,
      id: idOf(index),
      length: toUnits(s.length),
      defects: (s.defects ?? []).map((d) => ({ from: toUnits(d.from), to: toUnits(d.to) })),
    })),
    parts: instance.pieces.map((p) => ({ ...p, length: toUnits(p.length) })),
  };
  return problem;
}

function hasRefusals(problem: StockProblem): boolean {
  const model = problem.kind === 'sheet' ? buildSheetModel(problem) : buildBarModel(problem);
  return model.refused.length > 0;
}

/**
 * Turns the instances of one file into problems. Trim is taken off each edge of the stock; but there are files whose stock is
 * written as it is after trimming, which shows in parts that fill it from edge to edge. One such part settles it for the file.
 */
export function readInstances(instances: readonly Instance[], isRipFirst = false): StockProblem[] {
  const isTrimmedAlready = instances.some(
    (i) => i.trim > 0 && hasRefusals(toProblem(i, i.trim, false)) && !hasRefusals(toProblem(i, 0, false)),
  );
  return instances.map((i) => toProblem(i, isTrimmedAlready ? 0 : i.trim, isRipFirst));
}

/** A layout in the shape and the unit of instance files: x along the stock from the corner that its sizes are measured from. */
export function writeLayout(name: string, layout: Layout) {
  return {
    name,
    stock: layout.pieces.map((piece) => ({
      material: piece.stock,
      length: toMm(piece.length),
      width: toMm(piece.width),
      placements: piece.placements.map((p) => ({
        id: p.part,
        x: toMm(p.x),
        y: toMm(p.y),
        length: toMm(p.length),
        width: toMm(p.width),
        turned: p.turned,
      })),
      cuts: piece.cuts.map((cut) => ({ ...cut, fence: toMm(cut.fence) })),
      offcuts: piece.offcuts.map((o) => ({
        piece: o.piece,
        x: toMm(o.x),
        y: toMm(o.y),
        length: toMm(o.length),
        width: toMm(o.width),
      })),
    })),
    unplaced: layout.unplaced,
    used: layout.pieces.length,
    newCost: layout.newCost,
    lowerBound: layout.lowerBound,
  };
}
