import { readdirSync, readFileSync } from 'node:fs';
import { Readable } from 'node:stream';
import {
  AbortMultipartUploadCommand, CompleteMultipartUploadCommand, CopyObjectCommand, CreateMultipartUploadCommand, DeleteObjectCommand,
  DeleteObjectsCommand, GetObjectCommand, HeadBucketCommand, HeadObjectCommand, ListBucketsCommand, ListObjectsV2Command, PutObjectCommand,
  S3Client, UploadPartCommand,
} from '@aws-sdk/client-s3';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { startFakeS3 } from '../../../fakes/s3/server.ts';
import { BUCKET, clientFor, codeOf, KEYS, startCast, type Cast } from './cast.ts';

let cast: Cast;
beforeEach(async () => void (cast = await startCast()));
afterEach(() => cast.end());

const put = (Key: string, Body = Key, more: Partial<ConstructorParameters<typeof PutObjectCommand>[0]> = {}) =>
  cast.client.send(new PutObjectCommand({ Bucket: BUCKET, Key, Body, ...more }));

describe('an object', () => {
  test('comes back with its bytes, type and metadata, also after a restart', async () => {
    const key = 'logs/a b+c/Eiche ä(1)!.txt';
    await put(key, 'inside bark', { ContentType: 'text/plain', CacheControl: 'no-store', Metadata: { log: '7' } });
    await cast.fake.close();
    const again = await startFakeS3({ dataDir: cast.dataDir, credentials: [KEYS] });
    const client = clientFor(again.url);
    const answer = await client.send(new GetObjectCommand({ Bucket: BUCKET, Key: key }));
    expect(await answer.Body?.transformToString()).toBe('inside bark');
    expect(answer).toMatchObject({ ContentType: 'text/plain', CacheControl: 'no-store', Metadata: { log: '7' }, ContentLength: 11 });
    client.destroy();
    cast.fake.close = again.close;
  });

  test('gives a range, refuses one past its end, answers conditions', async () => {
    const { ETag } = await put('range', '0123456789');
    const get = (more: object) => cast.client.send(new GetObjectCommand({ Bucket: BUCKET, Key: 'range', ...more }));
    const middle = await get({ Range: 'bytes=2-4' });
    expect(await middle.Body?.transformToString()).toBe('234');
    expect(middle.ContentRange).toBe('bytes 2-4/10');
    expect(await (await get({ Range: 'bytes=-3' })).Body?.transformToString()).toBe('789');
    expect(await codeOf(get({ Range: 'bytes=10-' }))).toBe('InvalidRange');
    expect(await codeOf(get({ IfMatch: '"0"' }))).toBe('PreconditionFailed');
    await expect(get({ IfNoneMatch: ETag })).rejects.toMatchObject({ $metadata: { httpStatusCode: 304 } });
    const head = await cast.client.send(new HeadObjectCommand({ Bucket: BUCKET, Key: 'range' }));
    expect(head).toMatchObject({ ContentLength: 10, ETag });
  });

  test('is written once of eight racers that want it new', async () => {
    const racers = Array.from({ length: 8 }, (_, n) => put('once', `racer ${n}`, { IfNoneMatch: '*' }).then(() => 'won', (error: Error) => error.name));
    const results = await Promise.all(racers);
    expect(results.filter((result) => result === 'won')).toHaveLength(1);
    expect(results.filter((result) => result === 'PreconditionFailed')).toHaveLength(7);
  });

  test('is replaced only by someone who saw it, with If-Match', async () => {
    const { ETag } = await put('seen', 'one');
    await put('seen', 'two', { IfMatch: ETag });
    expect(await codeOf(put('seen', 'three', { IfMatch: ETag }))).toBe('PreconditionFailed');
    expect(await codeOf(put('unseen', 'x', { IfMatch: ETag }))).toBe('NoSuchKey');
  });

  test('is refused when its body is not what the client promised', async () => {
    expect(await codeOf(put('digest', 'body', { ContentMD5: Buffer.alloc(16).toString('base64') }))).toBe('BadDigest');
    expect(await codeOf(put('digest', 'body', { ChecksumCRC32: 'AAAAAA==' }))).toBe('BadDigest');
    expect(await codeOf(put('digest', 'body', { ChecksumSHA256: Buffer.alloc(32).toString('base64') }))).toBe('BadDigest');
    // CRC-32C of "123456789" is e3069283: RFC 3720, appendix B.4 style check value, as listed in common CRC catalogues.
    await put('digest', '123456789', { ChecksumCRC32C: Buffer.from('e3069283', 'hex').toString('base64') });
    expect(await codeOf(cast.client.send(new HeadObjectCommand({ Bucket: BUCKET, Key: 'digests' })))).toBe('NotFound');
  });

  test('is copied with its metadata and deleted', async () => {
    await put('from', 'copied', { ContentType: 'image/webp' });
    await cast.client.send(new CopyObjectCommand({ Bucket: BUCKET, Key: 'to', CopySource: `/${BUCKET}/from` }));
    await cast.client.send(new DeleteObjectCommand({ Bucket: BUCKET, Key: 'from' }));
    const copy = await cast.client.send(new GetObjectCommand({ Bucket: BUCKET, Key: 'to' }));
    expect(copy.ContentType).toBe('image/webp');
    expect(await copy.Body?.transformToString()).toBe('copied');
    expect(await codeOf(cast.client.send(new GetObjectCommand({ Bucket: BUCKET, Key: 'from' })))).toBe('NoSuchKey');
    expect(await codeOf(cast.client.send(new GetObjectCommand({ Bucket: 'nowhere', Key: 'from' })))).toBe('NoSuchBucket');
  });

  test('arrives in aws-chunked coding when the SDK streams with a trailing checksum', async () => {
    const streaming = new S3Client({ endpoint: cast.fake.url, region: 'us-east-1', credentials: KEYS, forcePathStyle: true, maxAttempts: 1 });
    const pieces = Array.from({ length: 40 }, (_, n) => Buffer.alloc(10_000, n));
    const body = Buffer.concat(pieces);
    await streaming.send(new PutObjectCommand({ Bucket: BUCKET, Key: 'stream', Body: Readable.from(pieces), ContentLength: body.length }));
    const answer = await cast.client.send(new GetObjectCommand({ Bucket: BUCKET, Key: 'stream' }));
    expect(Buffer.from((await answer.Body?.transformToByteArray()) ?? []).equals(body)).toBe(true);
    expect(answer.ContentEncoding).toBeUndefined();
    streaming.destroy();
  });
});

describe('a listing', () => {
  test('goes by prefix, folder and page, each key once', async () => {
    for (const key of ['a/1', 'a/2', 'a/3', 'b', 'c/1', 'd<&>']) await put(key);
    const pages: string[][] = [];
    let token: string | undefined;
    do {
      const page = await cast.client.send(new ListObjectsV2Command({ Bucket: BUCKET, Delimiter: '/', MaxKeys: 1, ContinuationToken: token }));
      pages.push([...(page.Contents ?? []).map((one) => one.Key ?? ''), ...(page.CommonPrefixes ?? []).map((one) => one.Prefix ?? '')]);
      token = page.NextContinuationToken;
    } while (token !== undefined);
    expect(pages).toEqual([['a/'], ['b'], ['c/'], ['d<&>']]);
    const inside = await cast.client.send(new ListObjectsV2Command({ Bucket: BUCKET, Prefix: 'a/', StartAfter: 'a/1' }));
    expect(inside.Contents?.map((one) => one.Key)).toEqual(['a/2', 'a/3']);
    expect(inside.IsTruncated).toBe(false);
  });

  test('is emptied by one call that names many', async () => {
    for (const key of ['x', 'y', 'z & co']) await put(key);
    const answer = await cast.client.send(new DeleteObjectsCommand({ Bucket: BUCKET, Delete: { Objects: [{ Key: 'x' }, { Key: 'z & co' }, { Key: 'never' }] } }));
    expect(answer.Deleted).toHaveLength(3);
    const rest = await cast.client.send(new ListObjectsV2Command({ Bucket: BUCKET }));
    expect(rest.Contents?.map((one) => one.Key)).toEqual(['y']);
    expect((await cast.client.send(new ListBucketsCommand({}))).Buckets?.map((one) => one.Name)).toEqual([BUCKET]);
    await cast.client.send(new HeadBucketCommand({ Bucket: BUCKET }));
  });
});

describe('an upload in parts', () => {
  const begin = async (Key: string) => (await cast.client.send(new CreateMultipartUploadCommand({ Bucket: BUCKET, Key, ContentType: 'image/jpeg' }))).UploadId ?? '';
  const part = async (Key: string, UploadId: string, PartNumber: number, Body: Buffer) =>
    ({ PartNumber, ETag: (await cast.client.send(new UploadPartCommand({ Bucket: BUCKET, Key, UploadId, PartNumber, Body }))).ETag });
  const complete = (Key: string, UploadId: string, Parts: { PartNumber: number; ETag: string | undefined }[]) =>
    cast.client.send(new CompleteMultipartUploadCommand({ Bucket: BUCKET, Key, UploadId, MultipartUpload: { Parts } }));
  const large = Buffer.alloc(5 * 1024 ** 2, 'a');

  test('is joined in the order of its parts', async () => {
    const id = await begin('big');
    const second = await part('big', id, 2, Buffer.from('the end'));
    const first = await part('big', id, 1, large);
    expect(await codeOf(complete('big', id, [second, first]))).toBe('InvalidPartOrder');
    const { ETag } = await complete('big', id, [first, second]);
    expect(ETag).toMatch(/^"[0-9a-f]{32}-2"$/);
    const head = await cast.client.send(new HeadObjectCommand({ Bucket: BUCKET, Key: 'big' }));
    expect(head).toMatchObject({ ContentLength: large.length + 7, ContentType: 'image/jpeg' });
  });

  test('refuses a small part before the last, an unknown part, and an upload that was given up', async () => {
    const id = await begin('small');
    const first = await part('small', id, 1, Buffer.from('tiny'));
    const second = await part('small', id, 2, Buffer.from('tiny'));
    expect(await codeOf(complete('small', id, [first, second]))).toBe('EntityTooSmall');
    expect(await codeOf(complete('small', id, [{ PartNumber: 3, ETag: '"0"' }]))).toBe('InvalidPart');
    await cast.client.send(new AbortMultipartUploadCommand({ Bucket: BUCKET, Key: 'small', UploadId: id }));
    expect(await codeOf(complete('small', id, [first]))).toBe('NoSuchUpload');
  });
});

test('the fake imports nothing outside its own folder', () => {
  const folder = new URL('../../../fakes/s3/', import.meta.url);
  const imports = readdirSync(folder).flatMap((file) => [...readFileSync(new URL(file, folder), 'utf8').matchAll(/from '([^']+)'/g)].map((match) => match[1]));
  expect(imports.length).toBeGreaterThan(20);
  expect(imports.filter((name) => !/^(node:[a-z/]+|\.\/[a-z0-9-]+\.ts)$/.test(name ?? ''))).toEqual([]);
});
