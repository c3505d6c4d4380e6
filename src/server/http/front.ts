import { randomUUID } from 'node:crypto';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import compression from 'compression';
import helmet from 'helmet';
import sirv from 'sirv';
import type { Env } from '../env.ts';
import { log } from '../log.ts';
import { gate } from './gate.ts';
import { loggedPath } from './logged-path.ts';
import { serveShells } from './shells.ts';

/** Astro's handler in middleware mode. */
export type Handler = (request: IncomingMessage, response: ServerResponse, next?: (error?: unknown) => void, locals?: object) => unknown;

/** Map tiles, as `http/tile-response.ts` sends them. */
const TILE_TYPE = 'application/vnd.mapbox-vector-tile';

/** The largest body read from anyone, in bytes. Photographs never pass here: they go straight to storage. */
const largestBody = 1_000_000;
/** A body over the cap is let run out before the refusal when it is no larger than this, in bytes. */
const mostRunOut = 20_000_000;

function turnAway(request: IncomingMessage, response: ServerResponse, status: number, detail: string): void {
  if (response.headersSent) return void response.destroy();
  response.statusCode = status;
  response.setHeader('cache-control', 'no-store');
  if ((request.url ?? '').startsWith('/api/') || !(request.headers.accept ?? '').includes('text/html')) {
    response.setHeader('content-type', 'application/problem+json');
    response.end(JSON.stringify({ type: 'about:blank', title: 'Refused', status, detail, errors: [] }));
    return;
  }
  response.setHeader('content-type', 'text/plain; charset=utf-8');
  response.end(`${detail}\n`);
}

/** Counts the bytes of a body that did not say its length, and stops reading at the cap. */
function capBody(request: IncomingMessage, response: ServerResponse): boolean {
  const said = request.headers['content-length'];
  if (said !== undefined && Number(said) > largestBody) {
    response.setHeader('connection', 'close');
    const refuse = (): void => turnAway(request, response, 413, 'That is larger than this server reads. Send it in parts.');
    // A browser reads no answer before it has sent everything: what is not too much is let run out, unread.
    if (Number(said) > mostRunOut) refuse();
    else request.once('end', refuse).resume();
    return false;
  }
  if (said === undefined && request.headers['transfer-encoding'] !== undefined) {
    let seen = 0;
    request.on('data', (chunk: Buffer) => {
      seen += chunk.length;
      if (seen > largestBody) {
        response.setHeader('connection', 'close');
        turnAway(request, response, 413, 'That is larger than this server reads. Send it in parts.');
        request.destroy();
      }
    });
    request.pause();
  }
  return true;
}

/** Our own front: gate, body cap, security headers, compression, static files, then Astro. */
export function createFront(handler: Handler, clientFolder: string, settings: Env): Server {
  const secure = settings.ORIGIN.startsWith('https:');
  // The content security policy is written by Astro, page by page; a second one here would only intersect with it.
  const headers = helmet({
    contentSecurityPolicy: false,
    strictTransportSecurity: secure,
    referrerPolicy: { policy: 'strict-origin-when-cross-origin' },
    xFrameOptions: { action: 'deny' },
    crossOriginEmbedderPolicy: false,
  });
  // The type of map tiles is not on the library's list of what is worth compressing.
  const squeeze = compression({ threshold: 1024, filter: (request, response) => response.getHeader('content-type') === TILE_TYPE || compression.filter(request, response) });
  const files = sirv(clientFolder, {
    etag: true,
    setHeaders: (response, path) => {
      response.setHeader('cache-control', path.startsWith('/_astro/') ? 'public, max-age=31536000, immutable' : path === '/service-worker.js' ? 'no-cache' : 'public, max-age=600');
    },
  });

  const shells = serveShells(clientFolder, settings);

  return createServer((request, response) => {
    const started = performance.now();
    const id = randomUUID();
    const remote = request.socket.remoteAddress ?? '';
    const proxied = settings.TRUSTED_PROXY !== '' && remote.replace(/^::ffff:/, '') === settings.TRUSTED_PROXY;
    const client = proxied ? (String(request.headers['x-forwarded-for'] ?? '').split(',').at(-1)?.trim() ?? remote) : remote;
    for (const name of Object.keys(request.headers)) if (name.startsWith('x-forwarded-') || name === 'forwarded') delete request.headers[name];
    request.headers['x-request-id'] = id;
    request.headers['x-client-address'] = client;
    if (secure) request.headers['x-forwarded-proto'] = 'https';
    response.setHeader('x-request-id', id);
    response.once('finish', () => {
      log().info({ requestId: id, method: request.method, path: loggedPath(request.url ?? ''), status: response.statusCode, ms: Math.round(performance.now() - started) }, 'request');
    });

    headers(request, response, () => {
      response.setHeader('permissions-policy', 'camera=(self), geolocation=(self), microphone=(self), payment=()');
      const turned = gate(request, { origin: settings.ORIGIN, trustedProxy: settings.TRUSTED_PROXY }, /(^|;\s*)skidway_session=[^;\s]/.test(request.headers.cookie ?? ''));
      if (turned) return turnAway(request, response, turned.status, turned.detail);
      if (!capBody(request, response)) return;
      squeeze(request as never, response as never, () => {
        // Without a third argument Astro draws its own 404 page; a program asking under /api gets problem details.
        const missing = (): void => turnAway(request, response, 404, 'There is no such address.');
        const astro = (): void => void (request.url?.startsWith('/api/') ? handler(request, response, missing) : handler(request, response));
        const reads = request.method === 'GET' || request.method === 'HEAD';
        if (reads && shells(request, response)) return;
        if (reads) files(request, response, astro);
        else astro();
      });
    });
  });
}
