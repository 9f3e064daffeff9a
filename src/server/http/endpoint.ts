import type { APIContext, APIRoute } from 'astro';
import type * as z from 'zod';
import type { Actor } from '../accounts/actor.ts';
import { AppError } from '../errors.ts';
import { rememberForm } from './form-memory.ts';
import { problemResponse, toRefusal } from './problem.ts';
import { readQuery } from './read-query.ts';

/** What a use case gets from the edge: who asks, the checked input, the path's parameters. */
export interface Asked<Input> {
  actor: Actor;
  input: Input;
  context: APIContext;
}

const MAX_JSON_BYTES = 1_000_000;

async function readJson(request: Request): Promise<unknown> {
  if (request.method === 'GET' || request.method === 'HEAD') return {};
  if (!/^application\/json\b/i.test(request.headers.get('content-type') ?? '')) {
    throw new AppError('BAD_INPUT', { detail: 'Send JSON with the content type application/json.' });
  }
  const text = await request.text();
  if (text.length > MAX_JSON_BYTES) throw new AppError('TOO_LARGE');
  try {
    return JSON.parse(text) as unknown;
  } catch (cause) {
    throw new AppError('BAD_INPUT', { detail: 'The body is not JSON.', cause });
  }
}

/**
 * An endpoint that speaks JSON: checks the input, calls one use case, answers with its result
 * (200; 204 for undefined) or with problem details. For GET the input is the query, otherwise the body.
 */
export function jsonEndpoint<Schema extends z.ZodType>(
  schema: Schema,
  run: (asked: Asked<z.infer<Schema>>) => Promise<unknown>,
): APIRoute {
  return async (context) => {
    try {
      const isRead = context.request.method === 'GET';
      const input = schema.parse(isRead ? readQuery(context.url) : await readJson(context.request));
      const result = await run({ actor: context.locals.actor, input, context });
      if (result instanceof Response) return result;
      if (result === undefined)
        return new Response(null, { status: 204, headers: { 'cache-control': 'no-store' } });
      return Response.json(result, { headers: { 'cache-control': 'no-store' } });
    } catch (error) {
      return problemResponse(error, context.locals.requestId);
    }
  };
}

/** Fields that are never remembered, nor sent back to the page. */
const SECRET_FIELDS = /password|token|secret/i;

/** Form fields as an object: repeated names become arrays, files stay files. */
export function readFields(form: FormData): Record<string, unknown> {
  const fields: Record<string, unknown> = {};
  for (const key of new Set(form.keys())) {
    if (key === '__proto__') continue;
    const all = form.getAll(key);
    fields[key] = all.length > 1 ? all : all[0];
  }
  return fields;
}

/** Where a form goes after it did its work, and a sentence to show there. */
export interface FormDone {
  to: string;
  notice?: string;
}

/**
 * An endpoint behind a plain form. When done it redirects (303) to where `run` says. When refused it goes back to `back`,
 * which finds what was typed and what was wrong by `recallForm`; passwords and files are not kept.
 */
export function formEndpoint<Schema extends z.ZodType>(options: {
  schema: Schema;
  /** The page that holds the form; `typed` is what was sent, without secrets. */
  back: (context: APIContext, typed: Readonly<Record<string, string | string[]>>) => string;
  run: (asked: Asked<z.infer<Schema>>) => Promise<FormDone | Response>;
}): APIRoute {
  return async (context) => {
    let typed: Record<string, string | string[]> = {};
    try {
      const fields = readFields(await context.request.formData());
      typed = keepTyped(fields);
      const done = await options.run({
        actor: context.locals.actor,
        input: options.schema.parse(fields),
        context,
      });
      if (done instanceof Response) return done;
      if (done.notice) await rememberForm(context.cookies, { notice: done.notice, values: {}, errors: {} });
      return context.redirect(done.to, 303);
    } catch (error) {
      const refusal = toRefusal(error, context.locals.requestId);
      if (refusal.code === 'SIGN_IN_REQUIRED') {
        return context.redirect(`/sign-in?next=${encodeURIComponent(options.back(context, typed))}`, 303);
      }
      await rememberForm(context.cookies, {
        problem: refusal.fields['form'] ?? refusal.detail,
        values: typed,
        errors: refusal.fields,
      });
      const back = options.back(context, typed);
      if (refusal.retryAfter) return await showAgain(context, back, refusal.retryAfter);
      return context.redirect(back, 303);
    }
  };
}

/** The page of the form itself, with the status and header that tell a program to wait; a redirect could not say so. */
async function showAgain(context: APIContext, page: string, retryAfter: number): Promise<Response> {
  const { headers } = context.request;
  const shown = await context.rewrite(new Request(new URL(page, context.url), { headers }));
  const answer = new Response(shown.body, { status: 429, headers: shown.headers });
  answer.headers.set('retry-after', String(retryAfter));
  return answer;
}

function keepTyped(fields: Record<string, unknown>): Record<string, string | string[]> {
  const kept: Record<string, string | string[]> = {};
  for (const [key, value] of Object.entries(fields)) {
    if (SECRET_FIELDS.test(key)) continue;
    if (typeof value === 'string') kept[key] = value;
    else if (Array.isArray(value))
      kept[key] = value.filter((item): item is string => typeof item === 'string');
  }
  return kept;
}
