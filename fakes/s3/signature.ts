import { createHash, createHmac, timingSafeEqual } from 'node:crypto';
import type { IncomingHttpHeaders } from 'node:http';
import { S3Error } from './errors.ts';

/**
 * Signature version 4, checked from the published description ("Authenticating Requests (AWS Signature Version 4)",
 * Amazon S3 API reference). Only verification lives here: the fake never signs for a client.
 */

export interface Credentials {
  accessKeyId: string;
  secretAccessKey: string;
}

export interface SignedRequest {
  method: string;
  /** As on the request line, still percent-encoded, without the query. */
  rawPath: string;
  rawQuery: string;
  headers: IncomingHttpHeaders;
}

/** What the body check needs to know about the request's own signature. */
export interface Verified {
  accessKeyId: string;
  /** `x-amz-content-sha256` as signed: a hex digest, UNSIGNED-PAYLOAD or one of the STREAMING- names. */
  payload: string;
  signingKey: Buffer;
  amzDate: string;
  scope: string;
  signature: string;
}

interface VerifyOptions {
  credentials: readonly Credentials[];
  region: string;
  now: Date;
}

const ALGORITHM = 'AWS4-HMAC-SHA256';
const SKEW_MS = 15 * 60 * 1000;
const MAX_EXPIRES_S = 7 * 24 * 60 * 60;

export const sha256Hex = (data: string | Buffer): string => createHash('sha256').update(data).digest('hex');
export const hmac = (key: string | Buffer, data: string): Buffer => createHmac('sha256', key).update(data).digest();

/** The four-step key of a scope. */
export function signingKeyFor(secret: string, day: string, region: string, service: string): Buffer {
  return hmac(hmac(hmac(hmac(`AWS4${secret}`, day), region), service), 'aws4_request');
}

/** Compares two hex signatures in constant time; unequal lengths are simply unequal. */
export function sameSignature(given: string, expected: string): boolean {
  const a = Buffer.from(given);
  const b = Buffer.from(expected);
  return a.length === b.length && timingSafeEqual(a, b);
}

/** `20130524T000000Z` as an instant, or null when it is not one. */
export function parseAmzDate(text: string | undefined): Date | null {
  const match = /^(\d{4})(\d\d)(\d\d)T(\d\d)(\d\d)(\d\d)Z$/.exec(text ?? '');
  if (!match) return null;
  const [, y, mo, d, h, mi, s] = match;
  const date = new Date(`${y}-${mo}-${d}T${h}:${mi}:${s}Z`);
  return Number.isNaN(date.getTime()) ? null : date;
}

function encode(text: string): string {
  return encodeURIComponent(text).replace(/[!'()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);
}

function decode(text: string): string {
  try {
    return decodeURIComponent(text);
  } catch {
    throw new S3Error('InvalidURI');
  }
}

/** The query as decoded pairs, in the order sent. A plus sign is a plus sign. */
export function queryPairs(rawQuery: string): [string, string][] {
  return rawQuery
    .split('&')
    .filter((part) => part !== '')
    .map((part) => {
      const at = part.indexOf('=');
      return at < 0 ? [decode(part), ''] : [decode(part.slice(0, at)), decode(part.slice(at + 1))];
    });
}

function headerText(headers: IncomingHttpHeaders, name: string): string {
  const value = headers[name];
  const text = Array.isArray(value) ? value.join(',') : (value ?? '');
  return text.trim().replace(/ +/g, ' ');
}

/** The text both sides hash: method, path, query, signed headers, their names, payload hash. */
export function canonicalRequest(request: SignedRequest, signedHeaders: readonly string[], payload: string): string {
  const byCode = (a: string, b: string): number => (a < b ? -1 : a > b ? 1 : 0);
  const query = queryPairs(request.rawQuery)
    .filter(([name]) => name !== 'X-Amz-Signature')
    .map(([name, value]) => [encode(name), encode(value)] as const)
    .sort((a, b) => byCode(a[0], b[0]) || byCode(a[1], b[1]))
    .map(([name, value]) => `${name}=${value}`)
    .join('&');
  const path = decode(request.rawPath).split('/').map(encode).join('/');
  const headers = signedHeaders.map((name) => `${name}:${headerText(request.headers, name)}\n`).join('');
  return [request.method, path, query, headers, signedHeaders.join(';'), payload].join('\n');
}

interface Claim {
  credential: string;
  signedHeaders: string[];
  signature: string;
  amzDate: string;
  payload: string;
}

function readScope(claim: Claim, options: VerifyOptions): { secret: string; accessKeyId: string; day: string; scope: string } {
  const parts = claim.credential.split('/');
  const [accessKeyId, day, region, service, end] = [parts.slice(0, -4).join('/'), ...parts.slice(-4)];
  if (!accessKeyId || !day || service !== 's3' || end !== 'aws4_request') {
    throw new S3Error('AuthorizationHeaderMalformed', 'The credential must be KEY/DATE/REGION/s3/aws4_request.');
  }
  if (region !== options.region) {
    throw new S3Error('AuthorizationHeaderMalformed', `The region '${region}' is wrong; expecting '${options.region}'`, { Region: options.region });
  }
  if (!claim.amzDate.startsWith(day)) {
    throw new S3Error('AuthorizationHeaderMalformed', 'The date of the credential is not the date of the request.');
  }
  const found = options.credentials.find((one) => one.accessKeyId === accessKeyId);
  if (!found) throw new S3Error('InvalidAccessKeyId');
  return { secret: found.secretAccessKey, accessKeyId, day, scope: `${day}/${region}/s3/aws4_request` };
}

function check(request: SignedRequest, claim: Claim, options: VerifyOptions): Verified {
  const { secret, accessKeyId, day, scope } = readScope(claim, options);
  const unsigned = Object.keys(request.headers).filter(
    (name) => name.startsWith('x-amz-') && !claim.signedHeaders.includes(name),
  );
  if (!claim.signedHeaders.includes('host')) throw new S3Error('AccessDenied', 'The host header must be signed.');
  if (unsigned.length > 0) {
    throw new S3Error('AccessDenied', `There were headers present in the request which were not signed: ${unsigned.join(', ')}`);
  }
  const signingKey = signingKeyFor(secret, day, options.region, 's3');
  const canonical = canonicalRequest(request, claim.signedHeaders, claim.payload);
  const expected = hmac(signingKey, [ALGORITHM, claim.amzDate, scope, sha256Hex(canonical)].join('\n')).toString('hex');
  if (!sameSignature(claim.signature, expected)) throw new S3Error('SignatureDoesNotMatch');
  return { accessKeyId, payload: claim.payload, signingKey, amzDate: claim.amzDate, scope, signature: expected };
}

function verifyHeader(request: SignedRequest, authorization: string, options: VerifyOptions): Verified {
  const match = /^AWS4-HMAC-SHA256\s+Credential=([^,\s]+),\s*SignedHeaders=([^,\s]+),\s*Signature=([0-9a-f]{64})$/.exec(authorization.trim());
  if (!match) throw new S3Error('AuthorizationHeaderMalformed');
  const [, credential = '', signedHeaders = '', signature = ''] = match;
  const amzDate = headerText(request.headers, 'x-amz-date');
  const date = parseAmzDate(amzDate);
  if (!date) throw new S3Error('AccessDenied', 'AWS authentication requires a valid x-amz-date header');
  if (Math.abs(date.getTime() - options.now.getTime()) > SKEW_MS) throw new S3Error('RequestTimeTooSkewed');
  const payload = headerText(request.headers, 'x-amz-content-sha256');
  if (!payload) throw new S3Error('InvalidRequest', 'Missing required header for this request: x-amz-content-sha256');
  return check(request, { credential, signedHeaders: signedHeaders.split(';'), signature, amzDate, payload }, options);
}

function verifyQuery(request: SignedRequest, query: Map<string, string>, options: VerifyOptions): Verified {
  const get = (name: string): string => query.get(name) ?? '';
  if (get('X-Amz-Algorithm') !== ALGORITHM) {
    throw new S3Error('AuthorizationQueryParametersError', 'X-Amz-Algorithm only supports "AWS4-HMAC-SHA256"');
  }
  const date = parseAmzDate(get('X-Amz-Date'));
  const expires = Number(get('X-Amz-Expires'));
  if (!date) throw new S3Error('AuthorizationQueryParametersError', 'X-Amz-Date must be in the ISO8601 basic format');
  if (!Number.isInteger(expires) || expires < 1 || expires > MAX_EXPIRES_S) {
    throw new S3Error('AuthorizationQueryParametersError', 'X-Amz-Expires must be between 1 second and 7 days');
  }
  const verified = check(
    request,
    {
      credential: get('X-Amz-Credential'),
      signedHeaders: get('X-Amz-SignedHeaders').split(';'),
      signature: get('X-Amz-Signature'),
      amzDate: get('X-Amz-Date'),
      payload: headerText(request.headers, 'x-amz-content-sha256') || get('X-Amz-Content-Sha256') || 'UNSIGNED-PAYLOAD',
    },
    options,
  );
  const age = options.now.getTime() - date.getTime();
  if (age < -SKEW_MS) throw new S3Error('AccessDenied', 'Request is not valid yet');
  if (age > expires * 1000) throw new S3Error('AccessDenied', 'Request has expired');
  return verified;
}

/** Checks a request signed in its header or in its query. Anything unsigned is refused: every bucket is private. */
export function verifyRequest(request: SignedRequest, options: VerifyOptions): Verified {
  const query = new Map(queryPairs(request.rawQuery));
  const authorization = request.headers.authorization;
  const inQuery = query.has('X-Amz-Signature') || query.has('X-Amz-Algorithm');
  if (authorization && inQuery) throw new S3Error('InvalidArgument', 'Only one auth mechanism allowed');
  if (inQuery) return verifyQuery(request, query, options);
  if (authorization) return verifyHeader(request, authorization, options);
  throw new S3Error('AccessDenied');
}
