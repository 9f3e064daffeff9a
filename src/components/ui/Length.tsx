import type { FormattedLength } from '#lib/units/format-length.ts';
import { drawLength } from './drawn-length.ts';

interface LengthProps {
  /** What `formatLength` gave. */
  length: FormattedLength;
  /** True where the head of the column already names the unit. */
  isBare?: boolean;
}

/** A length with a real fraction; its plain text is what is copied and read out. Twin of sheet/Length.astro. */
export function Length({ length, isBare = false }: LengthProps) {
  const drawn = drawLength(length);
  return (
    <span className="length">
      <span className="unseen">{drawn.plain}</span>
      <span className="length__drawn" aria-hidden="true">
        {drawn.lead}
        {drawn.fraction ? (
          <span className="length__fraction">
            <span
              className="length__stack"
              data-over={drawn.fraction.over}
              data-under={drawn.fraction.under}
            />
          </span>
        ) : (
          <span className={length.units === 'mm' ? 'length__decimals' : 'length__no-fraction'}>
            {drawn.decimals === '' ? null : <span className="point">.</span>}
            {drawn.decimals}
          </span>
        )}
        <span className="length__mark">{drawn.mark}</span>
        {isBare || drawn.unit === '' ? null : (
          <span className={`length__unit length__unit--${length.units}`}>{drawn.unit}</span>
        )}
      </span>
    </span>
  );
}
