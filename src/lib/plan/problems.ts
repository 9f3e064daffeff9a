import type { Place, Problem, Severity } from './types.ts';

/** The most problems that one reading reports; a text that is wrong everywhere is not made clearer by more. */
const MAX_PROBLEMS = 100;

/** What a rule says when it is broken; see {@link Problem} for the fields. */
export interface Finding {
  rule: string;
  message: string;
  severity?: Severity;
  found?: string;
  wanted?: string;
  hint?: string;
}

/** Collects problems in the order found, each once, and no more than {@link MAX_PROBLEMS}. */
export interface ProblemList {
  readonly items: Problem[];
  add: (at: Place, finding: Finding) => void;
  hasErrors: () => boolean;
}

/** An empty list of problems. */
export function createProblemList(): ProblemList {
  const items: Problem[] = [];
  const seen = new Set<string>();
  let errors = 0;
  return {
    items,
    add(at, finding) {
      const severity = finding.severity ?? 'error';
      if (severity === 'error') errors += 1;
      const key = `${at.line}:${at.column}:${finding.rule}:${finding.message}`;
      if (seen.has(key) || items.length >= MAX_PROBLEMS) return;
      seen.add(key);
      const { line, column, length } = at;
      items.push({ line, column, length, ...finding, severity });
    },
    hasErrors: () => errors > 0,
  };
}

/** Problems by place, so that an author reads them from the top. Keeps the order of those at one place. */
export function sortProblems(problems: readonly Problem[]): Problem[] {
  return [...problems].sort((a, b) => a.line - b.line || a.column - b.column);
}

/** Long source text cut for a message, on one line. */
export function quoteSource(text: string): string {
  const line = text.replace(/\s+/g, ' ').trim();
  return line.length > 80 ? `${line.slice(0, 79)}…` : line;
}
