import type { Cut, LaidPiece, Placement, Trim } from './types.ts';

/** What the drawing needs beside the layout. */
export interface LayoutDrawing {
  /** Kerf, in the unit of the layout. */
  kerf: number;
  /** Prints a length of the layout in the reader's units. */
  formatLength: (length: number) => string;
  /** What the picture shows, for those who cannot see it: "Birch plywood, sheet 1 of 3". */
  title: string;
  /** Set apart from other drawings on the page: letters, digits and hyphens. */
  id: string;
  /** Whether grain runs along the stock, and arrows show it. */
  hasGrain: boolean;
  /** The size shown as the width of a bar, which has none in its layout. */
  barWidth?: number;
}

/** The line that the saw takes, from corner to corner of the piece it parts. */
interface CutLine {
  number: number;
  x1: number;
  y1: number;
  x2: number;
  y2: number;
}

interface Box {
  x: number;
  y: number;
  length: number;
  width: number;
}

/** Drawing units along the longer side; text and marks have fixed sizes in these. */
const LONG_SIDE = 1000;
const MARGIN = 34;
const MARK_RADIUS = 15;
const SMALLEST_MARK = 7;
const TEXT = 14;
const SMALL_TEXT = 11;
/** Rough width of a figure in the tabular face, as a share of its size. */
const FIGURE = 0.62;

function escapeText(text: string): string {
  return text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}

const round = (value: number) => Math.round(value * 100) / 100;

/** Follows the cuts through the piece and says where each runs. */
function traceCutLines(laid: LaidPiece, width: number, kerf: number): CutLine[] {
  const pieces = new Map<string, Box>([['whole', { x: 0, y: 0, length: laid.length, width }]]);
  const lines: CutLine[] = [];
  for (const cut of laid.cuts) {
    const piece = pieces.get(cut.piece);
    if (!piece) continue;
    const isAcross = cut.direction === 'crosscut';
    const size = isAcross ? piece.length : piece.width;
    const isFarEdge = cut.edge === 'right' || cut.edge === 'top';
    const at = (isAcross ? piece.x : piece.y) + (isFarEdge ? size - cut.fence : cut.fence);
    lines.push(
      isAcross
        ? { number: cut.number, x1: at, y1: piece.y, x2: at, y2: piece.y + piece.width }
        : { number: cut.number, x1: piece.x, y1: at, x2: piece.x + piece.length, y2: at },
    );
    for (const [name, box] of yieldsOf(cut, piece, size, kerf)) pieces.set(name, box);
  }
  return lines;
}

function yieldsOf(cut: Cut, piece: Box, size: number, kerf: number): [string, Box][] {
  const slice = (start: number, length: number): Box =>
    cut.direction === 'crosscut'
      ? { ...piece, x: piece.x + start, length }
      : { ...piece, y: piece.y + start, width: length };
  const [near, rest] = cut.yields;
  const nearEdges: (keyof Trim)[] = ['left', 'bottom'];
  if (cut.edge) return [[near, slice(nearEdges.includes(cut.edge) ? cut.fence : 0, size - cut.fence)]];
  const found: [string, Box][] = [[near, slice(0, cut.fence)]];
  if (rest !== null) found.push([rest, slice(cut.fence + kerf, size - cut.fence - kerf)]);
  return found;
}

/**
 * One piece of stock as an SVG drawing: parts with their mark in a circle and their sizes along their edges, grain arrows, cuts
 * numbered in the order of the saw, offcuts hatched with their sizes. Colours come from the page (`--ink`, `--pencil`,
 * `--rule`, `--sheet`, `--tape`), so it follows light and dark; all text is escaped.
 */
export function drawLayout(laid: LaidPiece, drawing: LayoutDrawing): string {
  const width = laid.width || (drawing.barWidth ?? laid.length / 20);
  const scale = LONG_SIDE / Math.max(laid.length, width);
  const boxOf = (box: Box): Box => {
    const across = laid.width ? box.width : width;
    return {
      x: MARGIN + box.x * scale,
      // Layouts count y from the bottom, drawings from the top.
      y: MARGIN + (width - box.y - across) * scale,
      length: box.length * scale,
      width: across * scale,
    };
  };
  const print = (length: number) => escapeText(drawing.formatLength(length));
  const total = { x: laid.length * scale + 2 * MARGIN, y: width * scale + 2 * MARGIN };
  const hatch = `${drawing.id}-hatch`;
  const out: string[] = [];

  function rectangle(box: Box, attributes: string): void {
    out.push(
      `<rect x="${round(box.x)}" y="${round(box.y)}" width="${round(box.length)}" height="${round(box.width)}" ${attributes}/>`,
    );
  }
  function text(x: number, y: number, size: number, content: string, attributes = ''): void {
    out.push(`<text x="${round(x)}" y="${round(y)}" font-size="${size}" ${attributes}>${content}</text>`);
  }
  const widthOfText = (content: string, size: number) => content.length * size * FIGURE;

  /**
   * Sizes along the lower and the left edge, where there is room for them beside a mark of the given radius in the middle; in a
   * narrow strip the length stands to the left of the mark.
   */
  function sizes(box: Box, length: number, across: number, radius: number, fill: string): void {
    const lengthWidth = widthOfText(drawing.formatLength(length), SMALL_TEXT);
    const middle = box.x + box.length / 2;
    if (box.width / 2 > radius + SMALL_TEXT + 4 && box.length > lengthWidth + 8) {
      text(middle, box.y + box.width - 4, SMALL_TEXT, print(length), `text-anchor="middle" fill="${fill}"`);
    } else if (box.width > SMALL_TEXT + 2 && box.length / 2 > radius + lengthWidth + 2 * SMALL_TEXT) {
      const y = box.y + box.width / 2 + SMALL_TEXT * 0.35;
      text(middle - radius - 8, y, SMALL_TEXT, print(length), `text-anchor="end" fill="${fill}"`);
    }
    const acrossWidth = widthOfText(drawing.formatLength(across), SMALL_TEXT);
    if (laid.width && box.width > acrossWidth + 8 && box.length / 2 > radius + SMALL_TEXT + 4) {
      const x = box.x + SMALL_TEXT;
      const y = box.y + box.width / 2;
      const turn = `transform="rotate(-90 ${round(x)} ${round(y)})"`;
      text(x, y, SMALL_TEXT, print(across), `text-anchor="middle" fill="${fill}" ${turn}`);
    }
  }

  function part(placed: Placement): void {
    const box = boxOf(placed);
    rectangle(box, 'fill="var(--sheet, none)" stroke="var(--ink, currentColor)" stroke-width="1.4"');
    const x = box.x + box.length / 2;
    const y = box.y + box.width / 2;
    const radius = Math.min(MARK_RADIUS, box.length / 2.4, box.width / 2.4);
    sizes(box, placed.length, placed.width, radius, 'var(--ink, currentColor)');
    if (radius >= SMALLEST_MARK) {
      const size = Math.min(TEXT, (2 * radius) / Math.max(1.3, placed.part.length * FIGURE + 0.5));
      out.push(
        `<circle cx="${round(x)}" cy="${round(y)}" r="${round(radius)}" fill="none" stroke="var(--ink, currentColor)" stroke-width="1.2"/>`,
      );
      text(
        x,
        y + size * 0.35,
        round(size),
        escapeText(placed.part),
        'text-anchor="middle" font-weight="600" fill="var(--ink, currentColor)"',
      );
    }
    if (drawing.hasGrain && laid.width && box.length > 120 && box.width > 40) {
      const from = box.x + box.length / 2 + radius + 10;
      const to = Math.min(from + 46, box.x + box.length - 8);
      const barb = `M${round(from + 6)} ${round(y - 4)}L${round(from)} ${round(y)}L${round(from + 6)} ${round(y + 4)}`;
      const tip = `M${round(to - 6)} ${round(y - 4)}L${round(to)} ${round(y)}L${round(to - 6)} ${round(y + 4)}`;
      out.push(
        `<path class="grain" d="M${round(from)} ${round(y)}H${round(to)}${barb}${tip}" fill="none" stroke="var(--pencil, currentColor)" stroke-width="1"/>`,
      );
    }
  }

  out.push(
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${round(total.x)} ${round(total.y)}" role="img" aria-labelledby="${drawing.id}-title" class="stock-layout" font-family="'B612 Mono', monospace">`,
    `<title id="${drawing.id}-title">${escapeText(drawing.title)}</title>`,
    `<defs><pattern id="${hatch}" width="9" height="9" patternUnits="userSpaceOnUse" patternTransform="rotate(45)"><path d="M0 0V9" stroke="var(--pencil, currentColor)" stroke-width="1"/></pattern></defs>`,
  );
  rectangle(
    boxOf({ x: 0, y: 0, length: laid.length, width: laid.width }),
    'fill="var(--rule, none)" fill-opacity="0.35" stroke="var(--ink, currentColor)" stroke-width="2"',
  );
  for (const offcut of laid.offcuts) {
    const box = boxOf(offcut);
    rectangle(
      box,
      `class="offcut" fill="url(#${hatch})" fill-opacity="0.5" stroke="var(--pencil, currentColor)" stroke-width="0.8" stroke-dasharray="6 4"`,
    );
    sizes(box, offcut.length, offcut.width, 0, 'var(--pencil, currentColor)');
  }
  for (const placed of laid.placements) part(placed);

  // Each cut's number stands on its line, in the tape's colour so that it is not taken for a size.
  for (const line of traceCutLines(laid, width, drawing.kerf)) {
    const isAcross = line.x1 === line.x2;
    const x =
      MARGIN +
      ((isAcross ? line.x1 : line.x1 + (line.x2 - line.x1) * 0.04) + (isAcross ? drawing.kerf / 2 : 0)) *
        scale;
    const y =
      MARGIN +
      (width - (isAcross ? line.y2 - (line.y2 - line.y1) * 0.04 : line.y1 + drawing.kerf / 2)) * scale;
    const label = String(line.number);
    const half = widthOfText(label, SMALL_TEXT) / 2 + 3;
    out.push(`<g class="cut">`);
    rectangle(
      { x: x - half, y: y - 8, length: 2 * half, width: 16 },
      'rx="2" fill="var(--tape, none)" stroke="var(--ink, currentColor)" stroke-width="0.8"',
    );
    text(x, y + 4, SMALL_TEXT, label, 'text-anchor="middle" fill="#1C2326"');
    out.push('</g>');
  }
  const overall = laid.width ? `${print(laid.length)} × ${print(laid.width)}` : print(laid.length);
  text(MARGIN, MARGIN - 12, TEXT, overall, 'fill="var(--pencil, currentColor)"');
  out.push('</svg>');
  return out.join('');
}
