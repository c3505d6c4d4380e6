import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { join } from 'node:path';
import type { Env } from '../env.ts';

type Addresses = Pick<Env, 'PAYMENTS_PAGE_ORIGIN' | 'STORAGE_PUBLIC_ENDPOINT'>;

/** A page's security policy as this server means it: the build holds stand-ins for the payment page's and the storage's origins. */
export const settledPolicy = (text: string, { PAYMENTS_PAGE_ORIGIN, STORAGE_PUBLIC_ENDPOINT }: Addresses): string =>
  text.replaceAll('https://payments.skidway.invalid', PAYMENTS_PAGE_ORIGIN).replaceAll('https://storage.skidway.invalid', STORAGE_PUBLIC_ENDPOINT);

/**
 * The pages that were made at build time, with this server's origins in their policy, read once. A phone that has kept a page keeps its
 * policy until the next build.
 * @returns answers a request for one of them; false when it is for something else
 */
export function serveShells(clientFolder: string, settings: Addresses): (request: IncomingMessage, response: ServerResponse) => boolean {
  const shells = new Map<string, { readonly body: Buffer; readonly etag: string }>();
  for (const name of readdirSync(clientFolder, { recursive: true, encoding: 'utf8' })) {
    if (!name.endsWith('/index.html')) continue;
    const body = Buffer.from(settledPolicy(readFileSync(join(clientFolder, name), 'utf8'), settings));
    shells.set(`/${name.slice(0, -'/index.html'.length)}`, { body, etag: `"${createHash('sha256').update(body).digest('base64url')}"` });
  }
  return (request, response) => {
    const shell = shells.get((request.url ?? '').replace(/\?.*$/, '').replace(/(\/index\.html|\/)$/, ''));
    if (!shell) return false;
    const known = (request.headers['if-none-match'] ?? '').split(',').some((one) => one.trim().replace(/^W\//, '') === shell.etag);
    response.writeHead(known ? 304 : 200, { 'content-type': 'text/html; charset=utf-8', 'cache-control': 'public, max-age=600', etag: shell.etag });
    response.end(known || request.method === 'HEAD' ? undefined : shell.body);
    return true;
  };
}
