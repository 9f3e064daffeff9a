import { NM_PER_64TH, NM_PER_INCH, NM_PER_MM, type UnitSystem } from '#lib/units/length.ts';

/** A stretch between the limits at which the plan cannot be built; both ends are refused too. */
export interface ExcludedStretch {
  fromNm: number;
  toNm: number;
  /** Why, as a sentence: "No slide is made between 450 and 500 mm." */
  reason: string;
}

/** What a tape may be set to. All lengths in nanometres. */
export interface TapeLimits {
  minNm: number;
  maxNm: number;
  excluded: readonly ExcludedStretch[];
}

/** Where a move ends, and the stretch that it had to leap over, if any. */
export interface TapeMove {
  nm: number;
  leapt: ExcludedStretch | null;
}

/** A line on the blade: how far it reaches in (1 = the longest), and the figure beside it. */
export interface Graduation {
  nm: number;
  reach: number;
  figure: string;
}

/** The finest division of the blade: a sixteenth of an inch, or a millimetre. */
export function tapeGraduationNm(units: UnitSystem): number {
  return units === 'in' ? NM_PER_INCH / 16 : NM_PER_MM;
}

/** The finest reading that is written beside the tape: a sixty-fourth of an inch, or a tenth of a millimetre. */
function readingNm(units: UnitSystem): number {
  return units === 'in' ? NM_PER_64TH : NM_PER_MM / 10;
}

/**
 * The limits as this reader can write them: the least rounded up and the most rounded down to the finest reading, so
 * that every limit the tape names is one it takes. 1200 mm become 47 15/64 in, and not 47 1/4, which is too much.
 * Where nothing would be left between them the limits stay as they are.
 */
export function readableLimits(limits: TapeLimits, units: UnitSystem): TapeLimits {
  const reading = readingNm(units);
  const minNm = Math.ceil(limits.minNm / reading) * reading;
  const maxNm = Math.floor(limits.maxNm / reading) * reading;
  return minNm > maxNm ? limits : { ...limits, minNm, maxNm };
}

/** The ends of an excluded stretch as this reader can write them, drawn in so that both are truly refused. */
export function readableStretch(stretch: ExcludedStretch, units: UnitSystem): ExcludedStretch {
  const { minNm, maxNm } = readableLimits(
    { minNm: stretch.fromNm, maxNm: stretch.toNm, excluded: [] },
    units,
  );
  return { ...stretch, fromNm: minNm, toNm: maxNm };
}

/** The stretch that a length lies in, or null. */
export function findStretch(nm: number, { excluded }: TapeLimits): ExcludedStretch | null {
  return excluded.find(({ fromNm, toNm }) => nm >= fromNm && nm <= toNm) ?? null;
}

/** The excluded stretch nearest to a length, or null where there is none at all. */
export function findNearestStretch(nm: number, { excluded }: TapeLimits): ExcludedStretch | null {
  const distance = ({ fromNm, toNm }: ExcludedStretch) => Math.max(fromNm - nm, nm - toNm, 0);
  return excluded.reduce<ExcludedStretch | null>(
    (nearest, stretch) => (nearest === null || distance(stretch) < distance(nearest) ? stretch : nearest),
    null,
  );
}

function clamp(nm: number, { minNm, maxNm }: TapeLimits): number {
  return Math.min(maxNm, Math.max(minNm, nm));
}

/** The first length beyond a stretch in a direction that stands on a graduation, or null where the limit comes first. */
function leap(from: number, direction: 1 | -1, limits: TapeLimits, units: UnitSystem): number | null {
  const graduation = tapeGraduationNm(units);
  let nm = from;
  // Stretches may touch, so leaping one may land in the next.
  for (let stretch = findStretch(nm, limits); stretch; stretch = findStretch(nm, limits)) {
    nm =
      direction > 0
        ? (Math.floor(stretch.toNm / graduation) + 1) * graduation
        : (Math.ceil(stretch.fromNm / graduation) - 1) * graduation;
    if (nm > limits.maxNm || nm < limits.minNm) return null;
  }
  return nm;
}

/**
 * Moves along the blade by whole graduations, from wherever the value stands to the graduations beside it. Stops at the
 * limits (which need not stand on a graduation) and leaps over excluded stretches; where no way leads over, it stays.
 */
export function moveAlong(nm: number, count: number, limits: TapeLimits, units: UnitSystem): TapeMove {
  const graduation = tapeGraduationNm(units);
  const direction = count < 0 ? -1 : 1;
  const start = direction > 0 ? Math.floor(nm / graduation) : Math.ceil(nm / graduation);
  const target = clamp((start + count) * graduation, limits);
  const leapt = findStretch(target, limits);
  if (leapt === null) return { nm: target, leapt };
  return { nm: leap(target, direction, limits, units) ?? nm, leapt };
}

/**
 * The nearest length that the tape may be set to and that stands on a graduation (or is a limit): where a finger lets
 * go. From an excluded stretch it goes to the nearer end that leads out, and where none does the tape stays as it is.
 */
export function settleOn(nm: number, wantedNm: number, limits: TapeLimits, units: UnitSystem): TapeMove {
  const graduation = tapeGraduationNm(units);
  const target = clamp(Math.round(clamp(wantedNm, limits) / graduation) * graduation, limits);
  const leapt = findStretch(target, limits);
  if (leapt === null) return { nm: target, leapt };
  const below = leap(target, -1, limits, units);
  const above = leap(target, 1, limits, units);
  const ways = [below, above].filter((way) => way !== null);
  ways.sort((a, b) => Math.abs(a - wantedNm) - Math.abs(b - wantedNm));
  return { nm: ways[0] ?? nm, leapt };
}

/** How deep each line of an inch reaches in, by sixteenths: whole, half, quarter, eighth, sixteenth. */
function inchReach(sixteenths: number): number {
  if (sixteenths % 16 === 0) return 1;
  if (sixteenths % 8 === 0) return 0.7;
  if (sixteenths % 4 === 0) return 0.52;
  return sixteenths % 2 === 0 ? 0.38 : 0.24;
}

function millimetreReach(millimetres: number): number {
  if (millimetres % 10 === 0) return 1;
  return millimetres % 5 === 0 ? 0.52 : 0.28;
}

/** The lines of the blade from one length to another, both included: figures at whole inches, or at whole centimetres. */
export function listGraduations(fromNm: number, toNm: number, units: UnitSystem): Graduation[] {
  const graduation = tapeGraduationNm(units);
  const lines: Graduation[] = [];
  for (let count = Math.ceil(fromNm / graduation); count * graduation <= toNm; count += 1) {
    const reach = units === 'in' ? inchReach(count) : millimetreReach(count);
    const figure = reach < 1 ? '' : String(count / (units === 'in' ? 16 : 10));
    lines.push({ nm: count * graduation, reach, figure });
  }
  return lines;
}
