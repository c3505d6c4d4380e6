import type { IncomingMessage, ServerResponse } from 'node:http';
import { ChunkedBody } from './chunked.ts';
import { BodyChecksum } from './checksum.ts';
import { S3Error } from './errors.ts';
import type { Verified } from './signature.ts';
import type { Bucket, Received } from './store.ts';

/** One request on its way through the handlers. */
export interface Exchange {
  req: IncomingMessage;
  res: ServerResponse;
  method: string;
  bucketName: string;
  key: string;
  query: ReadonlyMap<string, string>;
  verified: Verified;
  now: Date;
}

export const MAX_SINGLE_PUT = 5 * 1024 ** 3;

/** The raw body; leaving the loop early does not cut the connection, so that the refusal can still be read. */
export function rawBody(req: IncomingMessage): AsyncIterable<Buffer> {
  return req.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>;
}

export function header(req: IncomingMessage, name: string): string | undefined {
  const value = req.headers[name];
  return Array.isArray(value) ? value.join(',') : value;
}

/** Receives a PUT body in whichever coding the client chose, and checks every digest it promised. */
export async function receiveBody(exchange: Exchange, bucket: Bucket): Promise<Received & { echo: Record<string, string> }> {
  const { req, verified } = exchange;
  const chunked = verified.payload.startsWith('STREAMING-') ? new ChunkedBody(verified) : null;
  const declared = header(req, chunked ? 'x-amz-decoded-content-length' : 'content-length');
  if (declared === undefined || !/^\d+$/.test(declared)) throw new S3Error('MissingContentLength');
  if (Number(declared) > MAX_SINGLE_PUT) throw new S3Error('EntityTooLarge');
  const checksum = new BodyChecksum(req.headers);
  const plain = chunked ? chunked.decode(rawBody(req)) : rawBody(req);
  const received = await bucket.receive(observe(plain, checksum), MAX_SINGLE_PUT);
  try {
    if (received.size !== Number(declared)) throw new S3Error('IncompleteBody');
    checkDigests(exchange, received);
    const found = checksum.finish(chunked?.trailers ?? new Map());
    return { ...received, echo: found ? { [found.name]: found.value } : {} };
  } catch (error) {
    bucket.discard(received.blob);
    throw error;
  }
}

async function* observe(source: AsyncIterable<Buffer>, checksum: BodyChecksum): AsyncGenerator<Buffer> {
  for await (const piece of source) {
    checksum.update(piece);
    yield piece;
  }
}

function checkDigests({ req, verified }: Exchange, received: Received): void {
  if (/^[0-9a-f]{64}$/.test(verified.payload)) {
    if (verified.payload !== received.sha256) throw new S3Error('XAmzContentSHA256Mismatch');
  } else if (verified.payload !== 'UNSIGNED-PAYLOAD' && !verified.payload.startsWith('STREAMING-')) {
    throw new S3Error('InvalidRequest', 'x-amz-content-sha256 must be a digest, UNSIGNED-PAYLOAD or a STREAMING- name.');
  }
  const md5 = header(req, 'content-md5');
  if (md5 === undefined) return;
  const expected = Buffer.from(md5, 'base64');
  if (expected.length !== 16) throw new S3Error('InvalidDigest');
  if (expected.toString('hex') !== received.md5) throw new S3Error('BadDigest');
}

/** A small body as text, with its signed digest checked. For the XML documents clients send. */
export async function readText(exchange: Exchange, bucket: Bucket, limit = 2 * 1024 ** 2): Promise<string> {
  const declared = Number(header(exchange.req, 'content-length') ?? header(exchange.req, 'x-amz-decoded-content-length') ?? 0);
  if (declared > limit) throw new S3Error('EntityTooLarge');
  const received = await receiveBody(exchange, bucket);
  try {
    const pieces: Buffer[] = [];
    const stream = bucket.read({ key: '', etag: '', lastModified: '', headers: {}, blob: received.blob, size: received.size });
    for await (const piece of stream) pieces.push(piece as Buffer);
    return Buffer.concat(pieces).toString('utf8');
  } finally {
    bucket.discard(received.blob);
  }
}

export function sendXml(res: ServerResponse, status: number, xml: string): void {
  res.writeHead(status, { 'Content-Type': 'application/xml', 'Content-Length': Buffer.byteLength(xml) });
  res.end(xml);
}

export function sendEmpty(res: ServerResponse, status: number, headers: Record<string, string> = {}): void {
  res.writeHead(status, status === 204 || status === 304 ? headers : { 'Content-Length': '0', ...headers });
  res.end();
}

const KEPT = ['content-type', 'content-disposition', 'content-language', 'cache-control', 'expires'];

/** The headers an object keeps: the usual ones, its coding without `aws-chunked`, and the user's own metadata. */
export function keptHeaders(given: (name: string) => string | undefined, names: readonly string[]): Record<string, string> {
  const kept: Record<string, string> = {};
  for (const name of [...KEPT, ...names.filter((one) => one.startsWith('x-amz-meta-'))]) {
    const value = given(name);
    if (value !== undefined && value !== '') kept[name] = value;
  }
  const coding = (given('content-encoding') ?? '').split(',').map((one) => one.trim()).filter((one) => one !== '' && one !== 'aws-chunked');
  if (coding.length > 0) kept['content-encoding'] = coding.join(',');
  kept['content-type'] ??= 'binary/octet-stream';
  return kept;
}
