import type { IncomingMessage, ServerResponse } from 'node:http';
import { S3Error } from './errors.ts';
import { header, sendEmpty } from './exchange.ts';

const METHODS = ['GET', 'HEAD', 'POST', 'PUT'];
const EXPOSED = 'ETag, Location, x-amz-request-id';

function allowed(origin: string | undefined, origins: readonly string[]): origin is string {
  return origin !== undefined && (origins.includes(origin) || origins.includes('*'));
}

/** Lets a configured origin read the answer. Other origins get no header, so their browsers keep it from the page. */
export function addCorsHeaders(req: IncomingMessage, res: ServerResponse, origins: readonly string[]): void {
  res.setHeader('Vary', 'Origin, Access-Control-Request-Headers, Access-Control-Request-Method');
  const origin = header(req, 'origin');
  if (!allowed(origin, origins) || !METHODS.includes(req.method ?? '')) return;
  res.setHeader('Access-Control-Allow-Origin', origin);
  res.setHeader('Access-Control-Expose-Headers', EXPOSED);
}

/** Answers OPTIONS (Fetch standard, "CORS-preflight request"). */
export function preflight(req: IncomingMessage, res: ServerResponse, origins: readonly string[]): void {
  const origin = header(req, 'origin');
  const method = header(req, 'access-control-request-method');
  if (origin === undefined || method === undefined) {
    throw new S3Error('InvalidRequest', 'Insufficient information. Origin request header needed.');
  }
  if (!allowed(origin, origins) || !METHODS.includes(method)) throw new S3Error('AccessForbidden');
  const asked = header(req, 'access-control-request-headers');
  sendEmpty(res, 200, {
    'Access-Control-Allow-Origin': origin,
    'Access-Control-Allow-Methods': METHODS.join(', '),
    ...(asked === undefined ? {} : { 'Access-Control-Allow-Headers': asked }),
    'Access-Control-Expose-Headers': EXPOSED,
    'Access-Control-Max-Age': '3000',
  });
}
