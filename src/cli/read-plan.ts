import { existsSync, readFileSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';

import { compilePlan } from '#lib/plan/compile.ts';
import type { CompiledPlan, Problem, Prose } from '#lib/plan/types.ts';
import { WrongUse } from './wrong-use.ts';

const MAX_BYTES = 4_000_000;

/** A plan file, read and compiled; pictures that are missing beside it are advice. */
export interface PlanFile {
  path: string;
  plan: CompiledPlan | null;
  problems: Problem[];
}

function readText(path: string): string {
  try {
    if (statSync(path).size > MAX_BYTES) throw new WrongUse(`${path} is too large to be a plan.`);
    return readFileSync(path, 'utf8');
  } catch (fault) {
    if (fault instanceof WrongUse) throw fault;
    throw new WrongUse(`${path} cannot be read.`, { cause: fault });
  }
}

function picturesIn(prose: Prose): string[] {
  return prose.flatMap((node) => {
    if (node.node === 'picture') return [node.src];
    if (node.node === 'list') return node.items.flatMap(picturesIn);
    if (node.node === 'table') return node.rows.flatMap((row) => row.flatMap(picturesIn));
    return 'children' in node ? picturesIn(node.children) : [];
  });
}

function missingPictures(plan: CompiledPlan, folder: string): Problem[] {
  const wanted = new Map<string, { line: number; column: number; length: number }>();
  const want = (name: string | undefined, at = { line: 1, column: 1, length: 1 }): void => {
    if (name !== undefined && !wanted.has(name)) wanted.set(name, at);
  };
  for (const declaration of plan.declarations) {
    if (declaration.type === 'figure') want(declaration.src, declaration.at);
    if (declaration.type === 'step')
      for (const name of picturesIn(declaration.body)) want(name, declaration.at);
  }
  for (const name of picturesIn(plan.body)) want(name);
  want(plan.front.cover);
  return [...wanted]
    .filter(([name]) => !existsSync(join(folder, name)))
    .map(([name, at]) => ({
      line: at.line,
      column: at.column,
      length: at.length,
      rule: 'picture-missing',
      severity: 'advice',
      message: `The picture “${name}” is not beside the file.`,
      hint: 'Upload it with the plan, or put it into the same folder.',
    }));
}

/** Reads and compiles a plan file. @throws WrongUse when the file cannot be read */
export function readPlan(path: string): PlanFile {
  const { plan, problems } = compilePlan(readText(path));
  return { path, plan, problems: plan ? [...problems, ...missingPictures(plan, dirname(path))] : problems };
}
