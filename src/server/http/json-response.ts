import { gzipSync } from 'node:zlib';

/** Answers from this size on are compressed, bytes: what is shorter fits a packet. */
const WORTH_IT = 1024;
/** Up to this size that is done here and now, bytes: a part of a millisecond, where handing it to another thread and back takes longer. */
const AT_ONCE = 32_768;

/** An answer in JSON, not to be kept. A short one is compressed for whoever takes gzip; a long one is left to our front, which streams it. */
export function jsonResponse(request: Request, text: string): Response {
  const headers = { 'content-type': 'application/json', 'cache-control': 'no-store' };
  const taken = /\bgzip\b(?!\s*;\s*q=0(\.0+)?\s*(,|$))/.test(request.headers.get('accept-encoding') ?? '');
  if (!taken || text.length < WORTH_IT || text.length > AT_ONCE) return new Response(text, { headers });
  return new Response(new Uint8Array(gzipSync(text, { level: 5 })), { headers: { ...headers, 'content-encoding': 'gzip', vary: 'Accept-Encoding' } });
}
