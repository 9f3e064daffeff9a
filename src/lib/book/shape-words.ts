import type { ResolvedPart, ResolvedShape } from '#lib/plan/types.ts';
import { formatAngle } from '#lib/units/format-measure.ts';
import type { UnitSystem } from '#lib/units/length.ts';

import { lengthInline, type Inline } from './inline.ts';
import { words } from './flow.ts';

const num = (shape: ResolvedShape, name: string): number | undefined => {
  const value = shape.values[name];
  return typeof value === 'number' ? value : undefined;
};

function pointOf(shape: ResolvedShape, name: string): [number, number] | undefined {
  const value = shape.values[name];
  if (!Array.isArray(value)) return undefined;
  const [x, y] = value as readonly unknown[];
  return typeof x === 'number' && typeof y === 'number' ? [x, y] : undefined;
}

/** A shape of a part in words, as an instruction for the bench, e.g. "groove in the face along the bottom edge, 12 mm in …". */
export function describeShape(shape: ResolvedShape, units: UnitSystem, size: number): Inline[] {
  const say = (text: string) => words(text, { size });
  const length = (name: string): Inline[] => {
    const nm = num(shape, name);
    return nm === undefined ? [] : [lengthInline(nm, units, size)];
  };
  const face = shape.words['face'] === 'back' ? 'the back' : 'the face';
  const edge = shape.words['edge'] ?? '';
  const inset = num(shape, 'inset') ?? 0;
  const at = pointOf(shape, 'at');
  const place: Inline[] = at
    ? [
        say(', '),
        lengthInline(at[0], units, size),
        say(' along and '),
        lengthInline(at[1], units, size),
        say(' up'),
      ]
    : [];

  switch (shape.type) {
    case 'groove':
      return [
        say(`Groove in ${face} along the ${edge} edge, `),
        ...(inset > 0 ? [lengthInline(inset, units, size), say(' in from it, ')] : [say('flush with it, ')]),
        ...length('width'),
        say(' wide, '),
        ...length('depth'),
        say(' deep'),
        ...((num(shape, 'stop') ?? 0) > 0
          ? [say(', stopped '), ...length('stop'), say(' short of the far end')]
          : []),
      ];
    case 'rabbet':
      return [
        say(`Rabbet in ${face} along the ${edge} edge, `),
        ...length('width'),
        say(' wide, '),
        ...length('depth'),
        say(' deep'),
      ];
    case 'notch':
      return [
        say(`Notch at the ${shape.words['corner'] ?? ''} corner, `),
        ...length('length'),
        say(' along by '),
        ...length('width'),
        say(' across'),
      ];
    case 'cutout':
      return [
        say(num(shape, 'depth') === undefined ? 'Opening, ' : 'Recess, '),
        ...length('length'),
        say(' along by '),
        ...length('width'),
        say(' across, its lower left corner'),
        ...place,
        ...((num(shape, 'radius') ?? 0) > 0 ? [say(', corners of radius '), ...length('radius')] : []),
        ...(num(shape, 'depth') === undefined ? [] : [say(', '), ...length('depth'), say(' deep')]),
      ];
    case 'hole': {
      const count = num(shape, 'count') ?? 1;
      const spacing = num(shape, 'spacing');
      return [
        say(count > 1 ? `${count} holes in ${face}, diameter ` : `Hole in ${face}, diameter `),
        ...length('diameter'),
        ...(num(shape, 'depth') === undefined
          ? [say(' through')]
          : [say(', '), ...length('depth'), say(' deep')]),
        ...(count > 1 ? [say(', the first')] : []),
        ...place,
        ...(count > 1 && spacing !== undefined
          ? [say(', then every '), lengthInline(spacing, units, size)]
          : []),
      ];
    }
    case 'taper':
      return [
        say(
          `${capital(shape.words['end'] ?? '')} end cut ${formatAngle(num(shape, 'angle') ?? 0)} off square`,
        ),
      ];
    case 'bevel':
      return [say(`${capital(edge)} edge bevelled ${formatAngle(num(shape, 'angle') ?? 0)}`)];
    case 'roundover':
      return [
        say(
          shape.words['corner'] === 'all'
            ? 'All corners rounded, radius '
            : `${capital(shape.words['corner'] ?? '')} corner rounded, radius `,
        ),
        ...length('radius'),
      ];
  }
}

/** A taper or bevel of no angle is a square cut, which needs no words. */
function isSquare(shape: ResolvedShape): boolean {
  return (shape.type === 'taper' || shape.type === 'bevel') && num(shape, 'angle') === 0;
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

/** What is done to a part besides cutting it to size, one entry a working. */
export function describeWorkings(part: ResolvedPart, units: UnitSystem, size: number): Inline[][] {
  const workings = part.shape
    .filter((shape) => !isSquare(shape))
    .map((shape) => describeShape(shape, units, size));
  if (part.handed && part.qty > 1)
    workings.unshift([words('Cut as a left and a right: every second piece mirrored', { size })]);
  if (part.edges.length > 0)
    workings.push([
      words(`Band or dress: ${part.edges.join(', ')} edge${part.edges.length > 1 ? 's' : ''}`, { size }),
    ]);
  return workings;
}
