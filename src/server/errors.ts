/**
 * The one catalogue of refusals. A use case throws `AppError` when a person asks for what cannot be or may not be done;
 * the edges turn it into problem details or a page. Codes are part of the API: they are deprecated, never renamed.
 */
export const ERROR_CATALOGUE = {
  BAD_INPUT: { status: 422, title: 'Some of what was sent cannot be used' },
  SIGN_IN_REQUIRED: { status: 401, title: 'Sign in first' },
  FORBIDDEN: { status: 403, title: 'This is not yours to do' },
  NOT_FOUND: { status: 404, title: 'There is nothing here' },
  CONFLICT: { status: 409, title: 'Somebody changed this meanwhile' },
  TOO_LARGE: { status: 413, title: 'That is too large' },
  TOO_MANY: { status: 429, title: 'Too many tries' },
  WRONG_PASSWORD: { status: 422, title: 'E-mail or password do not match' },
  EMAIL_UNVERIFIED: { status: 403, title: 'The e-mail address is not confirmed yet' },
  TOKEN_SPENT: { status: 410, title: 'This link has been used or has run out' },
  PLAN_HAS_PROBLEMS: { status: 422, title: 'The plan has problems' },
  NOT_FOR_SALE: { status: 409, title: 'This plan is not for sale' },
  ALREADY_OWNED: { status: 409, title: 'You already have this licence' },
  CODE_REFUSED: { status: 422, title: 'This code cannot be used here' },
  LICENCE_ENDED: { status: 403, title: 'This licence has ended' },
  COPY_NOT_READY: { status: 409, title: 'The copy is still being made' },
  PAYMENT_UNAVAILABLE: { status: 503, title: 'The payment service does not answer' },
  STORE_UNAVAILABLE: { status: 503, title: 'The file store does not answer' },
} as const;

export type ErrorCode = keyof typeof ERROR_CATALOGUE;

export interface AppErrorOptions {
  /** A sentence for the person: what happened, what is safe, what to do. */
  detail?: string;
  /** Form fields at fault, each with its sentence. */
  fields?: Record<string, string>;
  /** Seconds after which trying again makes sense. */
  retryAfter?: number;
  cause?: unknown;
}

/** A refusal that a person can understand and act on. */
export class AppError extends Error {
  readonly code: ErrorCode;
  readonly detail: string;
  readonly fields: Record<string, string>;
  readonly retryAfter: number | undefined;

  constructor(code: ErrorCode, options: AppErrorOptions = {}) {
    super(`${code}: ${options.detail ?? ERROR_CATALOGUE[code].title}`, { cause: options.cause });
    this.name = 'AppError';
    this.code = code;
    this.detail = options.detail ?? ERROR_CATALOGUE[code].title;
    this.fields = options.fields ?? {};
    this.retryAfter = options.retryAfter;
  }

  get status(): number {
    return ERROR_CATALOGUE[this.code].status;
  }
}

/** Throws the refusal; reads well in a guard. */
export function refuse(code: ErrorCode, options: AppErrorOptions = {}): never {
  throw new AppError(code, options);
}
