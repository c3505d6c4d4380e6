import { DeleteObjectsCommand, GetObjectCommand, HeadBucketCommand, HeadObjectCommand, NoSuchKey, NotFound, PutObjectCommand, S3Client } from '@aws-sdk/client-s3';
import { createPresignedPost } from '@aws-sdk/s3-presigned-post';
import { env } from '../env.ts';

/** Object storage. Everything in it is private; browsers only ever send to it, with a form that we signed. */

/** The object is not there. */
export class MissingObject extends Error {}

/** The object is larger than the caller takes. */
export class ObjectTooLarge extends Error {}

function clientFor(endpoint: string): S3Client {
  return new S3Client({
    endpoint,
    region: env().STORAGE_REGION,
    credentials: { accessKeyId: env().STORAGE_ACCESS_KEY, secretAccessKey: env().STORAGE_SECRET_KEY },
    forcePathStyle: true,
    maxAttempts: 3,
    // Not every store that speaks this protocol knows the newer checksums.
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  });
}

let inside: S3Client | undefined;
let outside: S3Client | undefined;
/** Asks storage from this machine. */
const client = (): S3Client => (inside ??= clientFor(env().STORAGE_ENDPOINT));
/** Signs for browsers, which may know storage by another address. */
const publicClient = (): S3Client => (outside ??= clientFor(env().STORAGE_PUBLIC_ENDPOINT));

export interface UploadForm {
  readonly url: string;
  /** Form fields, to be sent before the file's own field, which is named `file`. */
  readonly fields: Readonly<Record<string, string>>;
}

/** How long an upload may take to begin, in seconds. */
export const uploadFormSeconds = 3600;

/**
 * A form that lets a browser store one object under exactly this key, of this type and at most this size. Nothing is sent.
 * @param thenTo where storage sends the browser afterwards, for a form without a script; without it storage answers 204
 */
export async function uploadForm(key: string, type: string, mostBytes: number, thenTo?: string): Promise<UploadForm> {
  const after = thenTo === undefined ? { success_action_status: '204' } : { success_action_redirect: thenTo };
  return createPresignedPost(publicClient(), {
    Bucket: env().STORAGE_BUCKET,
    Key: key,
    Expires: uploadFormSeconds,
    Fields: { 'Content-Type': type, ...after },
    Conditions: [['content-length-range', 1, mostBytes], ['eq', '$Content-Type', type]],
  });
}

const isMissing = (error: unknown): boolean => error instanceof NoSuchKey || error instanceof NotFound || (error instanceof Error && (error.name === 'NoSuchKey' || error.name === 'NotFound'));

/**
 * A whole object in memory.
 * @throws MissingObject, ObjectTooLarge (asked before reading), or the store's own error, which is worth another try.
 */
export async function readObject(key: string, mostBytes: number): Promise<Buffer> {
  const where = { Bucket: env().STORAGE_BUCKET, Key: key };
  try {
    const head = await client().send(new HeadObjectCommand(where));
    if ((head.ContentLength ?? 0) > mostBytes) throw new ObjectTooLarge(key);
    const { Body } = await client().send(new GetObjectCommand({ ...where, IfMatch: head.ETag }));
    return Buffer.from((await Body?.transformToByteArray()) ?? []);
  } catch (error) {
    throw isMissing(error) ? new MissingObject(key) : error;
  }
}

export interface OpenObject {
  readonly body: ReadableStream;
  readonly bytes: number;
}

/** An object as a stream, to be passed on. @throws MissingObject */
export async function openObject(key: string): Promise<OpenObject> {
  try {
    const { Body, ContentLength } = await client().send(new GetObjectCommand({ Bucket: env().STORAGE_BUCKET, Key: key }));
    if (!Body) throw new MissingObject(key);
    return { body: Body.transformToWebStream(), bytes: ContentLength ?? 0 };
  } catch (error) {
    throw isMissing(error) ? new MissingObject(key) : error;
  }
}

/** Stores an object, replacing what was under the key. */
export async function writeObject(key: string, body: Buffer, type: string): Promise<void> {
  await client().send(new PutObjectCommand({ Bucket: env().STORAGE_BUCKET, Key: key, Body: body, ContentType: type }));
}

/** Deletes objects; one that is not there counts as deleted. */
export async function removeObjects(keys: readonly string[]): Promise<void> {
  if (keys.length === 0) return;
  const answer = await client().send(new DeleteObjectsCommand({ Bucket: env().STORAGE_BUCKET, Delete: { Quiet: true, Objects: keys.map((Key) => ({ Key })) } }));
  const [failed] = answer.Errors ?? [];
  if (failed) throw new Error(`storage kept ${failed.Key}: ${failed.Message}`);
}

/** Whether storage answers and knows our key and bucket, for the health page. */
export async function storageAnswers(): Promise<boolean> {
  try {
    await client().send(new HeadBucketCommand({ Bucket: env().STORAGE_BUCKET }), { abortSignal: AbortSignal.timeout(2000) });
    return true;
  } catch {
    return false;
  }
}
