import type { ResolvedPart, ResolvedShape, ShapeDeclaration, Value } from './types.ts';

const MAX_HOLES = 1000;

function numberIn(values: Record<string, Value>, name: string): number | undefined {
  const value = values[name];
  return typeof value === 'number' ? value : undefined;
}

function pairIn(values: Record<string, Value>, name: string): [number, number] | undefined {
  const value = values[name];
  if (!Array.isArray(value)) return undefined;
  const [x, y] = value as readonly Value[];
  return typeof x === 'number' && typeof y === 'number' ? [x, y] : undefined;
}

const SHAPE_WORDS: Readonly<Record<ShapeDeclaration['type'], string>> = {
  notch: 'notch',
  cutout: 'cutout',
  groove: 'groove',
  rabbet: 'rabbet',
  hole: 'hole',
  taper: 'taper',
  bevel: 'bevel',
  roundover: 'round-over',
};

/** What is wrong with a shape on its part: which attribute, and in words. */
export function faultsOfShape(shape: ResolvedShape, part: ResolvedPart): { name: string; message: string }[] {
  const { values, words } = shape;
  const faults: { name: string; message: string }[] = [];
  const word = SHAPE_WORDS[shape.type];
  const say = (name: string, message: string): void =>
    void faults.push({ name, message: `the ${word} ${message}` });
  for (const name of ['length', 'width', 'depth', 'diameter', 'radius'] as const) {
    const value = numberIn(values, name);
    if (value !== undefined && value <= 0 && name !== 'radius') say(name, `has no ${name}`);
    if (value !== undefined && value < 0 && name === 'radius') say(name, 'has a negative radius');
  }
  const depth = numberIn(values, 'depth');
  const isThrough = shape.type === 'hole' || shape.type === 'cutout';
  if (depth !== undefined && (isThrough ? depth > part.thickness : depth >= part.thickness)) {
    say(
      'depth',
      isThrough ? 'is deeper than the part is thick' : 'is as deep as the part is thick, or deeper',
    );
  }
  const isEnd = words['edge'] === 'left' || words['edge'] === 'right';
  const [run, across] = isEnd ? [part.width, part.length] : [part.length, part.width];
  const width = numberIn(values, 'width') ?? 0;
  switch (shape.type) {
    case 'groove': {
      const inset = numberIn(values, 'inset') ?? 0;
      if (inset < 0) say('inset', 'begins outside the part');
      else if (inset + width > across) say(inset >= across ? 'inset' : 'width', 'reaches beyond the face');
      const stop = numberIn(values, 'stop') ?? 0;
      if (stop < 0 || stop >= run) say('stop', 'stops before it begins');
      break;
    }
    case 'rabbet':
      if (width >= across) say('width', 'is as wide as the part, or wider');
      break;
    case 'notch':
      if ((numberIn(values, 'length') ?? 0) >= part.length)
        say('length', 'is as long as the part, or longer');
      if (width >= part.width) say('width', 'is as wide as the part, or wider');
      break;
    case 'cutout': {
      const [x, y] = pairIn(values, 'at') ?? [0, 0];
      const length = numberIn(values, 'length') ?? 0;
      if (x < 0 || y < 0 || x + length > part.length || y + width > part.width)
        say('at', 'reaches beyond the part');
      if ((numberIn(values, 'radius') ?? 0) * 2 > Math.min(length, width))
        say('radius', 'has corners rounder than it is wide');
      break;
    }
    case 'hole': {
      const [x, y] = pairIn(values, 'at') ?? [0, 0];
      const radius = (numberIn(values, 'diameter') ?? 0) / 2;
      const count = numberIn(values, 'count') ?? 1;
      if (!Number.isInteger(count) || count < 1 || count > MAX_HOLES) {
        say('count', `cannot be made ${count} times`);
        break;
      }
      const [dx, dy] = pairIn(values, 'spacing') ?? [numberIn(values, 'spacing') ?? 0, 0];
      const [endX, endY] = [x + dx * (count - 1), y + dy * (count - 1)];
      const isInside = (along: number, over: number): boolean =>
        along - radius >= 0 &&
        over - radius >= 0 &&
        along + radius <= part.length &&
        over + radius <= part.width;
      if (!isInside(x, y)) say('at', 'reaches beyond the part');
      else if (!isInside(endX, endY)) say('spacing', 'and its row reach beyond the part');
      break;
    }
    case 'taper': {
      const angle = Math.abs(numberIn(values, 'angle') ?? 0);
      if (angle >= 90 || part.width * Math.tan((angle * Math.PI) / 180) >= part.length)
        say('angle', 'cuts the part away');
      break;
    }
    case 'bevel': {
      const angle = Math.abs(numberIn(values, 'angle') ?? 0);
      if (angle >= 90 || part.thickness * Math.tan((angle * Math.PI) / 180) >= across)
        say('angle', 'cuts the part away');
      break;
    }
    case 'roundover':
      if ((numberIn(values, 'radius') ?? 0) > Math.min(part.length, part.width))
        say('radius', 'is rounder than the part is wide');
      break;
  }
  return faults;
}
