import type { Problem } from '~/domain/result.ts';
import { Refusal, type Kind } from '../errors.ts';

const statuses: Readonly<Record<Kind, number>> = { invalid: 422, signedOut: 401, forbidden: 403, notFound: 404, conflict: 409, tooMany: 429, unavailable: 503 };
const titles: Readonly<Record<number, string>> = {
  400: 'The request could not be read', 401: 'Sign in first', 403: 'Not allowed', 404: 'Not found', 405: 'Not this way', 409: 'Things have moved on',
  413: 'Too large', 415: 'Not JSON', 422: 'Some input cannot be used', 429: 'Too many tries', 500: 'Our fault', 503: 'Not just now',
};

/** The HTTP status of a refusal. */
export const statusOf = (refusal: Refusal): number => statuses[refusal.kind];

/** Problem details (RFC 9457) with our `errors: [{ path, message }]`. */
export function problemResponse(status: number, detail: string, errors: readonly Problem[] = [], headers: Record<string, string> = {}): Response {
  const body = { type: 'about:blank', title: titles[status] ?? 'Refused', status, detail, errors };
  return new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/problem+json', 'cache-control': 'no-store', ...headers } });
}

/** A refusal as problem details. */
export const refusalResponse = (refusal: Refusal): Response =>
  problemResponse(statusOf(refusal), refusal.message, refusal.problems, refusal.retryAfterS === undefined ? {} : { 'retry-after': String(refusal.retryAfterS) });
