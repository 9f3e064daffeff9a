import type { Problem, ResolvedPlan } from '#lib/plan/types.ts';

/** A resolved plan as the command line gives it out: lengths in whole nanometres, angles in degrees, parts in file order. */
export interface Report {
  title: string;
  problems: {
    line: number;
    column: number;
    rule: string;
    message: string;
    hint?: string;
    severity: string;
  }[];
  sizes: ResolvedPlan['sizes'];
  choices: { name: string; value: number | string }[];
  values: Record<string, unknown>;
  parts: {
    mark: string;
    name: string;
    material: string;
    qty: number;
    length: number;
    width: number;
    thickness: number;
  }[];
  requirements: { message: string; holds: boolean }[];
  hardware: { name: string; qty: number; packs: number; unit?: string }[];
  consumables: ResolvedPlan['consumables'];
  materials: ResolvedPlan['materials'];
  costs: ResolvedPlan['costs'];
  cautions: ResolvedPlan['cautions'];
  steps: { number: number; title: string }[];
  overall?: ResolvedPlan['overall'];
}

/** Problems of a resolved plan as one list: impossible parts, and requirements that are broken. */
export function resolvedProblems(resolved: ResolvedPlan): Problem[] {
  const broken = resolved.requirements.flatMap(({ holds, message, at }): Problem[] =>
    holds ? [] : [{ ...at, rule: 'requirement-broken', severity: 'error', message }],
  );
  return [...broken, ...resolved.problems];
}

/** The report of a plan that was resolved, or of one that could not be. */
export function makeReport(
  title: string,
  problems: readonly Problem[],
  resolved: ResolvedPlan | null,
): Report {
  const told = problems.map(({ line, column, rule, message, hint, severity }) => ({
    line,
    column,
    rule,
    message,
    ...(hint !== undefined && { hint }),
    severity,
  }));
  return {
    title,
    problems: told,
    sizes: resolved?.sizes ?? [],
    choices: (resolved?.choices ?? []).map(({ name, value }) => ({ name, value })),
    values: Object.fromEntries((resolved?.values ?? []).map(({ name, value }) => [name, value])),
    parts: (resolved?.parts ?? []).map(({ mark, name, material, qty, length, width, thickness }) => ({
      mark,
      name,
      material,
      qty,
      length,
      width,
      thickness,
    })),
    requirements: (resolved?.requirements ?? []).map(({ message, holds }) => ({ message, holds })),
    hardware: (resolved?.hardware ?? []).map(({ name, qty, packs, unit }) => ({
      name,
      qty,
      packs,
      ...(unit !== undefined && { unit }),
    })),
    consumables: resolved?.consumables ?? [],
    materials: resolved?.materials ?? [],
    costs: resolved?.costs ?? [],
    cautions: resolved?.cautions ?? [],
    steps: (resolved?.steps ?? []).map(({ number, title: name }) => ({ number, title: name })),
    ...(resolved?.overall && { overall: resolved.overall }),
  };
}

/** Writes a value as one JSON document and nothing else. */
export function writeJson(value: unknown): void {
  process.stdout.write(`${JSON.stringify(value, null, 1)}\n`);
}

/** Writes problems for people, one a line, in the form that editors can follow. */
export function writeProblems(path: string, problems: readonly Problem[]): void {
  for (const { line, column, severity, rule, message, hint } of problems) {
    process.stderr.write(
      `${path}:${line}:${column}: ${severity} ${rule}: ${message}${hint === undefined ? '' : ` ${hint}`}\n`,
    );
  }
}

/** 1 when any problem is more than advice or a warning. */
export function exitCodeOf(problems: readonly Problem[]): number {
  return problems.some((problem) => problem.severity === 'error') ? 1 : 0;
}
