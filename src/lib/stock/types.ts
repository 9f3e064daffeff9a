/**
 * The shapes of stock layout: what is to be cut, from what, and how. Plain data that survives JSON.
 *
 * Every length is a whole number of one unit that the caller chooses and that stays the same throughout a problem:
 * nanometres where a plan asks, ten-thousandths of a millimetre where a file does. Nothing here knows which.
 * x runs along the length of the stock (its grain), y along its width, both from the untrimmed lower left corner.
 */

/** What is taken off each edge of a piece of stock before anything is cut from it, the saw's kerf included. */
export interface Trim {
  left: number;
  right: number;
  bottom: number;
  top: number;
}

/** A size of sheet or board that can be had: bought (cost above 0) or the buyer's own (cost 0). */
export interface SheetStock {
  id: string;
  length: number;
  width: number;
  /** How many there are; null when as many as wanted. */
  count: number | null;
  /** Price of one piece in whole minor units, or any whole measure of dearness; 0 for what the buyer has already. */
  cost: number;
  /** Its own trim, where it differs from the problem's. */
  trim?: Trim;
}

/** A rectangular part to be cut `qty` times. It may lie turned by a quarter only where `turn` is true. */
export interface SheetPart {
  id: string;
  length: number;
  width: number;
  qty: number;
  turn: boolean;
}

export interface SheetProblem {
  kind: 'sheet';
  kerf: number;
  trim: Trim;
  stock: SheetStock[];
  parts: SheetPart[];
  /** First cuts along the grain only, then crosscuts, then rips: no more stages, save for trimming a part to size. */
  ripFirst?: boolean;
}

/** A stretch along a bar from which no part may be cut, measured from its untrimmed left end. */
export interface Defect {
  from: number;
  to: number;
}

/** A length of bar or of board used as a bar. Each piece that has defects is its own entry with count 1. */
export interface BarStock {
  id: string;
  length: number;
  count: number | null;
  cost: number;
  trim?: Pick<Trim, 'left' | 'right'>;
  defects?: Defect[];
}

export interface BarPart {
  id: string;
  length: number;
  qty: number;
}

export interface BarProblem {
  kind: 'bar';
  kerf: number;
  trim: Pick<Trim, 'left' | 'right'>;
  stock: BarStock[];
  parts: BarPart[];
}

export type StockProblem = SheetProblem | BarProblem;

/** Where one part lies: `length` along x and `width` along y as it lies, so swapped when turned. On a bar y and width are 0. */
export interface Placement {
  part: string;
  /** Name of the piece, as the cuts name it, that is this part. */
  piece: string;
  x: number;
  y: number;
  length: number;
  width: number;
  turned: boolean;
}

/**
 * One pass of the saw through one piece, in the order in which a person makes them.
 * A rip runs along x and parts widths, a crosscut runs along y and parts lengths.
 */
export interface Cut {
  /** Counts from 1 within one piece of stock. */
  number: number;
  /** The piece cut: `whole` at first, then as earlier cuts named what they left. */
  piece: string;
  direction: 'rip' | 'crosscut';
  /** Fence or stop setting: the size of the piece nearest to the lower left, or of the band taken off an edge. */
  fence: number;
  /** 0 for trimming the stock, then 1, 2, 3 … counting changes of direction. */
  stage: number;
  /** Set on a cut that only takes a band off this edge, the blade's kerf within it. */
  edge?: keyof Trim;
  /** Set on a cut that only trims one part to size where no further stage is allowed: it counts with the stage before it. */
  trims?: true;
  /** Name of the piece at the fence, and of the rest beyond the kerf (null when nothing is left of it). */
  yields: [string, string | null];
}

/** A rectangle left over. On a bar y and width are 0. */
export interface Offcut {
  piece: string;
  x: number;
  y: number;
  length: number;
  width: number;
}

/** One sheet, board or bar with all that is cut from it. */
export interface LaidPiece {
  /** Id of the stock it is. */
  stock: string;
  length: number;
  /** 0 for a bar. */
  width: number;
  placements: Placement[];
  cuts: Cut[];
  /** Largest first. */
  offcuts: Offcut[];
  /** Share of the untrimmed piece that becomes parts, 0 to 1. */
  yield: number;
}

/** A part that is not laid: larger than any stock, or more of them than the limited stock holds. */
export interface Unplaced {
  part: string;
  qty: number;
  reason: 'PART_EXCEEDS_STOCK' | 'STOCK_EXHAUSTED';
}

export interface Layout {
  kind: 'sheet' | 'bar';
  pieces: LaidPiece[];
  unplaced: Unplaced[];
  /** Cost of all pieces used; the buyer's own cost nothing. */
  newCost: number;
  /** No layout of the parts that were laid can cost less. */
  lowerBound: number;
  /** Whether `newCost` is proved least. */
  isProved: boolean;
  /** Steps of search spent when this layout was found. */
  steps: number;
}

/** How long to look, and where to report. The same problem, seed and number of steps always give the same layout. */
export interface LayOutOptions {
  /** Steps of search, 0 for the first answer alone; default 20 000. */
  steps?: number;
  seed?: number;
  /** Called with each layout better than the one before, the first answer included. */
  onBetter?: (layout: Layout) => void;
  /** Asked every few steps; a caller with a clock ends the search by it. */
  shouldStop?: () => boolean;
}
