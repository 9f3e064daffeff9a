import { declareElement } from './declarations.ts';
import type { DeclareContext } from './declarations.ts';
import { keptValues, namesRead } from './dependencies.ts';
import { readFrontMatter } from './front-matter.ts';
import { sortGraph } from './graph.ts';
import { parseText } from './parse.ts';
import { MAX_TEXT_LENGTH } from './precheck.ts';
import { createProblemList, sortProblems } from './problems.ts';
import { compileProse } from './prose.ts';
import { indexSource, placeAt } from './source.ts';
import { collectElements, declareNames, MAX_DECLARATIONS } from './symbols.ts';
import type { CompiledPlan, Declaration, Problem } from './types.ts';

/** What reading a plan gives: the plan where it has no error, and everything found, from the top of the file. */
export interface Compilation {
  plan: CompiledPlan | null;
  problems: Problem[];
}

/**
 * Reads and checks the text of a plan (MDX, at most 400 000 characters). The text is read and never run: it is parsed to a
 * tree, each node is let through by an allow-list, and every kind is decided before any size is known. Never throws for what
 * an author wrote; all problems are reported at once, each with its place, its rule and its cure. `plan` is null when any of
 * them is an error. Pure; the same text gives the same plan.
 */
export function compilePlan(text: string): Compilation {
  const problems = createProblemList();
  const source = indexSource(text.slice(0, MAX_TEXT_LENGTH + 1));
  const parsed = parseText(source, problems);
  if (parsed === null) return { plan: null, problems: sortProblems(problems.items) };

  const [first, ...rest] = parsed.tree.children;
  const yaml = first?.type === 'yaml' ? first : undefined;
  const front = readFrontMatter(yaml?.value, (yaml?.position?.start.line ?? 0) + 1, problems);
  const nodes = yaml ? rest : parsed.tree.children;

  const elements = collectElements(nodes);
  const surplus = elements[MAX_DECLARATIONS];
  if (surplus) {
    problems.add(placeAt(source, surplus.position?.start.offset ?? 0, surplus.position?.end.offset ?? 1), {
      rule: 'plan-too-long',
      message: `The plan has more than ${MAX_DECLARATIONS} components.`,
      hint: 'Split it into several plans.',
    });
    return { plan: null, problems: sortProblems(problems.items) };
  }

  const context: DeclareContext = {
    source,
    problems,
    scope: new Map(),
    blanked: parsed.blanked,
    declarations: [],
  };
  declareNames(elements, context);
  const body = compileProse(nodes, context, (element) => declareElement(element, context));
  const declarations = context.declarations.filter(
    (declaration): declaration is Declaration => declaration !== null,
  );
  const isWhole = declarations.length === context.declarations.length;
  const order = orderValues(declarations, problems.add);
  if (!isWhole && !problems.hasErrors()) throw new Error('A declaration is missing and no problem says why.');
  const plan: CompiledPlan | null = problems.hasErrors()
    ? null
    : { format: 1, front, declarations, order, body };
  return { plan, problems: sortProblems(problems.items) };
}

/** The order in which kept values are worked out; cycles through parts and materials are reported. */
function orderValues(
  declarations: readonly Declaration[],
  report: ReturnType<typeof createProblemList>['add'],
): string[] {
  const kept = keptValues(declarations);
  const byKey = new Map(kept.map((value) => [value.key, value]));
  const needs = new Map(
    kept.map(({ key, formula }) => [key, namesRead(formula.expression).filter((name) => byKey.has(name))]),
  );
  const { order, cycles } = sortGraph([...byKey.keys()], needs);
  for (const cycle of cycles) {
    const start = byKey.get(cycle[0] ?? '');
    const path = cycle.length > 12 ? [...cycle.slice(0, 6), '…', ...cycle.slice(-5)] : cycle;
    report(start?.formula.at ?? { line: 1, column: 1, length: 1 }, {
      rule: 'cycle',
      message: `“${cycle[0]}” needs itself: ${path.join(' → ')}.`,
      found: path.join(' → '),
      hint: 'Work one of them out from sizes alone.',
    });
  }
  return order;
}
