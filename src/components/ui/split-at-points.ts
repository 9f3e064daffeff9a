/**
 * Splits a printed number at its points and commas, which are drawn closer than the fixed pitch of the figures: every
 * second piece is such a separator, `1,234.50` giving `1` `,` `234` `.` `50`.
 */
export function splitAtPoints(text: string): string[] {
  return text.split(/(?<=\d)([.,])(?=\d)/);
}
