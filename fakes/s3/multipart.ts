import { createHash, randomUUID } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync, createReadStream } from 'node:fs';
import { join } from 'node:path';
import { S3Error } from './errors.ts';
import { header, keptHeaders, readText, receiveBody, sendEmpty, sendXml, type Exchange } from './exchange.ts';
import { copySource, writePreconditions } from './objects.ts';
import type { Bucket } from './store.ts';
import { document, element, innerOf, textOf } from './xml.ts';

/** Every part but the last has at least this many bytes (S3 user guide, "Multipart upload limits"). */
const LEAST_PART = 5 * 1024 ** 2;

interface Upload {
  key: string;
  initiated: string;
  headers: Record<string, string>;
}

interface Part {
  number: number;
  etag: string;
  size: number;
  modified: string;
}

function folderOf(bucket: Bucket, id: string): string {
  return join(bucket.uploadsDir, id);
}

function uploadOf({ key, query }: Exchange, bucket: Bucket): { id: string; folder: string; upload: Upload } {
  const id = query.get('uploadId') ?? '';
  const folder = folderOf(bucket, id);
  const file = join(folder, 'upload.json');
  if (!/^[0-9a-f-]{36}$/.test(id) || !existsSync(file)) throw new S3Error('NoSuchUpload');
  const upload = JSON.parse(readFileSync(file, 'utf8')) as Upload;
  if (upload.key !== key) throw new S3Error('NoSuchUpload');
  return { id, folder, upload };
}

function partsIn(folder: string): Part[] {
  return readdirSync(folder)
    .filter((name) => /^part-\d+\.json$/.test(name))
    .map((name) => JSON.parse(readFileSync(join(folder, name), 'utf8')) as Part)
    .sort((a, b) => a.number - b.number);
}

export function beginUpload({ req, res, key, now }: Exchange, bucket: Bucket): void {
  const id = randomUUID();
  mkdirSync(folderOf(bucket, id));
  const upload: Upload = {
    key,
    initiated: now.toISOString(),
    headers: keptHeaders((name) => header(req, name), Object.keys(req.headers)),
  };
  writeFileSync(join(folderOf(bucket, id), 'upload.json'), JSON.stringify(upload));
  sendXml(res, 200, document('InitiateMultipartUploadResult', [element('Bucket', bucket.name), element('Key', key), element('UploadId', id)]));
}

function partNumber({ query }: Exchange): number {
  const number = Number(query.get('partNumber'));
  if (!Number.isInteger(number) || number < 1 || number > 10_000) {
    throw new S3Error('InvalidArgument', 'Part number must be an integer between 1 and 10000, inclusive');
  }
  return number;
}

function keepPart(bucket: Bucket, folder: string, blob: string, part: Part): void {
  renameSync(join(bucket.uploadsDir, '..', 'blobs', blob), join(folder, `part-${part.number}.bin`));
  writeFileSync(join(folder, `part-${part.number}.json`), JSON.stringify(part));
}

export async function putPart(exchange: Exchange, bucket: Bucket): Promise<void> {
  const { folder } = uploadOf(exchange, bucket);
  const number = partNumber(exchange);
  const { blob, size, md5, echo } = await receiveBody(exchange, bucket);
  keepPart(bucket, folder, blob, { number, etag: md5, size, modified: exchange.now.toISOString() });
  sendEmpty(exchange.res, 200, { ETag: `"${md5}"`, ...echo });
}

export async function copyPart(exchange: Exchange, from: Bucket, bucket: Bucket): Promise<void> {
  const { folder } = uploadOf(exchange, bucket);
  const number = partNumber(exchange);
  const source = from.get(copySource(exchange).key);
  const asked = header(exchange.req, 'x-amz-copy-source-range');
  const match = /^bytes=(\d+)-(\d+)$/.exec(asked ?? '');
  if (asked !== undefined && !match) throw new S3Error('InvalidArgument', 'The copy range must be bytes=FIRST-LAST.');
  const range = match ? { start: Number(match[1]), end: Number(match[2]) } : undefined;
  if (range && (range.start > range.end || range.end >= source.size)) throw new S3Error('InvalidRange');
  const { blob, size, md5 } = await bucket.receive(from.read(source, range), Infinity);
  const modified = exchange.now.toISOString();
  keepPart(bucket, folder, blob, { number, etag: md5, size, modified });
  sendXml(exchange.res, 200, document('CopyPartResult', [element('LastModified', modified), element('ETag', `"${md5}"`)]));
}

/** The parts a client names, in its order, each found and matched; the rules of size and order checked. */
function chosenParts(body: string, folder: string): Part[] {
  const asked = innerOf(body, 'Part').map((inner) => ({
    number: Number(textOf(inner, 'PartNumber')),
    etag: (textOf(inner, 'ETag') ?? '').replaceAll('"', ''),
  }));
  if (asked.length === 0) throw new S3Error('MalformedXML');
  if (asked.some(({ number }, index) => index > 0 && number <= (asked[index - 1]?.number ?? 0))) throw new S3Error('InvalidPartOrder');
  const present = new Map(partsIn(folder).map((part) => [part.number, part]));
  return asked.map(({ number, etag }, index) => {
    const part = present.get(number);
    if (!part || part.etag !== etag) throw new S3Error('InvalidPart');
    if (index < asked.length - 1 && part.size < LEAST_PART) throw new S3Error('EntityTooSmall');
    return part;
  });
}

async function* joined(folder: string, parts: readonly Part[]): AsyncGenerator<Buffer> {
  for (const part of parts) yield* createReadStream(join(folder, `part-${part.number}.bin`)) as AsyncIterable<Buffer>;
}

export async function completeUpload(exchange: Exchange, bucket: Bucket): Promise<void> {
  const { folder, upload } = uploadOf(exchange, bucket);
  const parts = chosenParts(await readText(exchange, bucket), folder);
  const { blob, size } = await bucket.receive(joined(folder, parts), Infinity);
  const digests = Buffer.concat(parts.map((part) => Buffer.from(part.etag, 'hex')));
  const etag = `${createHash('md5').update(digests).digest('hex')}-${parts.length}`;
  const object = { key: upload.key, blob, size, etag, lastModified: exchange.now.toISOString(), headers: upload.headers };
  bucket.commit(object, writePreconditions(exchange));
  rmSync(folder, { recursive: true, force: true });
  sendXml(exchange.res, 200, document('CompleteMultipartUploadResult', [
    element('Location', `/${bucket.name}/${upload.key}`),
    element('Bucket', bucket.name),
    element('Key', upload.key),
    element('ETag', `"${etag}"`),
  ]));
}

export function abortUpload(exchange: Exchange, bucket: Bucket): void {
  rmSync(uploadOf(exchange, bucket).folder, { recursive: true, force: true });
  sendEmpty(exchange.res, 204);
}

export function listParts(exchange: Exchange, bucket: Bucket): void {
  const { id, folder, upload } = uploadOf(exchange, bucket);
  const rows = partsIn(folder).map((part) =>
    element('Part', [
      element('PartNumber', part.number),
      element('LastModified', part.modified),
      element('ETag', `"${part.etag}"`),
      element('Size', part.size),
    ]),
  );
  sendXml(exchange.res, 200, document('ListPartsResult', [
    element('Bucket', bucket.name),
    element('Key', upload.key),
    element('UploadId', id),
    element('IsTruncated', false),
    ...rows,
  ]));
}

export function listUploads({ res }: Exchange, bucket: Bucket): void {
  const rows = readdirSync(bucket.uploadsDir).map((id) => {
    const upload = JSON.parse(readFileSync(join(folderOf(bucket, id), 'upload.json'), 'utf8')) as Upload;
    return element('Upload', [element('Key', upload.key), element('UploadId', id), element('Initiated', upload.initiated)]);
  });
  sendXml(res, 200, document('ListMultipartUploadsResult', [element('Bucket', bucket.name), element('IsTruncated', false), ...rows]));
}
