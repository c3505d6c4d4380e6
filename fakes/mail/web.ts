import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import { htmlPart, listPage, messagePage, notFoundPage, STYLE } from './page.ts';
import type { MailStore } from './store.ts';

const PAGE_SIZE = 100;
const PAGE_POLICY = "default-src 'none'; style-src 'self'; frame-src 'self'; form-action 'self'; base-uri 'none'; frame-ancestors 'none'";
/** Mail is foreign: no script, no requests, an origin of its own. Styles and embedded pictures only. */
const MAIL_POLICY = "default-src 'none'; style-src 'unsafe-inline'; img-src data:; sandbox allow-popups allow-popups-to-escape-sandbox allow-top-navigation-by-user-activation";

function send(res: ServerResponse, status: number, type: string, body: string | Buffer, headers: Record<string, string> = {}): void {
  res.writeHead(status, {
    'Content-Type': type,
    'Content-Length': Buffer.byteLength(body),
    'Cache-Control': 'no-store',
    'X-Content-Type-Options': 'nosniff',
    'Referrer-Policy': 'no-referrer',
    'Content-Security-Policy': PAGE_POLICY,
    ...headers,
  });
  res.end(body);
}

const json = (res: ServerResponse, status: number, value: unknown): void => send(res, status, 'application/json', JSON.stringify(value));
const page = (res: ServerResponse, status: number, html: string, headers = {}): void => send(res, status, 'text/html; charset=utf-8', html, headers);

function listing(url: URL, store: MailStore): { to: string | null; all: ReturnType<MailStore['list']> } {
  const to = url.searchParams.get('to');
  const wanted = to === null || to.trim() === '' ? null : to.trim();
  const since = url.searchParams.get('since');
  const all = store.list(wanted).filter((one) => since === null || one.receivedAt >= since);
  return { to: wanted, all };
}

async function route(req: IncomingMessage, res: ServerResponse, url: URL, store: MailStore): Promise<void> {
  const { method = 'GET' } = req;
  const path = url.pathname;
  if (method === 'DELETE' && path === '/messages') {
    store.clear();
    res.writeHead(204).end();
    return;
  }
  if (method !== 'GET' && method !== 'HEAD') return json(res, 405, { error: 'Only GET here, and DELETE /messages to empty the mailbox.' });
  if (path === '/') {
    const { to, all } = listing(url, store);
    const at = Number.parseInt(url.searchParams.get('from') ?? '0', 10);
    const from = Number.isInteger(at) && at > 0 ? at : 0;
    const next = from + PAGE_SIZE;
    const query = new URLSearchParams({ ...(to === null ? {} : { to }), from: String(next) });
    return page(res, 200, listPage({ messages: all.slice(from, next), total: all.length, to, older: next < all.length ? `/?${query}` : null }));
  }
  if (path === '/style.css') return send(res, 200, 'text/css; charset=utf-8', STYLE);
  if (path === '/messages') return json(res, 200, { messages: listing(url, store).all });
  const [, room, id = '', part, index] = path.split('/');
  if (room === 'mail') return mail(res, store, id, part);
  if (room === 'messages') return messages(res, store, id, part, index);
  page(res, 404, notFoundPage());
}

async function mail(res: ServerResponse, store: MailStore, id: string, part: string | undefined): Promise<void> {
  const message = await store.message(id);
  if (!message || (part !== undefined && (part !== 'html' || message.html === null))) return page(res, 404, notFoundPage());
  if (part === 'html') return page(res, 200, htmlPart(message.html ?? ''), { 'Content-Security-Policy': MAIL_POLICY });
  page(res, 200, messagePage(message));
}

async function messages(res: ServerResponse, store: MailStore, id: string, part: string | undefined, index: string | undefined): Promise<void> {
  if (part === 'attachments') {
    const found = await store.attachment(id, Number(index));
    if (!found) return json(res, 404, { error: 'There is no such attachment.' });
    const name = encodeURIComponent(found.name);
    return send(res, 200, found.contentType, found.content, { 'Content-Disposition': `attachment; filename*=UTF-8''${name}`, 'Content-Security-Policy': MAIL_POLICY });
  }
  if (part === 'source') {
    const source = store.source(id);
    return source ? send(res, 200, 'text/plain; charset=utf-8', source) : json(res, 404, { error: 'There is no such message.' });
  }
  const message = part === undefined ? await store.message(id) : null;
  json(res, message ? 200 : 404, message ?? { error: 'There is no such message.' });
}

/** Only names of this machine: a page elsewhere that points its own name here reads nothing. */
const LOCAL_HOST = /^(localhost|127\.0\.0\.1|\[::1\])(:\d+)?$/;

/** The mailbox as pages for people and as JSON for programs. It sets no cookie. */
export function createMailboxServer(store: MailStore): Server {
  return createServer((req, res) => {
    if (!LOCAL_HOST.test(req.headers.host ?? '')) return json(res, 421, { error: 'Ask for localhost.' });
    if (!URL.canParse(req.url ?? '/', 'http://localhost')) return json(res, 400, { error: 'That is not an address.' });
    route(req, res, new URL(req.url ?? '/', 'http://localhost'), store).catch((error: unknown) => {
      console.error('mail:', error);
      if (!res.headersSent) json(res, 500, { error: 'The mailbox failed. Its log says why.' });
      else res.destroy();
    });
  });
}
