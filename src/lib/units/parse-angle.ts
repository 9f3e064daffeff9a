/** What reading a written angle gives: degrees, or a sentence and its cure. */
export type ParsedAngle = { ok: true; degrees: number } | { ok: false; message: string; hint: string };

/**
 * Reads an angle in degrees: `45`, `22.5°`, `22.5 deg`, `-3 degrees`. Refuses commas, other units, more than 40 characters
 * and anything beyond ±360°.
 */
export function parseAngle(text: string): ParsedAngle {
  const hint = 'Write it as 22.5°.';
  if (text.length > 40) return { ok: false, message: 'That is too long to be an angle.', hint };
  if (text.includes(',')) {
    return {
      ok: false,
      message: 'A comma is not read.',
      hint: `Write a decimal point: ${text.trim().replace(',', '.')}.`,
    };
  }
  const match = /^([-−]?)(\d{1,12}(?:\.\d{1,12})?|\.\d{1,12})\s?(?:°|deg|degrees?)?$/.exec(text.trim());
  if (!match) return { ok: false, message: 'The angle cannot be read.', hint };
  const degrees = Number(match[2]) * (match[1] ? -1 : 1);
  if (Math.abs(degrees) > 360) return { ok: false, message: 'That is more than a full turn.', hint };
  return { ok: true, degrees: degrees === 0 ? 0 : degrees };
}
