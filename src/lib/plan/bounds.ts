import type { ProofSpace } from './proof-points.ts';
import type { CompiledPlan } from './types.ts';

export interface Bounds {
  proved: string[];
}

// eslint-disable-next-line require-yield
export function* boundPlan(
  _plan: CompiledPlan,
  _space: ProofSpace,
  _combinations: readonly (number | string)[][],
): Generator<number, Bounds> {
  return { proved: [] };
}
