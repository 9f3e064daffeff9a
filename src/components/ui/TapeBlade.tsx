import { NM_PER_MM, type UnitSystem } from '#lib/units/length.ts';
import { listGraduations, type TapeLimits } from './tape-scale.ts';

/** Pixels to a millimetre: wide enough to tell two lines apart at arm's length, and the same on every screen. */
export const PX_PER_MM = 4;

/** Half the widest blade that is drawn; a wider place is not filled. */
const HALF_WIDTH_PX = 620;
const TOP = 12;
const BOTTOM = 60;

interface TapeBladeProps extends TapeLimits {
  /** What stands under the index line, in nanometres. */
  valueNm: number;
  units: UnitSystem;
  /** Unique on the page: names the hatch. */
  id: string;
}

/** The drawn blade, sliding under a fixed index in its middle. Drawing only; `Tape` gives it its meaning. */
export function TapeBlade({ valueNm, units, minNm, maxNm, excluded, id }: TapeBladeProps) {
  const toX = (nm: number) => Math.round(((nm - valueNm) / NM_PER_MM) * PX_PER_MM * 100) / 100;
  const clampX = (nm: number) => Math.min(HALF_WIDTH_PX, Math.max(-HALF_WIDTH_PX, toX(nm)));
  const reachNm = (HALF_WIDTH_PX / PX_PER_MM) * NM_PER_MM;
  const left = clampX(minNm);
  const right = clampX(maxNm);
  const lines = listGraduations(
    Math.max(minNm, valueNm - reachNm),
    Math.min(maxNm, valueNm + reachNm),
    units,
  );
  const depth = BOTTOM - TOP;
  // Lines come from the upper edge, as on a blade read from the hook; the whole ones cross the figure's row.
  const path = lines
    .map(({ nm, reach }) => `M${String(toX(nm))} ${String(TOP)}v${String(reach === 1 ? depth : reach * 28)}`)
    .join('');

  return (
    <svg className="tape__blade" width="100%" height="72" aria-hidden="true" focusable="false">
      <defs>
        <pattern id={id} width="7" height="7" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <rect width="7" height="7" className="tape__hatch-ground" />
          <rect width="3" height="7" className="tape__hatch-line" />
        </pattern>
      </defs>
      <svg x="50%" overflow="visible">
        <rect className="tape__steel" x={left} y={TOP} width={Math.max(0, right - left)} height={depth} />
        <path className="tape__lines" d={path} />
        {excluded.map((stretch) => (
          <rect
            key={stretch.fromNm}
            x={clampX(stretch.fromNm)}
            y={TOP}
            width={Math.max(0, clampX(stretch.toNm) - clampX(stretch.fromNm))}
            height={depth}
            fill={`url(#${id})`}
          />
        ))}
        {lines
          .filter(({ figure }) => figure !== '')
          .map(({ nm, figure }) => (
            <text key={nm} className="tape__figure" x={toX(nm) + 4} y={BOTTOM - 6}>
              {figure}
            </text>
          ))}
        <path
          className="tape__edge"
          d={`M${String(left)} ${String(TOP)}H${String(right)}M${String(left)} ${String(BOTTOM)}H${String(right)}`}
        />
        {toX(minNm) >= -HALF_WIDTH_PX ? <Hook x={toX(minNm)} direction={1} /> : null}
        {toX(maxNm) <= HALF_WIDTH_PX ? <Hook x={toX(maxNm)} direction={-1} /> : null}
        <path className="tape__index" d={`M0 ${String(TOP)}V${String(BOTTOM)}`} />
        <path className="tape__pointer" d={`M-7 1H7L0 ${String(TOP)}z`} />
      </svg>
    </svg>
  );
}

/** The hook at an end of the blade: a lip outside the limit, and its plate riveted on the blade. */
function Hook({ x, direction }: { x: number; direction: 1 | -1 }) {
  const plate = `M${String(x)} ${String(TOP - 3)}h${String(-5 * direction)}V${String(BOTTOM + 11)}h${String(5 * direction)}z`;
  return (
    <g>
      <path className="tape__hook" d={plate} />
      <path
        className="tape__plate"
        d={`M${String(x)} ${String(TOP + 21)}h${String(13 * direction)}v9h${String(-13 * direction)}z`}
      />
      <circle className="tape__rivet" cx={x + 4.5 * direction} cy={TOP + 25.5} r="1.6" />
      <circle className="tape__rivet" cx={x + 9.5 * direction} cy={TOP + 25.5} r="1.6" />
    </g>
  );
}
