import { formatExactLength } from '#lib/units/format-length.ts';
import type { UnitSystem } from '#lib/units/length.ts';
import { parseAngle } from '#lib/units/parse-angle.ts';
import { parseLength } from '#lib/units/parse-length.ts';
import { checkFit } from './check-fit.ts';
import type { CompiledPlan, Fit } from './types.ts';

/**
 * A fit as it stands in an address or a plain form: `s.NAME` a size as people write it, `c.NAME` the value of a choice,
 * `m.NAME` a measured thickness, `units`.
 */
export const FIT_FIELD = { size: 's.', choice: 'c.', measured: 'm.' } as const;

/** What to know of a size or choice to write it into an address; resolved and declared ones both fit. */
interface Named {
  name: string;
  kind: string;
}

/** The fit as query parameters that `readFitQuery` reads back exactly. Texts are lengths where their size is one. */
export function writeFitQuery(fit: Fit, sizes: readonly Named[]): Record<string, string> {
  const query: Record<string, string> = {};
  const kinds = new Map(sizes.map((size) => [size.name, size.kind]));
  for (const [name, value] of Object.entries(fit.values)) {
    const kind = kinds.get(name);
    if (kind === undefined) query[FIT_FIELD.choice + name] = String(value);
    else
      query[FIT_FIELD.size + name] =
        kind === 'length' && typeof value === 'number' ? formatExactLength(value, fit.units) : String(value);
  }
  for (const [name, nm] of Object.entries(fit.measured))
    query[FIT_FIELD.measured + name] = formatExactLength(nm, fit.units);
  query['units'] = fit.units;
  return query;
}

export interface ReadFit {
  /** What could be taken; everything else is left to the plan's defaults. */
  fit: Fit;
  /** Field name (with its prefix) to the sentence that says why it could not be taken. */
  refused: Record<string, string>;
  /** True when the address said anything about sizes at all. */
  isGiven: boolean;
}

/** Reads a fit out of an address or form. A field that cannot be read or is beyond the plan's limits is left out and said. */
export function readFitQuery(
  plan: CompiledPlan,
  query: Readonly<Record<string, string>>,
  units: UnitSystem,
): ReadFit {
  const fit: Fit = { values: {}, measured: {}, units };
  const refused: Record<string, string> = {};
  let isGiven = false;

  const readText = (field: string): string | undefined => {
    const text = Object.hasOwn(query, field) ? query[field]?.trim() : undefined;
    if (text) isGiven = true;
    return text === '' ? undefined : text;
  };
  const readLength = (field: string, text: string): number | undefined => {
    const read = parseLength(text, units);
    if (read.ok) return read.nm;
    refused[field] = `${read.message} ${read.hint}`.trim();
    return undefined;
  };

  for (const declaration of plan.declarations) {
    if (declaration.type === 'size') {
      const field = FIT_FIELD.size + declaration.name;
      const text = readText(field);
      if (text === undefined) continue;
      let value: number | undefined;
      if (declaration.kind === 'length') value = readLength(field, text);
      else if (declaration.kind === 'angle') {
        const read = parseAngle(text);
        if (read.ok) value = read.degrees;
        else refused[field] = `${read.message} ${read.hint}`.trim();
      } else if (/^-?\d{1,9}$/.test(text)) value = Number(text);
      else refused[field] = 'Write a whole number.';
      if (value !== undefined) fit.values[declaration.name] = value;
    } else if (declaration.type === 'choice') {
      const field = FIT_FIELD.choice + declaration.name;
      const text = readText(field);
      if (text === undefined) continue;
      const option = declaration.options.find((each) => String(each.value) === text);
      if (option) fit.values[declaration.name] = option.value;
      else refused[field] = `${declaration.label} has no such option.`;
    } else if (declaration.type === 'material' && declaration.measured) {
      const field = FIT_FIELD.measured + declaration.name;
      const text = readText(field);
      const nm = text === undefined ? undefined : readLength(field, text);
      if (nm !== undefined) fit.measured[declaration.name] = nm;
    }
  }
  return { ...dropRefused(plan, fit, refused), isGiven };
}

/** Takes out what the plan does not allow, and says so. */
function dropRefused(
  plan: CompiledPlan,
  fit: Fit,
  refused: Record<string, string>,
): { fit: Fit; refused: Record<string, string> } {
  const checked = checkFit(plan, fit);
  if (checked.ok) return { fit: checked.fit, refused };
  const sizes = new Set(plan.declarations.flatMap((each) => (each.type === 'size' ? [each.name] : [])));
  const bad = new Set(checked.problems.map((problem) => problem.name));
  for (const problem of checked.problems) {
    const prefix = sizes.has(problem.name)
      ? FIT_FIELD.size
      : problem.name in fit.measured
        ? FIT_FIELD.measured
        : FIT_FIELD.choice;
    refused[prefix + problem.name] = [problem.message, problem.hint].filter(Boolean).join(' ');
  }
  const keep = <T>(record: Record<string, T>) =>
    Object.fromEntries(Object.entries(record).filter(([name]) => !bad.has(name)));
  return { fit: { ...fit, values: keep(fit.values), measured: keep(fit.measured) }, refused };
}
