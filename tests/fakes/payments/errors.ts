/** An answer in the published error shape: `{ error: { type, code, message, param, doc_url } }` with its status. */
export interface ErrorBody {
  type: 'api_error' | 'card_error' | 'idempotency_error' | 'invalid_request_error';
  message: string;
  code?: string | undefined;
  param?: string | undefined;
  decline_code?: string | undefined;
  charge?: string | undefined;
  doc_url?: string | undefined;
  request_log_url?: string | undefined;
}

/** A refusal on its way to the caller; thrown by handlers, turned into an answer in one place. */
export class PaymentsError extends Error {
  readonly status: number;
  readonly body: ErrorBody;
  /** Whether an idempotency key keeps this answer: the published API keeps none where nothing was begun. */
  readonly isKept: boolean;

  constructor(status: number, body: ErrorBody, isKept = true) {
    super(body.message);
    this.status = status;
    this.body = body.code
      ? { ...body, doc_url: `https://stripe.com/docs/error-codes/${body.code.replaceAll('_', '-')}` }
      : body;
    this.isKept = isKept;
  }
}

/** Refuses a request as malformed or against the rules (400). */
export function refuse(
  message: string,
  rest: { code?: string; param?: string; status?: number } = {},
): never {
  const { status = 400, ...body } = rest;
  throw new PaymentsError(status, { type: 'invalid_request_error', message, ...body });
}

/** Refuses a request whose parameters are wrong in form; such answers are not kept under an idempotency key. */
export function refuseParam(
  message: string,
  rest: { code?: string | undefined; param?: string | undefined },
): never {
  throw new PaymentsError(400, { type: 'invalid_request_error', message, ...rest }, false);
}

/** No such object: 404 for the object of the address, 400 for one named in a parameter. */
export function refuseMissing(kind: string, id: string, param = 'id', status = 404): never {
  return refuse(`No such ${kind}: '${id}'`, { code: 'resource_missing', param, status });
}
