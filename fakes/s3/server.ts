import { randomUUID } from 'node:crypto';
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { addCorsHeaders, preflight } from './cors.ts';
import { S3Error } from './errors.ts';
import { header, sendEmpty, sendXml, type Exchange } from './exchange.ts';
import { listBuckets, listObjects } from './listing.ts';
import { abortUpload, beginUpload, completeUpload, copyPart, listParts, listUploads, putPart } from './multipart.ts';
import { copyObject, copySource, deleteObjects, getObject, putObject } from './objects.ts';
import { postObject } from './post-object.ts';
import { queryPairs, verifyRequest, type Credentials } from './signature.ts';
import { Store } from './store.ts';
import { document, element, XML_DECLARATION } from './xml.ts';

export interface FakeS3Options {
  /** Folder that keeps every object; what is there is served again after a restart. */
  dataDir: string;
  /** 0 chooses a free port. */
  port?: number;
  host?: string;
  region?: string;
  credentials?: readonly Credentials[];
  /** Buckets made at the start when missing. */
  buckets?: readonly string[];
  /** Origins whose pages may use the answers. None when left out. */
  allowedOrigins?: readonly string[];
  /** The clock that decides whether a link or policy has expired. */
  now?: () => Date;
}

export interface FakeS3 {
  url: string;
  port: number;
  close: () => Promise<void>;
}

/** Keys of the local programs only. They open nothing else. */
export const LOCAL_CREDENTIALS: Credentials = { accessKeyId: 'LOCALSTORAGEKEY', secretAccessKey: 'local-storage-secret-for-development' };

/** Parts of S3 that are not kept here. Asking for one is answered plainly instead of being taken for something else. */
const NOT_IMPLEMENTED = [
  'acl', 'accelerate', 'analytics', 'attributes', 'cors', 'encryption', 'inventory', 'legal-hold', 'lifecycle', 'logging', 'metrics',
  'notification', 'object-lock', 'ownershipControls', 'policy', 'policyStatus', 'publicAccessBlock', 'replication', 'requestPayment',
  'restore', 'retention', 'select', 'torrent', 'versionId', 'versioning', 'versions', 'website',
];

type Settings = Required<Omit<FakeS3Options, 'port' | 'host' | 'dataDir' | 'buckets'>> & { store: Store };

/** Starts the fake and answers once it listens. Every bucket is private: only a valid signature opens anything. */
export async function startFakeS3(options: FakeS3Options): Promise<FakeS3> {
  const store = new Store(options.dataDir);
  for (const name of options.buckets ?? []) if (!store.has(name)) store.create(name);
  const settings: Settings = {
    store,
    region: options.region ?? 'us-east-1',
    credentials: options.credentials ?? [LOCAL_CREDENTIALS],
    allowedOrigins: options.allowedOrigins ?? [],
    now: options.now ?? (() => new Date()),
  };
  const server = createServer((req, res) => void handle(req, res, settings));
  const host = options.host ?? '127.0.0.1';
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(options.port ?? 0, host, resolve);
  });
  const { port } = server.address() as AddressInfo;
  const close = (): Promise<void> =>
    new Promise((resolve, reject) => {
      server.close((error) => (error ? reject(error) : resolve()));
      server.closeAllConnections();
    });
  return { url: `http://${host}:${port}`, port, close };
}

async function handle(req: IncomingMessage, res: ServerResponse, settings: Settings): Promise<void> {
  const requestId = randomUUID().replaceAll('-', '').slice(0, 16).toUpperCase();
  const [rawPath = '/', rawQuery = ''] = splitOnce(req.url ?? '/', '?');
  res.setHeader('x-amz-request-id', requestId);
  res.setHeader('Server', 'local-storage');
  try {
    if (req.method === 'OPTIONS') preflight(req, res, settings.allowedOrigins);
    else {
      addCorsHeaders(req, res, settings.allowedOrigins);
      await route(req, res, rawPath, rawQuery, settings);
    }
  } catch (error) {
    refuse(req, res, error, rawPath, requestId);
  }
}

function splitOnce(text: string, separator: string): [string, string?] {
  const at = text.indexOf(separator);
  return at < 0 ? [text] : [text.slice(0, at), text.slice(at + 1)];
}

function target(rawPath: string): { bucketName: string; key: string } {
  try {
    const [bucketName, key = ''] = splitOnce(decodeURIComponent(rawPath.slice(1)), '/');
    return { bucketName, key };
  } catch {
    throw new S3Error('InvalidURI');
  }
}

async function route(req: IncomingMessage, res: ServerResponse, rawPath: string, rawQuery: string, settings: Settings): Promise<void> {
  const method = req.method ?? 'GET';
  const { bucketName, key } = target(rawPath);
  const now = settings.now();
  const { credentials, region, store } = settings;
  if (Buffer.byteLength(key) > 1024) throw new S3Error('KeyTooLongError');
  if (method === 'POST' && key === '' && bucketName !== '' && header(req, 'content-type')?.startsWith('multipart/form-data')) {
    await postObject(req, res, store.bucket(bucketName), { credentials, region, now });
    return;
  }
  const verified = verifyRequest({ method, rawPath, rawQuery, headers: req.headers }, { credentials, region, now });
  const exchange: Exchange = { req, res, method, bucketName, key, query: new Map(queryPairs(rawQuery)), verified, now };
  for (const name of NOT_IMPLEMENTED) if (exchange.query.has(name)) throw new S3Error('NotImplemented', `${name} is not implemented here.`);
  if (bucketName === '') {
    if (method !== 'GET') throw new S3Error('MethodNotAllowed');
    listBuckets(exchange, store.list());
  } else if (key === '') await routeBucket(exchange, store, region);
  else await routeObject(exchange, store);
}

async function routeBucket(exchange: Exchange, store: Store, region: string): Promise<void> {
  const { method, query, res, bucketName } = exchange;
  if (method === 'PUT') {
    store.create(bucketName);
    sendEmpty(res, 200, { Location: `/${bucketName}` });
    return;
  }
  const bucket = store.bucket(bucketName);
  if (method === 'HEAD') sendEmpty(res, 200, { 'x-amz-bucket-region': region });
  else if (method === 'DELETE') {
    store.drop(bucketName);
    sendEmpty(res, 204);
  } else if (method === 'POST' && query.has('delete')) await deleteObjects(exchange, bucket);
  else if (method !== 'GET') throw new S3Error('MethodNotAllowed');
  else if (query.has('uploads')) listUploads(exchange, bucket);
  else if (query.has('location')) {
    const constraint = document('LocationConstraint', region === 'us-east-1' ? [] : [region]);
    sendXml(res, 200, constraint);
  } else listObjects(exchange, bucket);
}

async function routeObject(exchange: Exchange, store: Store): Promise<void> {
  const { method, query, req, res, bucketName, key } = exchange;
  const bucket = store.bucket(bucketName);
  const copies = header(req, 'x-amz-copy-source') !== undefined;
  const inUpload = query.has('uploadId');
  // No object here has tags; clients that copy ask before they do.
  if (query.has('tagging')) {
    if (method !== 'GET') throw new S3Error('NotImplemented', 'tagging is not implemented here.');
    bucket.get(key);
    sendXml(res, 200, document('Tagging', [element('TagSet', [])]));
  } else if (method === 'GET' && inUpload) listParts(exchange, bucket);
  else if (method === 'GET' || method === 'HEAD') await getObject(exchange, bucket);
  else if (method === 'PUT' && inUpload && copies) await copyPart(exchange, store.bucket(copySource(exchange).bucketName), bucket);
  else if (method === 'PUT' && inUpload) await putPart(exchange, bucket);
  else if (method === 'PUT' && copies) await copyObject(exchange, store.bucket(copySource(exchange).bucketName), bucket);
  else if (method === 'PUT') await putObject(exchange, bucket);
  else if (method === 'POST' && query.has('uploads')) beginUpload(exchange, bucket);
  else if (method === 'POST' && inUpload) await completeUpload(exchange, bucket);
  else if (method === 'DELETE' && inUpload) abortUpload(exchange, bucket);
  else if (method === 'DELETE') {
    bucket.remove(key);
    sendEmpty(res, 204);
  } else throw new S3Error('MethodNotAllowed');
}

/** What is still read, and thrown away, of a body that was refused, so that its sender gets to the answer. */
const DRAIN_BYTES = 32 * 1024 ** 2;
const DRAIN_MS = 10_000;

function refuse(req: IncomingMessage, res: ServerResponse, error: unknown, resource: string, requestId: string): void {
  const known = error instanceof S3Error ? error : new S3Error('InternalError');
  if (!(error instanceof S3Error) && !req.destroyed) console.error('storage:', error);
  if (res.headersSent || res.destroyed) {
    res.destroy();
    return;
  }
  if (known.status === 304 || req.method === 'HEAD') {
    sendEmpty(res, known.status);
    return;
  }
  const xml = XML_DECLARATION + known.toXml(resource, requestId);
  res.writeHead(known.status, { 'Content-Type': 'application/xml', 'Content-Length': Buffer.byteLength(xml) });
  if (req.complete) {
    res.end(xml);
    return;
  }
  // Closing at once would reset the connection and lose the answer; the sender has it in full before we hang up.
  res.write(xml);
  let left = DRAIN_BYTES;
  const stop = setTimeout(() => req.destroy(), DRAIN_MS);
  const finish = (): void => {
    clearTimeout(stop);
    res.end();
  };
  // A reader that gave up leaves its listener behind, and with it the stream would not flow.
  req.removeAllListeners('readable');
  req.on('data', (piece: Buffer) => {
    left -= piece.length;
    if (left < 0) req.destroy();
  });
  req.once('end', finish);
  req.once('close', finish);
  req.resume();
}
