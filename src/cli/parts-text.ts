import type { ResolvedPlan } from '#lib/plan/types.ts';
import { formatAlike, formatExactLength, REMAINDER_LEGEND } from '#lib/units/format-length.ts';

const HEADS = ['mark', 'name', 'material', 'qty', 'length', 'width', 'thickness'];

/** A cell that no spreadsheet takes for a formula, quoted where it must be. */
function csvCell(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\n\r]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** The parts table as CSV (RFC 4180), lengths exact in the reader's units, the unit in the heading. */
export function partsCsv(resolved: ResolvedPlan): string {
  const { units } = resolved;
  const bare = (nm: number): string =>
    units === 'mm'
      ? formatExactLength(nm, 'mm').replace(' mm', '')
      : String(Math.round((nm / 25_400_000) * 1e9) / 1e9);
  const heads = HEADS.map((head) =>
    ['length', 'width', 'thickness'].includes(head) ? `${head} (${units})` : head,
  );
  const rows = resolved.parts.map((part) => [
    csvCell(part.mark),
    csvCell(part.name),
    csvCell(part.material),
    String(part.qty),
    bare(part.length),
    bare(part.width),
    bare(part.thickness),
  ]);
  return [heads, ...rows].map((row) => row.join(',')).join('\r\n') + '\r\n';
}

/** The parts table for people. Lengths that must match are printed alike, and marked where the reading is not exact. */
export function partsTable(resolved: ResolvedPlan): string {
  const { parts, units } = resolved;
  const all = formatAlike(
    parts.flatMap((part) => [part.length, part.width, part.thickness]),
    { units },
  );
  const rows = parts.map((part, index) => [
    part.mark,
    part.name,
    part.material,
    String(part.qty),
    ...all.slice(index * 3, index * 3 + 3).map((length) => length.text),
  ]);
  const widths = HEADS.map((head, column) =>
    Math.max(head.length, ...rows.map((row) => row[column]?.length ?? 0)),
  );
  const lines = [HEADS, ...rows].map((row) =>
    row
      .map((cell, column) =>
        column < 3 ? cell.padEnd(widths[column] ?? 0) : cell.padStart(widths[column] ?? 0),
      )
      .join('  ')
      .trimEnd(),
  );
  if (all.some((length) => length.marked)) lines.push('', REMAINDER_LEGEND);
  return `${lines.join('\n')}\n`;
}
