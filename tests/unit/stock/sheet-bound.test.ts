import { describe, expect, it } from 'vitest';
import { boundSheets } from '#lib/stock/sheet-bound.ts';
import { buildSheetModel } from '#lib/stock/sheet-model.ts';
import type { SheetProblem } from '#lib/stock/types.ts';
import { cutUpSheets, part, sheet, sheetProblem } from './problems.ts';

const boundOf = (problem: SheetProblem) => boundSheets(buildSheetModel(problem));

describe('the lower bound on sheets', () => {
  it('is the area rounded up where parts are small', () => {
    // 26 x 400 = 10 400 of 10 000.
    expect(boundOf(sheetProblem({ parts: [part('A', 20, 20, 26)] }))).toBe(2);
  });

  it('sees that parts of more than half the sheet never share one', () => {
    // Five of 51 x 51 cover 1.3 sheets, yet no two fit together.
    expect(boundOf(sheetProblem({ parts: [part('A', 51, 51, 5)] }))).toBe(5);
    // Kerf makes the difference between two halves and one.
    const halves = [part('A', 50, 100, 4, false)];
    expect(boundOf(sheetProblem({ parts: halves }))).toBe(2);
    expect(boundOf(sheetProblem({ kerf: 1, parts: halves }))).toBe(4);
  });

  it('sees that parts of more than a third come at most two along a side', () => {
    // 34 x 34: four to a sheet, so nine need three; their area is 1.04 sheets.
    expect(boundOf(sheetProblem({ parts: [part('A', 34, 34, 9)] }))).toBe(3);
  });

  it.each([1, 2, 3])('never exceeds the optimum of sheets that were cut up (%i)', (sheets) => {
    for (let seed = 1; seed <= 10; seed++) expect(boundOf(cutUpSheets(seed, sheets, 8, 32))).toBe(sheets);
  });

  it('counts what own offcuts can hold as free, but only for parts that fit them', () => {
    const stock = [sheet('new', 100, 100, null, 9), sheet('own', 60, 60, 4, 0)];
    expect(boundOf(sheetProblem({ stock, parts: [part('A', 60, 60, 4)] }))).toBe(0);
    // The offcuts have the area of one sheet and more, but no part of 70 fits them.
    expect(boundOf(sheetProblem({ stock, parts: [part('A', 70, 60, 2)] }))).toBe(18);
  });

  it('is a sum of whole prices where there are several', () => {
    const stock = [sheet('large', 200, 100, null, 100), sheet('small', 100, 100, null, 60)];
    // 2.5 small sheets' area: at 50 for each 10 000 that is 125, and prices come in steps of 20.
    expect(boundOf(sheetProblem({ stock, parts: [part('A', 50, 50, 10)] }))).toBe(140);
  });

  it('is infinite when the stock cannot hold the parts', () => {
    expect(boundOf(sheetProblem({ stock: [sheet('s', 100, 100, 1)], parts: [part('A', 100, 100, 2)] }))).toBe(
      Infinity,
    );
  });
});
