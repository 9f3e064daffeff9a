import type { PointerEvent } from 'react';
import type { TapeLimits } from './tape-scale.ts';

interface TapeRangeProps extends TapeLimits {
  valueNm: number;
  /** Called with any length between the limits, in nanometres, while the pointer is down. */
  onPoint: (nm: number) => void;
}

/**
 * The whole range as a dimension line under the blade, for the coarse move: press or drag anywhere. For the pointer
 * only; keys and screen readers have the slider and the field.
 */
export function TapeRange({ valueNm, minNm, maxNm, excluded, onPoint }: TapeRangeProps) {
  const span = Math.max(1, maxNm - minNm);
  const share = (nm: number) => Math.min(1, Math.max(0, (nm - minNm) / span));
  const percent = (part: number) => `${String(Math.round(part * 10_000) / 100)}%`;

  function point(event: PointerEvent<SVGSVGElement>) {
    const box = event.currentTarget.getBoundingClientRect();
    if (box.width > 0)
      onPoint(minNm + Math.min(1, Math.max(0, (event.clientX - box.left) / box.width)) * span);
  }

  return (
    <svg
      className="tape__range"
      width="100%"
      height="44"
      aria-hidden="true"
      focusable="false"
      onPointerDown={(event) => {
        event.currentTarget.setPointerCapture(event.pointerId);
        point(event);
      }}
      onPointerMove={(event) => {
        if (event.buttons === 1) point(event);
      }}
    >
      <line className="tape__range-line" x1="0" x2="100%" y1="16" y2="16" />
      {excluded.map((stretch) => (
        <rect
          key={stretch.fromNm}
          className="tape__range-gap"
          x={percent(share(stretch.fromNm))}
          width={percent(share(stretch.toNm) - share(stretch.fromNm))}
          y="12"
          height="8"
        />
      ))}
      <path className="tape__range-tick" d="M-4.5 20.5 4.5 11.5" />
      <svg x="100%" overflow="visible">
        <path className="tape__range-tick" d="M-4.5 20.5 4.5 11.5" />
      </svg>
      <svg x={percent(share(valueNm))} overflow="visible">
        <path className="tape__range-thumb" d="M-8 4.5H8V20L0 29 -8 20z" />
      </svg>
    </svg>
  );
}
