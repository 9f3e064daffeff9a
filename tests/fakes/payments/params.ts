import * as z from 'zod';
import { refuseParam } from './errors.ts';
import { isCurrency } from './currencies.ts';
import type { FormValue } from './form.ts';

type RequiredKeys<P> = { [K in keyof P]-?: undefined extends P[K] ? never : K }[keyof P];
type ShapeOf<P, S> = {
  [K in keyof S]: K extends keyof P ? z.ZodType<P[K]> : never;
} & { [K in RequiredKeys<P>]: z.ZodType };

/**
 * A strict schema for the SDK's parameter type `P`: a key that `P` does not have, a value that `P` would not take, and
 * a missing required key are each a type error here, and a parameter that is not listed is refused at run time.
 */
export function paramsOf<P>(): <S extends z.ZodRawShape & ShapeOf<P, S>>(
  shape: S,
) => z.ZodObject<S, z.core.$strict> {
  return (shape) => z.strictObject(shape);
}

/** Refuses a value while it is being read, with the published code. */
function fail(context: z.RefinementCtx, message: string, code?: string): never {
  context.addIssue({ code: 'custom', message, params: { code } });
  return z.NEVER;
}

/** Text that is not empty. */
export const text = (maxLength = 5000) =>
  z.string().transform((value, context): string => {
    if (value === '') {
      return fail(
        context,
        "You passed an empty string for '%'. We assume empty values are an attempt to unset a parameter; however '%' cannot be unset. You should remove '%' from your request or supply a non-empty value.",
        'parameter_invalid_empty',
      );
    }
    if (value.length > maxLength) {
      return fail(
        context,
        `Invalid string: ${value.slice(0, 6)}...; must be at most ${maxLength} characters`,
      );
    }
    return value;
  });

/** A whole number, as decimal digits. */
export const whole = (min = -99_999_999, max = 99_999_999) =>
  z.string().transform((value, context): number => {
    if (!/^-?\d{1,15}$/.test(value))
      return fail(context, `Invalid integer: ${value}`, 'parameter_invalid_integer');
    const number = Number(value);
    if (number < min) {
      return min === 1 || min === 0
        ? fail(context, `This value must be greater than or equal to ${min}.`, 'parameter_invalid_integer')
        : fail(context, `Invalid integer: ${value}`, 'parameter_invalid_integer');
    }
    if (number > max)
      return fail(context, `This value must be less than or equal to ${max}.`, 'parameter_invalid_integer');
    return number;
  });

/** Seconds since 1970. */
export const timestamp = () => whole(0, 99_999_999_999);

export const decimal = () =>
  z
    .string()
    .transform((value, context): number =>
      /^\d{1,6}(?:\.\d{1,6})?$/.test(value) ? Number(value) : fail(context, `Invalid decimal: ${value}`),
    );

export const flag = () =>
  z.string().transform((value, context): boolean => {
    if (value === 'true') return true;
    return value === 'false' ? false : fail(context, `Invalid boolean: ${value}`);
  });

export const choice = <const T extends readonly [string, ...string[]]>(...values: T) => z.enum(values);

export const currency = () =>
  z.string().transform((value, context): string => {
    const code = value.toLowerCase();
    return isCurrency(code)
      ? code
      : fail(context, `Invalid currency: ${value}. The stand-in knows only the currencies of its own table.`);
  });

export const url = () =>
  z.string().transform((value, context): string => {
    if (/^https?:\/\/[^\s]+$/.test(value) && URL.canParse(value)) return value;
    return fail(context, 'Not a valid URL', 'url_invalid');
  });

export const email = () =>
  z
    .string()
    .transform((value, context): string =>
      isEmail(value) ? value : fail(context, `Invalid email address: ${value}`, 'email_invalid'),
    );

/** Whether something may be an e-mail address. */
export function isEmail(value: string): boolean {
  return value.length <= 254 && /^[^\s@]+@[^\s@]+\.[^\s@]+$/.test(value);
}

/** A value that an empty string unsets. */
export const emptyable = <T extends z.ZodType>(schema: T) => z.union([z.literal(''), schema]);

const metadataFields = z
  .record(z.string(), z.string())
  .transform((value, context): Record<string, string> => {
    const entries = Object.entries(value);
    if (entries.length > 50) return fail(context, 'Metadata can only have up to 50 keys');
    for (const [key, entry] of entries) {
      if (key.length > 40) return fail(context, `Metadata keys can only be up to 40 characters: ${key}`);
      if (entry.length > 500)
        return fail(
          context,
          `Metadata values can have up to 500 characters, but you passed in a value that is ${entry.length} characters.`,
        );
    }
    return value;
  });

export const metadata = () => metadataFields.optional();
export const metadataOrEmpty = () => emptyable(metadataFields).optional();
export const expand = () => z.array(text(200)).optional();

export const address = () =>
  z.strictObject({
    city: text().optional(),
    country: text(2).optional(),
    line1: text().optional(),
    line2: text().optional(),
    postal_code: text().optional(),
    state: text().optional(),
  });

/** Bounds on a time, or the time itself. */
export const range = () =>
  z
    .union([
      z.strictObject({
        gt: timestamp().optional(),
        gte: timestamp().optional(),
        lt: timestamp().optional(),
        lte: timestamp().optional(),
      }),
      timestamp(),
    ])
    .optional();

/** What every list takes. */
export const paging = {
  limit: whole(1, 100).optional(),
  starting_after: text().optional(),
  ending_before: text().optional(),
  expand: expand(),
};

function printPath(path: readonly PropertyKey[]): string {
  return path.map((part, index) => (index === 0 ? String(part) : `[${String(part)}]`)).join('');
}

/** Reads parameters. @throws the published error for the first thing that is wrong, unknown parameters first */
export function readParams<T>(schema: z.ZodType<T>, input: FormValue): T {
  const result = schema.safeParse(input);
  if (result.success) return result.data;
  const issues = result.error.issues.map((issue) => flatten(issue, []));
  const first = issues.find(({ issue }) => issue.code === 'unrecognized_keys') ?? issues[0];
  if (!first) throw new Error('a refused parameter without an issue');
  return refuseIssue(first.issue, first.path, input);
}

type Issue = z.core.$ZodIssue;

/** A union is refused for what is wrong with its last, fullest form. */
function flatten(issue: Issue, before: readonly PropertyKey[]): { issue: Issue; path: PropertyKey[] } {
  const path = [...before, ...issue.path];
  if (issue.code !== 'invalid_union') return { issue, path };
  const branch =
    issue.errors.findLast((errors) => errors.some((inner) => inner.code !== 'invalid_type')) ??
    issue.errors.at(-1);
  const inner = branch?.[0];
  return inner ? flatten(inner, path) : { issue, path };
}

function valueAt(input: FormValue, path: readonly PropertyKey[]): FormValue | undefined {
  let value: FormValue | undefined = input;
  for (const part of path) {
    if (typeof value !== 'object') return undefined;
    value = Array.isArray(value) ? value[Number(part)] : value[String(part)];
  }
  return value;
}

function refuseIssue(issue: Issue, path: readonly PropertyKey[], input: FormValue): never {
  const param = printPath(path);
  if (issue.code === 'unrecognized_keys') {
    const unknown = printPath([...path, issue.keys[0] ?? '']);
    return refuseParam(`Received unknown parameter: ${unknown}`, {
      code: 'parameter_unknown',
      param: unknown,
    });
  }
  const value = valueAt(input, path);
  if (value === undefined) {
    return refuseParam(`Missing required param: ${param}.`, { code: 'parameter_missing', param });
  }
  if (issue.code === 'invalid_value') {
    const values = issue.values.map(String);
    const printed =
      values.length > 1 ? `${values.slice(0, -1).join(', ')}, or ${values.at(-1)}` : values.join('');
    return refuseParam(`Invalid ${param}: must be one of ${printed}`, { param });
  }
  if (issue.code === 'invalid_type') {
    const kinds: Record<string, string> = { object: 'object', record: 'object', array: 'array' };
    return refuseParam(`Invalid ${kinds[issue.expected] ?? issue.expected}`, { param });
  }
  const code = issue.code === 'custom' ? issue.params?.['code'] : undefined;
  return refuseParam(issue.message.replaceAll("'%'", `'${param}'`), {
    code: typeof code === 'string' ? code : undefined,
    param,
  });
}
