import type { Cut, LaidPiece, Layout, StockProblem, Trim } from './types.ts';

/**
 * Checks a layout from first principles. It shares nothing with the code that makes layouts but the types,
 * so that a mistake there cannot hide itself here.
 */

export type FaultRule =
  | 'unknown-stock'
  | 'unknown-part'
  | 'stock-size-changed'
  | 'too-many-of-stock'
  | 'part-size-changed'
  | 'grain-turned'
  | 'outside-stock'
  | 'overlap'
  | 'kerf-missing'
  | 'defect-hit'
  | 'cut-impossible'
  | 'cut-order'
  | 'cut-result-differs'
  | 'stage-exceeded'
  | 'offcut-differs'
  | 'yield-differs'
  | 'part-count'
  | 'refusal-wrong'
  | 'cost-differs'
  | 'bound-above-cost';

/** One thing wrong with a layout. `piece` counts pieces of stock from 0. */
export interface Fault {
  rule: FaultRule;
  message: string;
  piece?: number;
}

interface Rectangle {
  x: number;
  y: number;
  length: number;
  width: number;
}

interface Stock {
  length: number;
  width: number;
  count: number | null;
  cost: number;
  trim: Trim;
  defects: { from: number; to: number }[];
}
interface Part {
  length: number;
  width: number;
  qty: number;
  turn: boolean;
}

/** A bar is checked as a strip one unit wide, so that one set of rules serves both kinds. */
const BAR_WIDTH = 1;

function readStock(problem: StockProblem): Map<string, Stock> {
  const found = new Map<string, Stock>();
  if (problem.kind === 'sheet') {
    for (const s of problem.stock) {
      found.set(s.id, {
        length: s.length,
        width: s.width,
        count: s.count,
        cost: s.cost,
        trim: s.trim ?? problem.trim,
        defects: [],
      });
    }
  } else {
    for (const s of problem.stock) {
      const trim = { ...(s.trim ?? problem.trim), bottom: 0, top: 0 };
      found.set(s.id, {
        length: s.length,
        width: BAR_WIDTH,
        count: s.count,
        cost: s.cost,
        trim,
        defects: s.defects ?? [],
      });
    }
  }
  return found;
}

function readParts(problem: StockProblem): Map<string, Part> {
  const found = new Map<string, Part>();
  for (const p of problem.parts) {
    found.set(p.id, {
      length: p.length,
      width: 'width' in p ? p.width : BAR_WIDTH,
      qty: p.qty,
      turn: 'turn' in p ? p.turn : false,
    });
  }
  return found;
}

const same = (a: Rectangle, b: Rectangle) =>
  a.x === b.x && a.y === b.y && a.length === b.length && a.width === b.width;

/** Distance between two spans, negative where they overlap. */
const gap = (a0: number, a1: number, b0: number, b1: number) => Math.max(a0, b0) - Math.min(a1, b1);

/** Makes the cuts one after another on the real piece, and returns the pieces that remain, or the first fault. */
function replayCuts(
  laid: LaidPiece,
  stock: Stock,
  kerf: number,
): Map<string, Rectangle> | { rule: FaultRule; message: string } {
  const pieces = new Map<string, Rectangle>([
    ['whole', { x: 0, y: 0, length: stock.length, width: stock.width }],
  ]);
  const stageOf = new Map<string, { stage: number; direction: Cut['direction'] | null }>([
    ['whole', { stage: 0, direction: null }],
  ]);
  const partPieces = new Set(laid.placements.map((p) => p.piece));
  let number = 0;
  for (const cut of laid.cuts) {
    number += 1;
    if (cut.number !== number)
      return { rule: 'cut-order', message: `Cut ${cut.number} stands where cut ${number} is due.` };
    const piece = pieces.get(cut.piece);
    if (!piece)
      return {
        rule: 'cut-impossible',
        message: `Cut ${cut.number} needs piece ${cut.piece}, which is not there.`,
      };
    const size = cut.direction === 'crosscut' ? piece.length : piece.width;
    if (!(cut.fence > 0) || cut.fence >= size) {
      return {
        rule: 'cut-impossible',
        message: `Cut ${cut.number} is set to ${cut.fence} on a piece of ${size}.`,
      };
    }
    const before = stageOf.get(cut.piece);
    const changed = before?.direction !== cut.direction;
    const stage = cut.edge ? 0 : (before?.stage ?? 0) + (changed && !cut.trims ? 1 : 0);
    if (cut.trims && !partPieces.has(cut.yields[0])) {
      return { rule: 'cut-order', message: `Cut ${cut.number} trims no part to size.` };
    }
    if (cut.stage !== stage)
      return { rule: 'cut-order', message: `Cut ${cut.number} is of stage ${stage}, not ${cut.stage}.` };
    if (cut.edge && (cut.edge === 'left' || cut.edge === 'right') !== (cut.direction === 'crosscut')) {
      return {
        rule: 'cut-impossible',
        message: `Cut ${cut.number} cannot take a band off the ${cut.edge} edge.`,
      };
    }
    pieces.delete(cut.piece);
    const [near, rest] = cut.yields;
    if (pieces.has(near) || (rest !== null && pieces.has(rest)) || near === rest) {
      return { rule: 'cut-impossible', message: `Cut ${cut.number} gives a name that is taken.` };
    }
    const along = cut.direction === 'crosscut';
    let kept: Rectangle;
    let beyond = 0;
    if (cut.edge) {
      const from = cut.edge === 'left' || cut.edge === 'bottom' ? cut.fence : 0;
      kept = along
        ? { ...piece, x: piece.x + from, length: piece.length - cut.fence }
        : { ...piece, y: piece.y + from, width: piece.width - cut.fence };
    } else {
      kept = along ? { ...piece, length: cut.fence } : { ...piece, width: cut.fence };
      beyond = size - cut.fence - kerf;
    }
    if (beyond > 0 !== (rest !== null)) {
      return {
        rule: 'cut-impossible',
        message: `Cut ${cut.number} says that ${rest ?? 'nothing'} is left, but ${beyond} is.`,
      };
    }
    pieces.set(near, kept);
    const now = { stage, direction: cut.edge ? null : cut.direction };
    stageOf.set(near, now);
    if (rest !== null) {
      const start = cut.fence + kerf;
      pieces.set(
        rest,
        along
          ? { ...piece, x: piece.x + start, length: beyond }
          : { ...piece, y: piece.y + start, width: beyond },
      );
      stageOf.set(rest, now);
    }
  }
  return pieces;
}

/**
 * The first cut that leaves the order rip, crosscut, rip, each of which may be left out, or else null. A fourth pass may only
 * trim one part to its length.
 */
function findCutBeyondStages(laid: LaidPiece): number | null {
  const partPieces = new Set(laid.placements.map((p) => p.piece));
  const reached = new Map<string, number>([['whole', 1]]);
  for (const cut of laid.cuts) {
    const before = reached.get(cut.piece) ?? 1;
    const isRip = cut.direction === 'rip';
    const stage = cut.edge || (before % 2 === 1) === isRip ? before : before + 1;
    if (stage > 3 && !(stage === 4 && partPieces.has(cut.yields[0]))) return cut.number;
    for (const name of cut.yields) if (name !== null) reached.set(name, stage);
  }
  return null;
}

/** Every fault of a layout against its problem; an empty list means that it can be cut exactly as it says. */
export function verifyLayout(problem: StockProblem, layout: Layout): Fault[] {
  const faults: Fault[] = [];
  const stocks = readStock(problem);
  const parts = readParts(problem);
  const isBar = problem.kind === 'bar';
  const used = new Map<string, number>();
  const cut = new Map<string, number>();
  let cost = 0;

  layout.pieces.forEach((laid, piece) => {
    const say = (rule: FaultRule, message: string) => faults.push({ rule, message, piece });
    const stock = stocks.get(laid.stock);
    if (!stock) {
      say('unknown-stock', `There is no stock ${laid.stock}.`);
      return;
    }
    used.set(laid.stock, (used.get(laid.stock) ?? 0) + 1);
    cost += stock.cost;
    const widthOf = (shown: number) => (isBar ? BAR_WIDTH : shown);
    if (laid.length !== stock.length || widthOf(laid.width) !== stock.width || (isBar && laid.width !== 0)) {
      say(
        'stock-size-changed',
        `${laid.stock} is ${stock.length} x ${stock.width}, not ${laid.length} x ${laid.width}.`,
      );
    }

    const rectangles = laid.placements.map((p) => ({
      x: p.x,
      y: p.y,
      length: p.length,
      width: widthOf(p.width),
    }));
    let partArea = 0;
    laid.placements.forEach((placed, i) => {
      const r = rectangles[i] as Rectangle;
      const part = parts.get(placed.part);
      if (!part) {
        say('unknown-part', `There is no part ${placed.part}.`);
        return;
      }
      cut.set(placed.part, (cut.get(placed.part) ?? 0) + 1);
      partArea += r.length * r.width;
      const [length, width] = placed.turned ? [part.width, part.length] : [part.length, part.width];
      if (r.length !== length || r.width !== width) {
        say(
          'part-size-changed',
          `${placed.part} is laid as ${r.length} x ${r.width}, not ${length} x ${width}.`,
        );
      }
      if (placed.turned && !part.turn) say('grain-turned', `${placed.part} is turned across the grain.`);
      const { trim } = stock;
      if (
        r.x < trim.left ||
        r.y < trim.bottom ||
        r.x + r.length > stock.length - trim.right ||
        r.y + r.width > stock.width - trim.top
      ) {
        say(
          'outside-stock',
          `${placed.part} at ${r.x}, ${r.y} reaches beyond the usable part of ${laid.stock}.`,
        );
      }
      for (const d of stock.defects) {
        if (gap(r.x, r.x + r.length, d.from, d.to) < 0)
          say('defect-hit', `${placed.part} at ${r.x} lies over a defect.`);
      }
      for (let j = 0; j < i; j++) {
        const o = rectangles[j] as Rectangle;
        const gx = gap(r.x, r.x + r.length, o.x, o.x + o.length);
        const gy = gap(r.y, r.y + r.width, o.y, o.y + o.width);
        const between = Math.max(gx, gy);
        if (between < 0) say('overlap', `${placed.part} lies over ${laid.placements[j]?.part}.`);
        else if (between < problem.kerf) {
          say(
            'kerf-missing',
            `Only ${between} is left between ${placed.part} and ${laid.placements[j]?.part}.`,
          );
        }
      }
    });

    const left = replayCuts(laid, stock, problem.kerf);
    if (!(left instanceof Map)) {
      say(left.rule, left.message);
    } else {
      const claimed = new Set<string>();
      const claim = (name: string, r: Rectangle, rule: FaultRule, what: string) => {
        const piece = left.get(name);
        if (!piece || claimed.has(name) || !same(piece, r))
          say(rule, `The cuts do not leave ${what} as piece ${name}.`);
        claimed.add(name);
      };
      laid.placements.forEach((p, i) =>
        claim(p.piece, rectangles[i] as Rectangle, 'cut-result-differs', p.part),
      );
      for (const o of laid.offcuts) {
        claim(
          o.piece,
          { x: o.x, y: o.y, length: o.length, width: widthOf(o.width) },
          'offcut-differs',
          'an offcut',
        );
      }
      for (const name of left.keys()) {
        if (!claimed.has(name)) say('offcut-differs', `Piece ${name} is neither a part nor an offcut.`);
      }
    }
    if (problem.kind === 'sheet' && problem.ripFirst) {
      const name = findCutBeyondStages(laid);
      if (name !== null)
        say('stage-exceeded', `Cut ${name} is not within rip, crosscut, rip and trimming to size.`);
    }
    const share = partArea / (stock.length * stock.width);
    if (Math.abs(share - laid.yield) > 1e-9)
      say('yield-differs', `The yield is ${share}, not ${laid.yield}.`);
  });

  for (const [id, n] of used) {
    const count = stocks.get(id)?.count ?? null;
    if (count !== null && n > count)
      faults.push({ rule: 'too-many-of-stock', message: `${n} of ${id} are used, ${count} are there.` });
  }
  const refused = new Map<string, number>();
  for (const u of layout.unplaced) {
    refused.set(u.part, (refused.get(u.part) ?? 0) + u.qty);
    const part = parts.get(u.part);
    const fits = part && [...stocks.values()].some((s) => fitsStock(part, s));
    if (!part || !(u.qty > 0) || (u.reason === 'PART_EXCEEDS_STOCK') === fits) {
      faults.push({ rule: 'refusal-wrong', message: `${u.part} is refused without reason.` });
    }
  }
  for (const [id, part] of parts) {
    const n = (cut.get(id) ?? 0) + (refused.get(id) ?? 0);
    if (n !== part.qty)
      faults.push({ rule: 'part-count', message: `${id} is laid or refused ${n} times, not ${part.qty}.` });
  }
  if (Math.abs(cost - layout.newCost) > 1e-6) {
    faults.push({ rule: 'cost-differs', message: `The stock costs ${cost}, not ${layout.newCost}.` });
  }
  if (layout.lowerBound > cost + 1e-6 || (layout.isProved && layout.lowerBound < cost - 1e-6)) {
    faults.push({
      rule: 'bound-above-cost',
      message: `A bound of ${layout.lowerBound} does not go with a cost of ${cost}.`,
    });
  }
  return faults;
}

function fitsStock(part: Part, stock: Stock): boolean {
  const length = stock.length - stock.trim.left - stock.trim.right;
  const width = stock.width - stock.trim.bottom - stock.trim.top;
  if (part.turn && part.width <= length && part.length <= width) return true;
  if (part.width > width) return false;
  // The clear stretches of a bar lie between its defects.
  let from = stock.trim.left;
  let longest = 0;
  for (const d of [...stock.defects].sort((a, b) => a.from - b.from)) {
    longest = Math.max(longest, Math.min(d.from, stock.length - stock.trim.right) - from);
    from = Math.max(from, d.to);
  }
  longest = Math.max(longest, stock.length - stock.trim.right - from);
  return part.length <= longest;
}
