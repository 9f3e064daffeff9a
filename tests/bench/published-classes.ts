import { createRandom } from '#lib/stock/random.ts';
import type { SheetPart, SheetProblem } from '#lib/stock/types.ts';

/**
 * Generators of the usual classes of two-dimensional bin-packing instances, from their published definitions: classes 1 to 6 of
 * Berkey and Wang (1987, Journal of the Operational Research Society 38), 7 to 10 of Martello and Vigo (1998, Management
 * Science 44). Definitions from memory of those papers, the random numbers are our own.
 */

interface Uniform {
  bin: number;
  most: number;
}
/** Berkey and Wang: both sizes uniform from 1 to `most`, in square bins. */
const UNIFORM: Record<number, Uniform> = {
  1: { bin: 10, most: 10 },
  2: { bin: 30, most: 10 },
  3: { bin: 40, most: 35 },
  4: { bin: 100, most: 35 },
  5: { bin: 100, most: 100 },
  6: { bin: 300, most: 100 },
};
const MIXED_BIN = 100;
/** Share of the type that gives a class of Martello and Vigo its character; the other three share the rest. */
const MAIN_SHARE = 0.7;

/** Makes one instance of class 1 to 10 with `n` parts, all of which may turn or none. */
export function generateClass(number: number, n: number, turn: boolean, seed: number): SheetProblem {
  const random = createRandom(seed);
  const between = (low: number, high: number) => low + Math.floor(random() * (high - low + 1));
  const uniform = UNIFORM[number];
  const bin = uniform?.bin ?? MIXED_BIN;
  const half = bin / 2;
  const twoThirds = Math.ceil((2 * bin) / 3);

  /** Type 1 long and low, 2 short and high, 3 large, 4 small. */
  function sizeOfType(type: number): [number, number] {
    if (type === 1) return [between(twoThirds, bin), between(1, half)];
    if (type === 2) return [between(1, half), between(twoThirds, bin)];
    if (type === 3) return [between(half, bin), between(half, bin)];
    return [between(1, half), between(1, half)];
  }

  function size(): [number, number] {
    if (uniform) return [between(1, uniform.most), between(1, uniform.most)];
    const main = number - 6;
    const others = [1, 2, 3, 4].filter((type) => type !== main);
    const type = random() < MAIN_SHARE ? main : (others[between(0, 2)] ?? main);
    return sizeOfType(type);
  }

  const parts = Array.from({ length: n }, (_, i): SheetPart => {
    const [length, width] = size();
    return { id: `p${i + 1}`, length, width, qty: 1, turn };
  });
  return {
    kind: 'sheet',
    kerf: 0,
    trim: { left: 0, right: 0, bottom: 0, top: 0 },
    stock: [{ id: 'bin', length: bin, width: bin, count: null, cost: 1 }],
    parts,
  };
}
