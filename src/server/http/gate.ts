import type { IncomingMessage } from 'node:http';

/** What the gate needs to know of where we stand. */
export interface GateSettings {
  /** Our public origin, for instance `https://skidway.example`. */
  readonly origin: string;
  /** The one address whose forwarded headers are believed; empty for none. */
  readonly trustedProxy: string;
}

/** A refusal at the gate. */
export interface Turned {
  readonly status: number;
  readonly detail: string;
}

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);
const knownMethods = new Set([...safeMethods, 'POST', 'PUT', 'PATCH', 'DELETE']);

/** Endpoints that ignore cookies: a missing Origin proves nothing about them. */
const cookieless = /^\/api\/(estimate|tally|tree-volume|drying|saw-plan|cut-list|webhooks\/)/;

/** The origins that are us. On a local origin, localhost and 127.0.0.1 are the same house. */
export function ownOrigins(origin: string): ReadonlySet<string> {
  const url = new URL(origin);
  const all = new Set([url.origin]);
  if (url.hostname === 'localhost' || url.hostname === '127.0.0.1') {
    for (const host of ['localhost', '127.0.0.1']) all.add(`${url.protocol}//${host}:${url.port || '80'}`);
  }
  return all;
}

/** Whether a request target is one that a router and a file server could read in two ways. */
export function strangeTarget(target: string): boolean {
  const path = target.split('?', 1)[0] ?? '';
  return !path.startsWith('/') || path.includes('//') || path.includes('\\') || /%(2f|5c|00|2e)/i.test(path) || path.split('/').some((part) => part === '..' || part === '.');
}

/**
 * Looks at a request before anything else does.
 * @param hasSession whether a session cookie came along
 * @returns null to let it pass, or why it is turned away
 */
export function gate(request: Pick<IncomingMessage, 'method' | 'url' | 'headers'>, settings: GateSettings, hasSession: boolean): Turned | null {
  const method = request.method ?? 'GET';
  const target = request.url ?? '/';
  if (!knownMethods.has(method)) return { status: 405, detail: 'That method is not used here.' };
  if (target.length > 8192) return { status: 414, detail: 'The address is too long.' };
  if (strangeTarget(target)) return { status: 400, detail: 'That address is not one of ours.' };
  if (/^\/_server-islands/.test(target)) return { status: 404, detail: 'There is no such page.' };
  const origins = ownOrigins(settings.origin);
  const hosts = new Set([...origins].map((origin) => new URL(origin).host));
  if (!hosts.has(request.headers.host ?? '')) return { status: 421, detail: 'This server does not answer for that host.' };
  if (safeMethods.has(method)) return null;
  const origin = request.headers.origin;
  const site = request.headers['sec-fetch-site'];
  const foreign: Turned = { status: 403, detail: 'This came from another site, so nothing was done.' };
  if (origin !== undefined && !origins.has(origin)) return foreign;
  if (site !== undefined && site !== 'same-origin' && site !== 'none') return foreign;
  const path = target.split('?', 1)[0] ?? '';
  if (origin === undefined && site === undefined && hasSession && !cookieless.test(path)) return { status: 403, detail: 'The request does not say where it came from, so nothing was done.' };
  return null;
}
