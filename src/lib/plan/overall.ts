import { roundNm } from '#lib/units/length.ts';

import type { ResolvedPart } from './types.ts';

type Point = readonly [number, number, number];

const AXES = ['x', 'y', 'z'];

/** Turns a point about an axis through the origin, right-handed, in degrees; quarter turns come out exact. */
function turnPoint([x, y, z]: Point, axis: string, degrees: number): Point {
  const quarter = degrees % 90 === 0;
  const radians = (degrees * Math.PI) / 180;
  const sine = quarter ? Math.round(Math.sin(radians)) : Math.sin(radians);
  const cosine = quarter ? Math.round(Math.cos(radians)) : Math.cos(radians);
  if (axis === 'x') return [x, y * cosine - z * sine, y * sine + z * cosine];
  if (axis === 'y') return [x * cosine + z * sine, y, z * cosine - x * sine];
  return [x * cosine - y * sine, x * sine + y * cosine, z];
}

/**
 * The box around all placed pieces: width along x, depth along y, height along z, in nanometres. Undefined where no part
 * has a place. Shapes are not looked at: a piece counts with its full finished sizes.
 */
export function overallSize(
  parts: readonly ResolvedPart[],
): { width: number; depth: number; height: number } | undefined {
  const least = [Infinity, Infinity, Infinity];
  const most = [-Infinity, -Infinity, -Infinity];
  for (const part of parts) {
    if (!part.position || !part.along) continue;
    const sizes = [0, 0, 0];
    const first = AXES.indexOf(part.along[0]);
    const second = AXES.indexOf(part.along[1]);
    sizes[first] = part.length;
    sizes[second] = part.width;
    sizes[3 - first - second] = part.thickness;
    for (let corner = 0; corner < 8; corner += 1) {
      const inPart: Point = [
        corner & 1 ? (sizes[0] ?? 0) : 0,
        corner & 2 ? (sizes[1] ?? 0) : 0,
        corner & 4 ? (sizes[2] ?? 0) : 0,
      ];
      const turned = part.turn ? turnPoint(inPart, part.turn[0], part.turn[1]) : inPart;
      // The pieces stand in a row, so the first and the last bound them all.
      for (const count of part.qty > 1 ? [0, part.qty - 1] : [0]) {
        for (let axis = 0; axis < 3; axis += 1) {
          const at = (part.position[axis] ?? 0) + (part.every?.[axis] ?? 0) * count + (turned[axis] ?? 0);
          least[axis] = Math.min(least[axis] ?? Infinity, at);
          most[axis] = Math.max(most[axis] ?? -Infinity, at);
        }
      }
    }
  }
  const span = (axis: number): number => roundNm((most[axis] ?? 0) - (least[axis] ?? 0));
  return Number.isFinite(most[0]) ? { width: span(0), depth: span(1), height: span(2) } : undefined;
}
