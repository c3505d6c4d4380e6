import { ApiError, type ErrorBody } from './errors.ts';

/** A trouble that is to befall the next calls of a kind. */
export interface Fault {
  /** `POST /v1/transfers`, with `*` for an id; `*` alone means every call. */
  readonly on: string;
  /** How many calls it befalls. */
  readonly times: number;
  /**
   * `refuse`: answered with `status` and nothing is done. `fail after`: done, then answered with `status`.
   * `drop`: done, then the line goes dead before the answer. `drop before`: the line goes dead and nothing is done.
   * `delay`: answered `delayMs` later, the work done at the end of the wait.
   */
  readonly effect: 'refuse' | 'fail after' | 'drop' | 'drop before' | 'delay';
  readonly status?: number;
  readonly code?: string;
  readonly message?: string;
  readonly delayMs?: number;
}

/** The troubles that still wait for a call. Kept in memory only: a restart is a clean slate. */
export class Faults {
  private waiting: Fault[] = [];

  add(fault: Fault): void {
    this.waiting.push(fault);
  }

  clear(): void {
    this.waiting = [];
  }

  list(): readonly Fault[] {
    return this.waiting;
  }

  /** The trouble for this call, one fewer of it left. */
  take(method: string, path: string): Fault | null {
    const index = this.waiting.findIndex((fault) => matches(fault.on, method, path));
    const fault = this.waiting[index];
    if (fault === undefined) return null;
    if (fault.times > 1) this.waiting[index] = { ...fault, times: fault.times - 1 };
    else this.waiting.splice(index, 1);
    return fault;
  }
}

function matches(on: string, method: string, path: string): boolean {
  if (on === '*') return true;
  const [wantedMethod, wantedPath = ''] = on.split(' ');
  const wanted = wantedPath.split('/');
  const given = path.split('/');
  return wantedMethod === method && wanted.length === given.length && wanted.every((part, index) => part === '*' || part === given[index]);
}

const TYPES: Record<number, ErrorBody['type']> = { 400: 'invalid_request_error', 402: 'card_error', 404: 'invalid_request_error', 429: 'invalid_request_error' };

/** The error a fault is answered with, in the provider's words for that status unless the fault has its own. */
export function errorOf(fault: Fault): ApiError {
  const status = fault.status ?? 500;
  const words = status === 429 ? 'Request rate limit exceeded. You can learn more about rate limits here https://stripe.com/docs/rate-limits.' : 'An unknown error occurred';
  const code = fault.code ?? (status === 429 ? 'rate_limit' : undefined);
  return new ApiError(status, { type: TYPES[status] ?? 'api_error', message: fault.message ?? words, ...(code === undefined ? {} : { code }) });
}
