/** The body of an error as the provider words it. `extra` holds what only some errors carry (the charge, the intent). */
export interface ErrorBody {
  readonly type: 'api_error' | 'card_error' | 'idempotency_error' | 'invalid_request_error';
  readonly message: string;
  readonly code?: string;
  readonly param?: string;
  readonly decline_code?: string;
  readonly charge?: string;
  readonly payment_intent?: unknown;
}

/**
 * A refusal with the provider's status and shape.
 * `keepsWork` says that what was written before it stays (a declined card leaves a failed charge behind).
 */
export class ApiError extends Error {
  constructor(
    readonly status: number,
    readonly body: ErrorBody,
    readonly keepsWork = false,
  ) {
    super(body.message);
  }

  /** The whole answer: `{ error: { … } }`, with the link to the code's page when there is a code. */
  toJson(requestId: string): unknown {
    const docUrl = this.body.code === undefined ? {} : { doc_url: `https://stripe.com/docs/error-codes/${this.body.code.replaceAll('_', '-')}` };
    return { error: { ...this.body, ...docUrl, request_log_url: `https://dashboard.stripe.com/test/logs/${requestId}` } };
  }
}

/** 400: the request is well formed but may not be done. */
export const invalid = (message: string, code?: string, param?: string): ApiError =>
  new ApiError(400, { type: 'invalid_request_error', message, ...(code === undefined ? {} : { code }), ...(param === undefined ? {} : { param }) });

/** 400 `parameter_missing`. */
export const missing = (param: string): ApiError => invalid(`Missing required param: ${param}.`, 'parameter_missing', param);

/** 404 `resource_missing`, or 400 when the id came in a parameter, as the provider does. */
export function noSuch(what: string, id: string, param = 'id', status: 400 | 404 = 404): ApiError {
  return new ApiError(status, { type: 'invalid_request_error', code: 'resource_missing', message: `No such ${what}: '${id}'`, param });
}
