import * as z from 'zod';
import { AppError, ERROR_CATALOGUE, type ErrorCode } from '../errors.ts';
import { log } from '../log.ts';

/** RFC 9457 problem details, as every endpoint of ours answers a refusal. */
export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number(),
  detail: z.string(),
  instance: z.string(),
  code: z.string(),
  errors: z.record(z.string(), z.string()).optional(),
});
export type ProblemDetails = z.infer<typeof problemSchema>;

/** One sentence a field from a zod error; fields are named by their path. */
export function readFieldErrors(error: z.ZodError): Record<string, string> {
  const fields: Record<string, string> = {};
  for (const issue of error.issues) fields[issue.path.join('.') || 'form'] ??= issue.message;
  return fields;
}

/**
 * Turns whatever was thrown into a refusal that may leave the house.
 * An unexpected error is logged once, here, with the request id; nothing of it is told outside.
 */
export function toRefusal(
  error: unknown,
  requestId: string,
): {
  status: number;
  code: ErrorCode | 'INTERNAL';
  title: string;
  detail: string;
  fields: Record<string, string>;
  retryAfter?: number | undefined;
} {
  if (error instanceof z.ZodError) {
    const { status, title } = ERROR_CATALOGUE.BAD_INPUT;
    return {
      status,
      code: 'BAD_INPUT',
      title,
      detail: 'See the fields that are marked.',
      fields: readFieldErrors(error),
    };
  }
  if (error instanceof AppError) {
    const { status, code, detail, fields, retryAfter } = error;
    return { status, code, title: ERROR_CATALOGUE[code].title, detail, fields, retryAfter };
  }
  log.error({ requestId, err: error }, 'unexpected error');
  return {
    status: 500,
    code: 'INTERNAL',
    title: 'Something broke on our side',
    detail: `Nothing was changed. Try again; if it stays, write to us with the number ${requestId}.`,
    fields: {},
  };
}

/** The refusal as `application/problem+json`. */
export function problemResponse(error: unknown, requestId: string): Response {
  const refusal = toRefusal(error, requestId);
  const body: ProblemDetails = {
    type: `urn:benchleaf:problem:${refusal.code.toLowerCase().replaceAll('_', '-')}`,
    title: refusal.title,
    status: refusal.status,
    detail: refusal.detail,
    instance: requestId,
    code: refusal.code,
    ...(Object.keys(refusal.fields).length ? { errors: refusal.fields } : {}),
  };
  const headers = new Headers({ 'content-type': 'application/problem+json', 'cache-control': 'no-store' });
  if (refusal.retryAfter) headers.set('retry-after', String(refusal.retryAfter));
  return new Response(JSON.stringify(body), { status: refusal.status, headers });
}
