import type * as z from 'zod';
import { readParams } from './params.ts';
import type { FormValue } from './form.ts';
import type { World } from './world.ts';

/** One published call: method, path with `:name` for ids, what it takes, what it does. */
export interface Route {
  method: 'GET' | 'POST' | 'DELETE';
  path: string;
  run: (world: World, input: FormValue, ids: string[]) => object;
}

/** Declares a call; its parameters are read by the schema before the handler sees them. */
export function route<T>(
  method: Route['method'],
  path: string,
  schema: z.ZodType<T>,
  run: (world: World, params: T, ...ids: string[]) => object,
): Route {
  return {
    method,
    path,
    run: (world, input, ids) => run(world, readParams(schema, input), ...ids),
  };
}

/** The ids in an address, or null where it is not this route's. */
export function matchPath(pattern: string, path: string): string[] | null {
  const wanted = pattern.split('/');
  const given = path.split('/');
  if (wanted.length !== given.length) return null;
  const ids: string[] = [];
  for (const [index, part] of wanted.entries()) {
    const value = given[index] ?? '';
    if (part.startsWith(':')) ids.push(decodeURIComponent(value));
    else if (part !== value) return null;
  }
  return ids;
}
