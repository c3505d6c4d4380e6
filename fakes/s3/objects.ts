import { pipeline } from 'node:stream/promises';
import { S3Error } from './errors.ts';
import { header, keptHeaders, readText, receiveBody, sendEmpty, sendXml, type Exchange } from './exchange.ts';
import type { Bucket, Preconditions, StoredObject } from './store.ts';
import { document, element, innerOf, textOf } from './xml.ts';

const quoted = (etag: string): string => `"${etag}"`;

export function writePreconditions({ req }: Exchange): Preconditions {
  return { ifMatch: header(req, 'if-match'), ifNoneMatch: header(req, 'if-none-match') };
}

export async function putObject(exchange: Exchange, bucket: Bucket): Promise<void> {
  const { req, res, key, now } = exchange;
  const { echo, ...received } = await receiveBody(exchange, bucket);
  const headers = keptHeaders((name) => header(req, name), Object.keys(req.headers));
  const { blob, size, md5 } = received;
  bucket.commit({ key, blob, size, etag: md5, lastModified: now.toISOString(), headers }, writePreconditions(exchange));
  sendEmpty(res, 200, { ETag: quoted(md5), ...echo });
}

/** `x-amz-copy-source` as bucket and key. The slash before the bucket is optional. */
export function copySource(exchange: Exchange): { bucketName: string; key: string } {
  const source = header(exchange.req, 'x-amz-copy-source') ?? '';
  if (Object.keys(exchange.req.headers).some((name) => name.startsWith('x-amz-copy-source-if-'))) throw new S3Error('NotImplemented');
  let decoded: string;
  try {
    decoded = decodeURIComponent(source.replace(/\?versionId=.*$/, '')).replace(/^\//, '');
  } catch {
    throw new S3Error('InvalidArgument', 'The copy source is not well encoded.');
  }
  const slash = decoded.indexOf('/');
  if (slash < 1 || slash === decoded.length - 1) throw new S3Error('InvalidArgument', 'The copy source must be BUCKET/KEY.');
  return { bucketName: decoded.slice(0, slash), key: decoded.slice(slash + 1) };
}

export async function copyObject(exchange: Exchange, from: Bucket, to: Bucket): Promise<void> {
  const { req, res, key, now } = exchange;
  const source = from.get(copySource(exchange).key);
  const replace = header(req, 'x-amz-metadata-directive') === 'REPLACE';
  if (from === to && source.key === key && !replace) {
    throw new S3Error('InvalidRequest', 'This copy request is illegal because it copies an object to itself without changing its metadata.');
  }
  const { blob, size } = await to.receive(from.read(source), Infinity);
  const headers = replace ? keptHeaders((name) => header(req, name), Object.keys(req.headers)) : source.headers;
  to.commit({ key, blob, size, etag: source.etag, lastModified: now.toISOString(), headers }, writePreconditions(exchange));
  sendXml(res, 200, document('CopyObjectResult', [element('LastModified', now.toISOString()), element('ETag', quoted(source.etag))]));
}

function readPreconditions({ req }: Exchange, object: StoredObject): void {
  const match = header(req, 'if-match');
  const noneMatch = header(req, 'if-none-match');
  const names = (list: string): boolean => list === '*' || list.split(',').some((one) => one.trim().replace(/^W\//, '').replaceAll('"', '') === object.etag);
  const second = (text: string): number => Math.floor(Date.parse(text) / 1000);
  const modified = second(object.lastModified);
  const since = header(req, 'if-modified-since');
  const unmodified = header(req, 'if-unmodified-since');
  if (match !== undefined ? !names(match) : unmodified !== undefined && modified > second(unmodified)) throw new S3Error('PreconditionFailed');
  if (noneMatch !== undefined ? names(noneMatch) : since !== undefined && modified <= second(since)) throw new S3Error('NotModified');
}

/** One byte range (RFC 9110, 14.1.2). Null means the whole object: no range, or a form S3 ignores. */
function requestedRange(text: string | undefined, size: number): { start: number; end: number } | null {
  const match = /^bytes=(\d*)-(\d*)$/.exec(text?.trim() ?? '');
  if (!match || (match[1] === '' && match[2] === '')) return null;
  const [, from = '', to = ''] = match;
  const start = from === '' ? Math.max(0, size - Number(to)) : Number(from);
  const end = from === '' || to === '' ? size - 1 : Math.min(Number(to), size - 1);
  if (from !== '' && to !== '' && Number(from) > Number(to)) return null;
  if (start >= size || (from === '' && Number(to) === 0)) throw new S3Error('InvalidRange');
  return { start, end };
}

const OVERRIDES = ['content-type', 'content-language', 'expires', 'cache-control', 'content-disposition', 'content-encoding'];

/** GET and HEAD: conditions, one range, and the `response-` overrides a signed link may carry. */
export async function getObject(exchange: Exchange, bucket: Bucket): Promise<void> {
  const { req, res, key, query, method } = exchange;
  const object = bucket.get(key);
  readPreconditions(exchange, object);
  const range = requestedRange(header(req, 'range'), object.size);
  const headers: Record<string, string> = { ...object.headers };
  for (const name of OVERRIDES) {
    const value = query.get(`response-${name}`);
    if (value !== undefined) headers[name] = value;
  }
  const length = range ? range.end - range.start + 1 : object.size;
  res.writeHead(range ? 206 : 200, {
    ...headers,
    'Content-Length': length,
    'Accept-Ranges': 'bytes',
    'Last-Modified': new Date(object.lastModified).toUTCString(),
    ETag: quoted(object.etag),
    ...(range ? { 'Content-Range': `bytes ${range.start}-${range.end}/${object.size}` } : {}),
  });
  if (method === 'HEAD' || length === 0) {
    res.end();
    return;
  }
  await pipeline(bucket.read(object, range ?? undefined), res);
}

/** POST ?delete: up to 1,000 keys; a key that is not there counts as deleted. */
export async function deleteObjects(exchange: Exchange, bucket: Bucket): Promise<void> {
  const body = await readText(exchange, bucket);
  const keys = innerOf(body, 'Object').map((inner) => textOf(inner, 'Key'));
  if (keys.length === 0 || keys.length > 1000 || keys.some((key) => key === null)) throw new S3Error('MalformedXML');
  const quiet = textOf(body, 'Quiet') === 'true';
  const deleted = keys.map((key) => {
    bucket.remove(key ?? '');
    return element('Deleted', [element('Key', key ?? '')]);
  });
  sendXml(exchange.res, 200, document('DeleteResult', quiet ? [] : deleted));
}
