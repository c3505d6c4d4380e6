import { describe, expect, it } from 'vitest';
import { gate, strangeTarget } from '~/server/http/gate.ts';

const settings = { origin: 'http://localhost:4321', trustedProxy: '' };
const ask = (method: string, url: string, headers: Record<string, string> = {}, hasSession = false) =>
  gate({ method, url, headers: { host: 'localhost:4321', ...headers } }, settings, hasSession);

describe('the gate', () => {
  it.each(['//admin', '/a//b', '/a\\b', '/a%2fb', '/a%5Cb', '/%2e%2e/x', '/a/../b', '/a%00', 'http://x/'])('finds %s strange', (target) => {
    expect(strangeTarget(target)).toBe(true);
  });
  it.each(['/', '/logs?zip=54665&q=a//b', '/photos/1/small.webp', '/api/openapi.json'])('lets %s pass', (target) => {
    expect(strangeTarget(target)).toBe(false);
  });
  it('answers for localhost and 127.0.0.1 and for no other host', () => {
    expect(ask('GET', '/', { host: '127.0.0.1:4321' })).toBeNull();
    expect(ask('GET', '/', { host: 'elsewhere.example' })?.status).toBe(421);
    expect(ask('GET', '/', { host: 'localhost:9999' })?.status).toBe(421);
  });
  it('refuses a foreign origin on an unsafe method', () => {
    expect(ask('POST', '/api/x', { origin: 'https://elsewhere.example' })?.status).toBe(403);
    expect(ask('POST', '/api/x', { 'sec-fetch-site': 'cross-site' })?.status).toBe(403);
    expect(ask('POST', '/api/x', { 'sec-fetch-site': 'same-site' })?.status).toBe(403);
    expect(ask('POST', '/api/x', { origin: 'http://127.0.0.1:4321', 'sec-fetch-site': 'same-origin' })).toBeNull();
  });
  it('refuses a missing origin only when a session came along, and never for the calculators', () => {
    expect(ask('POST', '/api/x')).toBeNull();
    expect(ask('POST', '/api/x', {}, true)?.status).toBe(403);
    expect(ask('POST', '/api/estimate', {}, true)).toBeNull();
  });
  it('knows no other methods and no server islands', () => {
    expect(ask('TRACE', '/')?.status).toBe(405);
    expect(ask('GET', '/_server-islands/x')?.status).toBe(404);
  });
});
