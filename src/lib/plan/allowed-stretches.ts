import { roundNm } from '#lib/units/length.ts';

import { runSteps } from './evaluate.ts';
import { plainText, resolveProse } from './resolve-prose.ts';
import type { CompiledPlan, Fit, SizeDeclaration } from './types.ts';
import { findBrokenRequirement, workOut } from './work-out.ts';

/** A stretch of a size's range, both ends in it, that a requirement excludes while all other sizes stay as they are. */
export interface Stretch {
  /** Nanometres, degrees or numbers, as the size is. */
  from: number;
  to: number;
  /** The requirement's sentence, in the reader's units. */
  reason: string;
}

/** The most values that one look over a range tries. */
const MAX_SAMPLES = 400;

interface Verdict {
  /** Index of the requirement's declaration, or −1 when all hold. */
  broken: number;
}

/**
 * Which stretches of one size's range break which requirement, all other values as in `fit`: for the tape, which hatches them.
 * The range is stepped through at the size's step (coarser where that would be more than 400 values), and the ends of a
 * stretch are then closed in on to the nanometre; a gap narrower than the step may be missed. An unknown name gives an empty
 * list. Where several requirements break, the first of the file is told.
 */
export function allowedStretches(plan: CompiledPlan, fit: Fit, sizeName: string): Stretch[] {
  const size = plan.declarations.find(
    (declaration): declaration is SizeDeclaration =>
      declaration.type === 'size' && declaration.name === sizeName,
  );
  if (!size || !plan.declarations.some((declaration) => declaration.type === 'require')) return [];

  // One slot is moved and the rest worked out behind it, hundreds of times: what is the same for all is done once.
  const resolving = workOut(plan, fit);
  const { program, slots, thicknesses } = resolving;
  const slot = program.slotOf.get(size.name) ?? 0;
  const moveTo = (value: number): void => {
    slots[slot] = value;
    runSteps(program, slots, thicknesses);
  };
  const at = (value: number): Verdict => {
    moveTo(value);
    const broken = findBrokenRequirement(resolving);
    return { broken: broken ? plan.declarations.indexOf(broken) : -1 };
  };
  const reasonAt = (index: number, value: number): string => {
    const declaration = plan.declarations[index];
    if (declaration?.type !== 'require') return '';
    moveTo(value);
    return plainText(resolveProse(declaration.message, resolving, new Map()));
  };
  const samples = sampleRange(size);
  const verdicts = samples.map(at);

  const stretches: Stretch[] = [];
  for (let i = 0; i < samples.length;) {
    const broken = verdicts[i]?.broken ?? -1;
    let j = i;
    while (verdicts[j + 1]?.broken === broken) j += 1;
    if (broken >= 0) {
      const from =
        i === 0
          ? size.min
          : closeIn(size, samples[i] ?? 0, samples[i - 1] ?? 0, (value) => at(value).broken === broken);
      const to =
        j === samples.length - 1
          ? size.max
          : closeIn(size, samples[j] ?? 0, samples[j + 1] ?? 0, (value) => at(value).broken === broken);
      stretches.push({ from, to, reason: reasonAt(broken, from) });
    }
    i = j + 1;
  }
  return stretches;
}

/** Values from the least to the greatest, on the step where that is not too many; both ends always. */
function sampleRange({ min, max, step }: SizeDeclaration): number[] {
  const steps = Math.floor((max - min) / step + 1e-9);
  const stride = Math.max(1, Math.ceil((steps + 2) / MAX_SAMPLES));
  const samples: number[] = [];
  for (let i = 0; i <= steps; i += stride) samples.push(min + i * step);
  if ((samples.at(-1) ?? min) < max) samples.push(max);
  return samples;
}

/** Halves the gap between a value inside a stretch and one outside it until they are neighbours; gives the last inside. */
function closeIn(
  size: SizeDeclaration,
  inside: number,
  outside: number,
  isInside: (value: number) => boolean,
): number {
  if (size.kind === 'number') return inside;
  const finest = size.kind === 'length' ? 1 : size.step / 1024;
  let [near, far] = [inside, outside];
  for (let turn = 0; turn < 60 && Math.abs(far - near) > finest; turn += 1) {
    const middle = size.kind === 'length' ? roundNm((near + far) / 2) : (near + far) / 2;
    if (middle === near || middle === far) break;
    if (isInside(middle)) near = middle;
    else far = middle;
  }
  return near;
}
