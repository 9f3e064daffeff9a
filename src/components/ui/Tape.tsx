import { useId, useRef, useState, useSyncExternalStore, type KeyboardEvent, type PointerEvent } from 'react';
import { formatExactLength, formatLength } from '#lib/units/format-length.ts';
import { NM_PER_INCH, NM_PER_MM, type UnitSystem } from '#lib/units/length.ts';
import { parseLength } from '#lib/units/parse-length.ts';
import {
  findNearestStretch,
  findStretch,
  moveAlong,
  readableLimits,
  readableStretch,
  settleOn,
  type ExcludedStretch,
  type TapeMove,
} from './tape-scale.ts';
import { PX_PER_MM, TapeBlade } from './TapeBlade.tsx';
import { TapeRange } from './TapeRange.tsx';

interface TapeProps {
  /** What is measured: "Width of the alcove". Names the slider and the field. */
  label: string;
  /** Name in a plain form. What is sent is a written length that `parseLength` reads back exactly. */
  name?: string;
  /** Nanometres, like every length here. It may stand off the graduations, as after a switch of units. */
  valueNm: number;
  minNm: number;
  maxNm: number;
  /** The reader's units: they decide the graduations, and what a bare typed number means. */
  units: UnitSystem;
  /** Stretches between the limits that cannot be built, in any order. */
  excluded?: readonly ExcludedStretch[];
  hint?: string;
  /** What the plan says against this value; shown where the tape's own refusals are. */
  error?: string | undefined;
  /** Called with every new value that the tape allows, also while it is dragged. */
  onChange: (nm: number) => void;
}

/**
 * A length as the field shows it: in sixty-fourths where it is a whole number of them, else to the graduations of the
 * blade, so that a plan's 600 mm reads 23 5/8 in and what was typed in sixty-fourths stays as it was typed.
 */
function write(nm: number, units: UnitSystem): string {
  const fine = formatLength(nm, { units, denominator: 64 });
  return fine.remainderNm === 0 || units === 'mm'
    ? fine.text
    : formatLength(nm, { units, denominator: 16 }).text;
}

const noExclusions: readonly ExcludedStretch[] = [];
const neverChanges = () => () => undefined;

/** A press that moves less than this is a tap: it calls the graduation under the finger to the index. */
const TAP_PX = 4;

/**
 * A length set on a piece of measuring tape: drag or tap the blade, press the range beneath, type, or use the keys
 * (arrows one graduation, with Shift or as Page Up and Page Down ten, Home and End the limits).
 */
export function Tape(props: TapeProps) {
  const { label, name, valueNm, units, excluded = noExclusions, hint, error, onChange } = props;
  const id = useId();
  const limits = readableLimits({ minNm: props.minNm, maxNm: props.maxNm, excluded }, units);
  const { minNm, maxNm } = limits;

  const [typed, setTyped] = useState<string | null>(null);
  const [refusal, setRefusal] = useState<string | null>(null);
  const [leapt, setLeapt] = useState<ExcludedStretch | null>(null);
  const drag = useRef<{ x: number; nm: number; hasMoved: boolean } | null>(null);
  // Until the island lives, the field itself goes into the form, and then it must hold the exact length.
  const isLive = useSyncExternalStore(
    neverChanges,
    () => true,
    () => false,
  );

  function sayStretch(stretch: ExcludedStretch): string {
    const { fromNm, toNm, reason } = readableStretch(stretch, units);
    return `Not ${write(fromNm, units)} to ${write(toNm, units)}: ${reason}`;
  }
  const nearest = findNearestStretch(valueNm, limits);
  const trouble = refusal ?? error ?? null;

  function take({ nm, leapt: stretch }: TapeMove) {
    setTyped(null);
    setRefusal(null);
    setLeapt(stretch);
    if (nm !== valueNm) onChange(nm);
  }

  function onKeyDown(event: KeyboardEvent) {
    const stride = event.shiftKey ? 10 : 1;
    const moves: Partial<Record<string, () => TapeMove>> = {
      ArrowRight: () => moveAlong(valueNm, stride, limits, units),
      ArrowUp: () => moveAlong(valueNm, stride, limits, units),
      ArrowLeft: () => moveAlong(valueNm, -stride, limits, units),
      ArrowDown: () => moveAlong(valueNm, -stride, limits, units),
      PageUp: () => moveAlong(valueNm, 10, limits, units),
      PageDown: () => moveAlong(valueNm, -10, limits, units),
      Home: () => settleOn(valueNm, minNm, limits, units),
      End: () => settleOn(valueNm, maxNm, limits, units),
    };
    const move = moves[event.key];
    if (!move || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    take(move());
  }

  function onPointerDown(event: PointerEvent<HTMLDivElement>) {
    if (event.button !== 0) return;
    event.currentTarget.setPointerCapture(event.pointerId);
    drag.current = { x: event.clientX, nm: valueNm, hasMoved: false };
  }

  function onPointerMove(event: PointerEvent<HTMLDivElement>) {
    const start = drag.current;
    if (start === null) return;
    const dx = event.clientX - start.x;
    if (!start.hasMoved && Math.abs(dx) < TAP_PX) return;
    start.hasMoved = true;
    take(settleOn(valueNm, start.nm - (dx / PX_PER_MM) * NM_PER_MM, limits, units));
  }

  function onPointerUp(event: PointerEvent<HTMLDivElement>) {
    const start = drag.current;
    drag.current = null;
    if (start === null || start.hasMoved) return;
    const box = event.currentTarget.getBoundingClientRect();
    const fromIndex = event.clientX - (box.left + box.width / 2);
    take(settleOn(valueNm, valueNm + (fromIndex / PX_PER_MM) * NM_PER_MM, limits, units));
  }

  function takeTyped() {
    if (typed === null) return;
    const parsed = parseLength(typed, units);
    if (!parsed.ok) return refuse(`${parsed.message} ${parsed.hint}`);
    if (parsed.nm < minNm) return refuse(`The least is ${write(minNm, units)}.`);
    if (parsed.nm > maxNm) return refuse(`The most is ${write(maxNm, units)}.`);
    const stretch = findStretch(parsed.nm, limits);
    if (stretch) return refuse(sayStretch(stretch));
    take({ nm: parsed.nm, leapt: null });
  }

  function refuse(why: string) {
    setRefusal(why);
    setLeapt(null);
  }

  const perUnit = units === 'in' ? NM_PER_INCH : NM_PER_MM;
  const inUnits = (nm: number) => Math.round((nm / perUnit) * 10_000) / 10_000;
  const exact = formatExactLength(valueNm, units);

  return (
    <div className="tape">
      <div className="tape__head">
        <label className="field__label tape__label" htmlFor={`${id}-field`}>
          {label}
        </label>
        <input
          className="field__input field__input--figure tape__field"
          id={`${id}-field`}
          type="text"
          name={isLive ? undefined : name}
          value={typed ?? (isLive ? write(valueNm, units) : exact)}
          autoComplete="off"
          enterKeyHint="done"
          aria-describedby={`${id}-limits ${id}-message`}
          aria-invalid={trouble === null ? undefined : true}
          onChange={(event) => setTyped(event.target.value)}
          onBlur={takeTyped}
          onKeyDown={(event) => {
            if (event.key === 'Enter') takeTyped();
            if (event.key !== 'Escape') return;
            setTyped(null);
            setRefusal(null);
          }}
        />
        {isLive && name !== undefined ? <input type="hidden" name={name} value={exact} /> : null}
        {hint === undefined ? null : <span className="field__hint tape__hint">{hint}</span>}
      </div>
      <div
        className="tape__slider"
        role="slider"
        tabIndex={0}
        aria-label={label}
        aria-valuemin={inUnits(minNm)}
        aria-valuemax={inUnits(maxNm)}
        aria-valuenow={inUnits(valueNm)}
        aria-valuetext={write(valueNm, units)}
        aria-describedby={`${id}-limits`}
        onKeyDown={onKeyDown}
        onPointerDown={onPointerDown}
        onPointerMove={onPointerMove}
        onPointerUp={onPointerUp}
        onPointerCancel={() => {
          drag.current = null;
        }}
      >
        <TapeBlade
          id={`${id}-hatch`}
          valueNm={valueNm}
          units={units}
          minNm={minNm}
          maxNm={maxNm}
          excluded={excluded}
        />
      </div>
      <TapeRange
        valueNm={valueNm}
        minNm={minNm}
        maxNm={maxNm}
        excluded={excluded}
        onPoint={(nm) => take(settleOn(valueNm, nm, limits, units))}
      />
      <div className="tape__limits" aria-hidden="true">
        <span>{write(minNm, units)}</span>
        <span>{write(maxNm, units)}</span>
      </div>
      <span className="unseen" id={`${id}-limits`}>
        From {write(minNm, units)} to {write(maxNm, units)}.{' '}
        {excluded.map((stretch) => `${sayStretch(stretch)} `)}
      </span>
      <div className="tape__message">
        <div id={`${id}-message`} role="status">
          {trouble === null ? null : <span className="field__error">{trouble}</span>}
          {trouble === null && leapt !== null ? (
            <span className="field__hint">{sayStretch(leapt)}</span>
          ) : null}
        </div>
        {trouble === null && leapt === null && nearest !== null ? (
          // For the eye: the ear has it in the description of the slider.
          <span className="field__hint tape__nearest" aria-hidden="true">
            {sayStretch(nearest)}
          </span>
        ) : null}
      </div>
    </div>
  );
}
