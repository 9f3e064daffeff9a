import type { BarPattern } from './bar-columns.ts';
import type { BarModel, Stretch } from './bar-model.ts';
import type { BarPart, BarStock, Cut, LaidPiece, Offcut, Placement } from './types.ts';

/**
 * Turns a filled bar into places and cuts: from the left, longest parts first, so that equal stops come together. Defects are
 * cut away where a part follows them; sound wood before a defect becomes an offcut.
 */
export function traceBar(model: BarModel, pattern: BarPattern): LaidPiece {
  const { problem } = model;
  const { kerf } = problem;
  const stock = problem.stock[pattern.stock] as BarStock;
  const cuts: Cut[] = [];
  const placements: Placement[] = [];
  const offcuts: Offcut[] = [];
  let piece = 'whole';
  let at = 0;

  /** Takes everything up to `to` off the left end, the kerf within it. */
  function clearTo(to: number): void {
    if (to <= at) return;
    const number = cuts.length + 1;
    cuts.push({
      number,
      piece,
      direction: 'crosscut',
      fence: to - at,
      stage: 0,
      edge: 'left',
      yields: [`${number}a`, null],
    });
    piece = `${number}a`;
    at = to;
  }

  /** Cuts a length off the left end; false when the bar ends there without a cut. */
  function cutOff(length: number): string {
    const rest = stock.length - at - length;
    if (rest === 0) return piece;
    const number = cuts.length + 1;
    const isRest = rest > kerf;
    const near = `${number}a`;
    cuts.push({
      number,
      piece,
      direction: 'crosscut',
      fence: length,
      stage: 1,
      yields: [near, isRest ? `${number}b` : null],
    });
    piece = `${number}b`;
    at = isRest ? at + length + kerf : stock.length;
    return near;
  }

  let partLength = 0;
  const filled = pattern.take.map((take, s) => ({ take, s })).filter(({ take }) => take.some((n) => n > 0));
  filled.forEach(({ take, s }, turn) => {
    const stretch = (model.stretches[pattern.stock] as Stretch[])[s] as Stretch;
    clearTo(stretch.from);
    take.forEach((n, kind) => {
      for (let k = 0; k < n; k++) {
        const part = problem.parts[model.partOf[kind] as number] as BarPart;
        const x = at;
        const name = cutOff(part.length);
        partLength += part.length;
        placements.push({
          part: part.id,
          piece: name,
          x,
          y: 0,
          length: part.length,
          width: 0,
          turned: false,
        });
      }
    });
    // Sound wood before a defect is worth keeping whole.
    const sound = stretch.to - at;
    const isBeforeDefect =
      turn < filled.length - 1 || s < (model.stretches[pattern.stock] as Stretch[]).length - 1;
    if (sound > 0 && isBeforeDefect) {
      const x = at;
      offcuts.push({ piece: cutOff(sound), x, y: 0, length: sound, width: 0 });
    }
  });
  const hasEnded = at >= stock.length || placements.some((p) => p.piece === piece);
  if (!hasEnded) offcuts.push({ piece, x: at, y: 0, length: stock.length - at, width: 0 });
  offcuts.sort((a, b) => b.length - a.length || a.x - b.x);
  return {
    stock: stock.id,
    length: stock.length,
    width: 0,
    placements,
    cuts,
    offcuts,
    yield: partLength / stock.length,
  };
}
