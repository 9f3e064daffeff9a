/** Characters by which a spreadsheet takes a text for a formula. */
const FORMULA_START = /^[=+\-@\t\r]/;
const PLAIN_NUMBER = /^-?\d+(\.\d+)?$/;

/** One field by RFC 4180, made safe: a text that a spreadsheet would run gets an apostrophe in front. Numbers stay numbers. */
export function csvField(value: string | number): string {
  const text = String(value);
  const safe = FORMULA_START.test(text) && !PLAIN_NUMBER.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** Rows as CSV with CRLF line ends, the last one too. */
export function writeCsv(rows: readonly (readonly (string | number)[])[]): string {
  return rows.map((row) => `${row.map(csvField).join(',')}\r\n`).join('');
}
