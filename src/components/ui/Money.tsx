import { Fragment } from 'react';
import { formatMoney } from '#lib/money/format-money.ts';
import { splitAtPoints } from './split-at-points.ts';

interface MoneyProps {
  /** Whole minor units. */
  minor: number;
  /** Code of ISO 4217. */
  currency: string;
}

/** An amount of money. Twin of sheet/Money.astro. */
export function Money({ minor, currency }: MoneyProps) {
  const pieces = splitAtPoints(formatMoney(minor, currency));
  return (
    <data className="money" value={`${String(minor)} ${currency}`}>
      {pieces.map((piece, index) => (
        <Fragment key={index}>{index % 2 === 0 ? piece : <span className="point">{piece}</span>}</Fragment>
      ))}
    </data>
  );
}
