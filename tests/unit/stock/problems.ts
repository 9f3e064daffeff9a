import fc from 'fast-check';
import { createRandom } from '#lib/stock/random.ts';
import type { BarProblem, SheetPart, SheetProblem } from '#lib/stock/types.ts';

export const NO_TRIM = { left: 0, right: 0, bottom: 0, top: 0 };

/** A sheet problem with everything that a test does not care about left plain. */
export function sheetProblem(given: Partial<SheetProblem>): SheetProblem {
  return { kind: 'sheet', kerf: 0, trim: NO_TRIM, stock: [sheet('sheet', 100, 100)], parts: [], ...given };
}

export function sheet(id: string, length: number, width: number, count: number | null = null, cost = 1) {
  return { id, length, width, count, cost };
}

export function part(id: string, length: number, width: number, qty = 1, turn = true): SheetPart {
  return { id, length, width, qty, turn };
}

export function barProblem(given: Partial<BarProblem>): BarProblem {
  return { kind: 'bar', kerf: 0, trim: { left: 0, right: 0 }, stock: [bar('bar', 100)], parts: [], ...given };
}

export function bar(id: string, length: number, count: number | null = null, cost = 1) {
  return { id, length, count, cost };
}

/**
 * Parts that fill `sheets` sheets exactly, kerf between them, made by cutting the sheets up at random: so many sheets are the
 * optimum, since the parts and their kerfs leave no area over.
 */
export function cutUpSheets(seed: number, sheets: number, cutsPerSheet: number, kerf: number): SheetProblem {
  const random = createRandom(seed);
  const length = 2440;
  const width = 1220;
  const parts: SheetPart[] = [];
  for (let s = 0; s < sheets; s++) {
    const pieces = [{ length, width }];
    for (let c = 0; c < cutsPerSheet; c++) {
      pieces.sort((a, b) => b.length * b.width - a.length * a.width);
      const piece = pieces.shift() ?? { length, width };
      const isAcross = piece.length > piece.width ? random() < 0.8 : random() < 0.2;
      const size = isAcross ? piece.length : piece.width;
      const near = Math.round(size * (0.25 + 0.5 * random()));
      const rest = size - near - kerf;
      if (isAcross) pieces.push({ length: near, width: piece.width }, { length: rest, width: piece.width });
      else pieces.push({ length: piece.length, width: near }, { length: piece.length, width: rest });
    }
    for (const piece of pieces)
      parts.push(part(`P${parts.length + 1}`, piece.length, piece.width, 1, random() < 0.5));
  }
  return sheetProblem({ kerf, stock: [sheet('sheet', length, width)], parts });
}

const size = fc.integer({ min: 1, max: 120 });
const band = fc.integer({ min: 0, max: 6 });
const count = fc.option(fc.integer({ min: 0, max: 3 }), { nil: null });

/** Any sheet problem: kerf, trim on each edge, several stock sizes, some of them free or limited, parts that may be too large. */
export const anySheetProblem: fc.Arbitrary<SheetProblem> = fc
  .record({
    kerf: band,
    trim: fc.record({ left: band, right: band, bottom: band, top: band }),
    stock: fc.array(
      fc.record({
        length: fc.integer({ min: 20, max: 120 }),
        width: fc.integer({ min: 20, max: 120 }),
        count,
        cost: fc.integer({ min: 0, max: 5 }),
      }),
      { minLength: 1, maxLength: 3 },
    ),
    parts: fc.array(
      fc.record({ length: size, width: size, qty: fc.integer({ min: 0, max: 4 }), turn: fc.boolean() }),
      { maxLength: 8 },
    ),
    ripFirst: fc.boolean(),
  })
  .map(({ stock, parts, ...rest }) => ({
    kind: 'sheet',
    ...rest,
    stock: stock.map((s, i) => ({ id: `S${i}`, ...s })),
    parts: parts.map((p, i) => ({ id: `P${i}`, ...p })),
  }));

/** Any bar problem, with defects on single bars. */
export const anyBarProblem: fc.Arbitrary<BarProblem> = fc
  .record({
    kerf: band,
    trim: fc.record({ left: band, right: band }),
    stock: fc.array(
      fc.record({
        length: fc.integer({ min: 20, max: 200 }),
        count,
        cost: fc.integer({ min: 0, max: 5 }),
        defects: fc.array(
          fc.record({ from: fc.integer({ min: 0, max: 150 }), size: fc.integer({ min: 1, max: 20 }) }),
          { maxLength: 2 },
        ),
      }),
      { minLength: 1, maxLength: 4 },
    ),
    parts: fc.array(fc.record({ length: size, qty: fc.integer({ min: 0, max: 5 }) }), { maxLength: 8 }),
  })
  .map(({ stock, parts, ...rest }) => ({
    kind: 'bar',
    ...rest,
    stock: stock.map((s, i) => ({
      ...s,
      id: `S${i}`,
      count: s.defects.length > 0 ? 1 : s.count,
      defects: s.defects.map((d) => ({ from: d.from, to: d.from + d.size })),
    })),
    parts: parts.map((p, i) => ({ id: `P${i}`, ...p })),
  }));
