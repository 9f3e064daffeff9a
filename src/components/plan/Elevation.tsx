import type { UnitSystem } from '#lib/plan/types.ts';
import { formatLength } from '#lib/units/format-length.ts';
import { lengthFormat } from '#lib/plan/length-format.ts';

interface ElevationProps {
  /** Overall size in nanometres. */
  overall: { width: number; depth: number; height: number };
  units: UnitSystem;
}

const BOX = 320;
const MARGIN = 56;

/** A dimension line with slashed ends; the figure stands above it, turned to be read from the right where it runs upwards. */
function DimensionLine({
  x1,
  y1,
  x2,
  y2,
  text,
}: {
  x1: number;
  y1: number;
  x2: number;
  y2: number;
  text: string;
}) {
  const isUpright = x1 === x2;
  const slash = (x: number, y: number) => <path d={`M${x - 5} ${y + 5}L${x + 5} ${y - 5}`} strokeWidth="2" />;
  const middle = { x: (x1 + x2) / 2, y: (y1 + y2) / 2 };
  return (
    <g stroke="currentColor" strokeWidth="1" fill="none">
      <path d={`M${x1} ${y1}L${x2} ${y2}`} />
      {slash(x1, y1)}
      {slash(x2, y2)}
      <text
        x={middle.x}
        y={middle.y - 7}
        transform={isUpright ? `rotate(-90 ${middle.x} ${middle.y})` : undefined}
        textAnchor="middle"
        stroke="none"
        fill="currentColor"
        fontSize="14"
        fontFamily="var(--font-figure)"
      >
        {text}
      </text>
    </g>
  );
}

/**
 * The fitted elevation: the outline of the piece from the front with its overall width and height, and its depth in words. It shows nothing
 * of the parts, so it may stand on a public page.
 */
export function Elevation({ overall, units }: ElevationProps) {
  const { width, height, depth } = overall;
  const scale = BOX / Math.max(width, height, 1);
  const w = Math.max(24, Math.round(width * scale));
  const h = Math.max(24, Math.round(height * scale));
  const write = (nm: number) => formatLength(nm, lengthFormat(units)).text;
  const label = `Front elevation: ${write(width)} wide, ${write(height)} high, ${write(depth)} deep.`;
  return (
    <figure className="elevation">
      <svg viewBox={`0 0 ${w + 2 * MARGIN} ${h + MARGIN + 40}`} role="img" aria-label={label}>
        <g transform={`translate(${MARGIN + 8} 8)`}>
          <rect width={w} height={h} fill="var(--wash)" stroke="currentColor" strokeWidth="2" />
          <path d={`M${-24} ${h}H${w + 24}`} stroke="currentColor" strokeWidth="1" />
          <DimensionLine x1={0} y1={h + 34} x2={w} y2={h + 34} text={write(width)} />
          <DimensionLine x1={-28} y1={h} x2={-28} y2={0} text={write(height)} />
        </g>
      </svg>
      <figcaption className="small secondary">
        Front elevation, overall sizes. Depth <span className="figure">{write(depth)}</span>.
      </figcaption>
    </figure>
  );
}
