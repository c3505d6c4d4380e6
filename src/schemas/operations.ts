import type { z } from 'zod';

/** One public or signed-in endpoint as `GET /api/openapi.json` describes it. */
export interface Operation {
  readonly method: 'get' | 'post' | 'put' | 'patch' | 'delete';
  /** As OpenAPI writes it: `/api/photos/{id}`. */
  readonly path: string;
  readonly summary: string;
  /** Whether a session is needed. */
  readonly signedIn?: boolean;
  readonly query?: z.ZodType;
  readonly body?: z.ZodType;
  /** The answer's schema; absent for one without a body. */
  readonly answer?: z.ZodType;
  readonly answerType?: string;
}

/** Every endpoint. A check compares this list with the files of `pages/api`. */
export const operations: readonly Operation[] = [
  { method: 'get', path: '/api/health', summary: 'Whether the parts this server needs answer' },
  { method: 'get', path: '/api/health/live', summary: 'Whether the process lives' },
  { method: 'get', path: '/api/openapi.json', summary: 'This description' },
];
