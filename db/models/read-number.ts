import type { Model } from 'sequelize';

/**
 * A getter for a `bigint` or `numeric` column, which the driver hands over as text so that no digit is lost.
 * Gives a number; raw rows (`raw: true` and plain SQL) still hold the text.
 * @throws RangeError where the value is beyond what a number holds exactly.
 */
export function readNumber(attribute: string): (this: Model) => number | null {
  return function (this: Model) {
    const stored: unknown = this.getDataValue(attribute);
    if (stored === null || stored === undefined) return null;
    const number = Number(stored);
    if (!Number.isFinite(number) || Math.abs(number) > Number.MAX_SAFE_INTEGER)
      throw new RangeError(`${attribute} is beyond a safe number: ${String(stored)}`);
    return number;
  };
}
