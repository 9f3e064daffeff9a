import type { Cut, LaidPiece, Offcut, Placement, Trim } from './types.ts';

/**
 * A piece on the saw bench: either final (a part or an offcut), or to be divided by cuts in one direction, first the piece
 * at the fence, then the next from the rest, and so on. `rest` is what remains beyond the last cut.
 */
export interface BenchPiece {
  x: number;
  y: number;
  length: number;
  width: number;
  part?: { id: string; turned: boolean };
  split?: { direction: Cut['direction']; pieces: BenchPiece[]; rest: BenchPiece | null };
}

interface Waiting {
  name: string;
  piece: BenchPiece;
  next: number;
  stage: number;
}

/**
 * Puts the cuts of one piece of stock in the order in which a person makes them: trimming first, then all cuts of the first
 * stage before any of the second, and within a stage the same fence setting as long as any piece wants it.
 * `whole` is the usable area; `trim` what is taken off around it. Cuts beyond `mostStages` only trim parts to size.
 */
export function scheduleCuts(
  whole: BenchPiece,
  trim: Trim,
  mostStages: number,
): Pick<LaidPiece, 'placements' | 'cuts' | 'offcuts'> {
  const cuts: Cut[] = [];
  const placements: Placement[] = [];
  const offcuts: Offcut[] = [];
  let name = 'whole';
  const edges = ['bottom', 'top', 'left', 'right'] as const;
  for (const edge of edges) {
    if (trim[edge] === 0) continue;
    const number = cuts.length + 1;
    const direction = edge === 'left' || edge === 'right' ? 'crosscut' : 'rip';
    cuts.push({
      number,
      piece: name,
      direction,
      fence: trim[edge],
      stage: 0,
      edge,
      yields: [`${number}a`, null],
    });
    name = `${number}a`;
  }

  let later: Waiting[] = [];
  function arrive(piece: BenchPiece, called: string, at: number): void {
    if (piece.split) later.push({ name: called, piece, next: 0, stage: at + 1 });
    else {
      const { x, y, length, width } = piece;
      if (piece.part)
        placements.push({
          part: piece.part.id,
          piece: called,
          x,
          y,
          length,
          width,
          turned: piece.part.turned,
        });
      else offcuts.push({ piece: called, x, y, length, width });
    }
  }
  arrive(whole, name, 0);
  let fence = -1;
  let direction: Cut['direction'] = 'rip';
  while (later.length > 0) {
    const stage = later;
    later = [];
    while (stage.length > 0) {
      const sizeOf = (w: Waiting) => {
        const split = w.piece.split;
        const near = split?.pieces[w.next];
        return !split || !near ? 0 : split.direction === 'crosscut' ? near.length : near.width;
      };
      let chosen = stage.findIndex((w) => w.piece.split?.direction === direction && sizeOf(w) === fence);
      if (chosen < 0) chosen = stage.findIndex((w) => w.piece.split?.direction === direction);
      if (chosen < 0) chosen = 0;
      const waiting = stage[chosen] as Waiting;
      const split = waiting.piece.split as NonNullable<BenchPiece['split']>;
      direction = split.direction;
      fence = sizeOf(waiting);
      const near = split.pieces[waiting.next] as BenchPiece;
      const isLast = waiting.next === split.pieces.length - 1;
      const hasRest = !isLast || split.rest !== null;
      const number = cuts.length + 1;
      const yields: Cut['yields'] = [`${number}a`, hasRest ? `${number}b` : null];
      const isTrimming = waiting.stage > mostStages;
      const ofStage = isTrimming ? { stage: mostStages, trims: true as const } : { stage: waiting.stage };
      cuts.push({ number, piece: waiting.name, direction, fence, ...ofStage, yields });
      arrive(near, yields[0], waiting.stage);
      // The last child may be the rest itself; then one cut parts the two.
      if (isLast) {
        stage.splice(chosen, 1);
        if (split.rest && yields[1]) arrive(split.rest, yields[1], waiting.stage);
      } else {
        waiting.next++;
        waiting.name = yields[1] as string;
      }
    }
  }
  offcuts.sort((a, b) => sizeOfOffcut(b) - sizeOfOffcut(a) || a.x - b.x || a.y - b.y);
  return { placements, cuts, offcuts };
}

function sizeOfOffcut(o: Offcut): number {
  return o.length * (o.width || 1);
}
