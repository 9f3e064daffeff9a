import { ACROSS, type CutTree } from './cut-tree.ts';
import { type BenchPiece, scheduleCuts } from './schedule-cuts.ts';
import { type SheetModel, trimOf } from './sheet-model.ts';
import type { LaidPiece, SheetPart, SheetStock } from './types.ts';

/** Turns a pattern into real sizes, places and cuts. */
export function traceTree(model: SheetModel, tree: CutTree): LaidPiece {
  const { problem } = model;
  const { kerf } = problem;
  const stock = problem.stock[tree.stock] as SheetStock;
  const trim = trimOf(problem, stock);
  const { code, parent, needX, needY } = tree;
  const children: number[][] = Array.from({ length: tree.size }, () => []);
  for (let i = 1; i < tree.size; i++) (children[parent[i] as number] as number[]).push(i);
  let partArea = 0;

  /** Divides a real rectangle along one axis: the given pieces in order from its lower left, then the rest. */
  function divide(
    at: BenchPiece,
    direction: 'rip' | 'crosscut',
    sizes: number[],
    make: (index: number, piece: BenchPiece) => BenchPiece,
  ): BenchPiece {
    const along = direction === 'crosscut';
    let from = 0;
    const total = along ? at.length : at.width;
    const pieces: BenchPiece[] = [];
    const span = (start: number, size: number): BenchPiece =>
      along ? { ...at, x: at.x + start, length: size } : { ...at, y: at.y + start, width: size };
    for (let i = 0; i < sizes.length; i++) {
      const size = sizes[i] as number;
      // Nothing lies beyond the last piece: it is what remains, and takes no cut of its own.
      if (from + size === total) {
        const last = make(i, span(from, size));
        return pieces.length === 0 ? last : { ...at, split: { direction, pieces, rest: last } };
      }
      pieces.push(make(i, span(from, size)));
      from += size + kerf;
    }
    const rest = from < total ? span(from, total - from) : null;
    return { ...at, split: { direction, pieces, rest } };
  }

  function placeLeaf(node: number, at: BenchPiece, first: 'rip' | 'crosscut'): BenchPiece {
    const unit = (code[node] as number) >> 1;
    const part = problem.parts[model.kindOf[unit] as number] as SheetPart;
    const turned = ((code[node] as number) & 1) === 1;
    const length = (needX[node] as number) - kerf;
    const width = (needY[node] as number) - kerf;
    partArea += length * width;
    const leaf = (_: number, piece: BenchPiece): BenchPiece => ({ ...piece, part: { id: part.id, turned } });
    if (first === 'rip')
      return divide(at, 'rip', [width], (_, strip) => divide(strip, 'crosscut', [length], leaf));
    return divide(at, 'crosscut', [length], (_, strip) => divide(strip, 'rip', [width], leaf));
  }

  function placeNode(node: number, at: BenchPiece, above: 'rip' | 'crosscut'): BenchPiece {
    if ((code[node] as number) >= 0) return placeLeaf(node, at, above === 'rip' ? 'crosscut' : 'rip');
    const direction = (code[node] as number) === ACROSS ? 'crosscut' : 'rip';
    const need = (code[node] as number) === ACROSS ? needX : needY;
    // Widest first, equal ones together, so that one fence setting serves several cuts.
    const order = (children[node] as number[])
      .slice()
      .sort((a, b) => (need[b] as number) - (need[a] as number) || a - b);
    return divide(
      at,
      direction,
      order.map((child) => (need[child] as number) - kerf),
      (index, piece) => placeNode(order[index] as number, piece, direction),
    );
  }

  const usable: BenchPiece = {
    x: trim.left,
    y: trim.bottom,
    length: stock.length - trim.left - trim.right,
    width: stock.width - trim.bottom - trim.top,
  };
  let whole: BenchPiece;
  const endArea = (usable.length - (needX[0] as number)) * usable.width;
  const sideArea = usable.length * (usable.width - (needY[0] as number));
  if (model.isRipFirst) whole = placeNode(0, usable, (code[0] as number) >= 0 ? 'crosscut' : 'rip');
  else if ((code[0] as number) >= 0) whole = placeLeaf(0, usable, sideArea >= endArea ? 'rip' : 'crosscut');
  else if ((code[0] as number) === ACROSS && sideArea >= endArea) {
    whole = divide(usable, 'rip', [(needY[0] as number) - kerf], (_, piece) => placeNode(0, piece, 'rip'));
  } else if ((code[0] as number) !== ACROSS && endArea > sideArea) {
    whole = divide(usable, 'crosscut', [(needX[0] as number) - kerf], (_, piece) =>
      placeNode(0, piece, 'crosscut'),
    );
  } else whole = placeNode(0, usable, 'rip');

  return {
    stock: stock.id,
    length: stock.length,
    width: stock.width,
    ...scheduleCuts(whole, trim, model.isRipFirst ? 3 : Infinity),
    yield: partArea / (stock.length * stock.width),
  };
}
