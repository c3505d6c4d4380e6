import { createHash, randomUUID } from 'node:crypto';
import { createReadStream, existsSync, mkdirSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { join } from 'node:path';
import { S3Error } from './errors.ts';

export interface StoredObject {
  key: string;
  /** File name under `blobs/`. Overwriting an object makes a new blob, so a reader keeps the one it opened. */
  blob: string;
  size: number;
  etag: string;
  lastModified: string;
  /** Content-Type and the other headers given back as they came, user metadata included. */
  headers: Record<string, string>;
}

export interface Received {
  blob: string;
  size: number;
  md5: string;
  sha256: string;
}

export interface Preconditions {
  ifMatch?: string | undefined;
  ifNoneMatch?: string | undefined;
}

const sha = (text: string): string => createHash('sha256').update(text).digest('hex');

/** Writes a small file so that a reader sees the old text or the new, never half. */
function writeWhole(path: string, value: unknown): void {
  const draft = `${path}.${randomUUID()}`;
  writeFileSync(draft, JSON.stringify(value));
  renameSync(draft, path);
}

/** One bucket: an index in memory, descriptions under `objects/`, contents under `blobs/`. */
export class Bucket {
  readonly name: string;
  readonly createdAt: string;
  readonly uploadsDir: string;
  private readonly dir: string;
  private readonly index = new Map<string, StoredObject>();

  constructor(dir: string, name: string) {
    this.dir = join(dir, name);
    this.name = name;
    this.uploadsDir = join(this.dir, 'uploads');
    for (const folder of ['objects', 'blobs', 'uploads']) mkdirSync(join(this.dir, folder), { recursive: true });
    const about = join(this.dir, 'bucket.json');
    if (!existsSync(about)) writeWhole(about, { createdAt: new Date().toISOString() });
    this.createdAt = (JSON.parse(readFileSync(about, 'utf8')) as { createdAt: string }).createdAt;
    this.load();
  }

  private load(): void {
    for (const file of readdirSync(join(this.dir, 'objects'))) {
      if (!file.endsWith('.json')) continue;
      const object = JSON.parse(readFileSync(join(this.dir, 'objects', file), 'utf8')) as StoredObject;
      this.index.set(object.key, object);
    }
    // Blobs that no object names were left by a process that stopped half-way through an upload.
    const named = new Set([...this.index.values()].map((object) => object.blob));
    for (const blob of readdirSync(join(this.dir, 'blobs'))) {
      if (!named.has(blob)) rmSync(join(this.dir, 'blobs', blob));
    }
  }

  get isEmpty(): boolean {
    return this.index.size === 0;
  }

  /** Every object in the byte order of its key, as S3 lists them. */
  sorted(): StoredObject[] {
    return [...this.index.values()].sort((a, b) => Buffer.compare(Buffer.from(a.key), Buffer.from(b.key)));
  }

  find(key: string): StoredObject | undefined {
    return this.index.get(key);
  }

  get(key: string): StoredObject {
    const object = this.index.get(key);
    if (!object) throw new S3Error('NoSuchKey');
    return object;
  }

  /** Streams a body to a new blob. `limit` bytes is the most it will take: past it, it stops and forgets what came. */
  async receive(source: AsyncIterable<Buffer>, limit: number): Promise<Received> {
    const blob = randomUUID();
    const path = join(this.dir, 'blobs', blob);
    const md5 = createHash('md5');
    const sha256 = createHash('sha256');
    let size = 0;
    const file = await open(path, 'wx');
    try {
      for await (const piece of source) {
        size += piece.length;
        if (size > limit) throw new S3Error('EntityTooLarge');
        md5.update(piece);
        sha256.update(piece);
        await file.write(piece);
      }
    } catch (error) {
      await file.close();
      this.discard(blob);
      throw error;
    }
    await file.close();
    return { blob, size, md5: md5.digest('hex'), sha256: sha256.digest('hex') };
  }

  discard(blob: string): void {
    rmSync(join(this.dir, 'blobs', blob), { force: true });
  }

  /** Makes a received blob an object. The preconditions are checked in the same turn, so of many racers one wins. */
  commit(object: StoredObject, preconditions: Preconditions = {}): void {
    const current = this.index.get(object.key);
    try {
      checkWrite(current, preconditions);
    } catch (error) {
      this.discard(object.blob);
      throw error;
    }
    writeWhole(this.descriptionOf(object.key), object);
    this.index.set(object.key, object);
    if (current) this.discard(current.blob);
  }

  remove(key: string): void {
    const object = this.index.get(key);
    if (!object) return;
    this.index.delete(key);
    rmSync(this.descriptionOf(key), { force: true });
    this.discard(object.blob);
  }

  /** The bytes from `start` to `end`, both included; everything when left out. */
  read(object: StoredObject, range?: { start: number; end: number }): AsyncIterable<Buffer> & NodeJS.ReadableStream {
    return createReadStream(join(this.dir, 'blobs', object.blob), range);
  }

  private descriptionOf(key: string): string {
    return join(this.dir, 'objects', `${sha(key)}.json`);
  }
}

function checkWrite(current: StoredObject | undefined, { ifMatch, ifNoneMatch }: Preconditions): void {
  if (ifNoneMatch !== undefined) {
    if (ifNoneMatch !== '*') throw new S3Error('NotImplemented', 'If-None-Match takes * when writing.');
    if (current) throw new S3Error('PreconditionFailed');
  }
  if (ifMatch !== undefined) {
    if (!current) throw new S3Error('NoSuchKey');
    if (ifMatch.replaceAll('"', '') !== current.etag) throw new S3Error('PreconditionFailed');
  }
}

/** All the buckets under one folder. What is there when the program starts is there again. */
export class Store {
  private readonly dir: string;
  private readonly buckets = new Map<string, Bucket>();

  constructor(dir: string) {
    this.dir = dir;
    mkdirSync(dir, { recursive: true });
    for (const entry of readdirSync(dir, { withFileTypes: true })) {
      if (entry.isDirectory()) this.buckets.set(entry.name, new Bucket(dir, entry.name));
    }
  }

  list(): Bucket[] {
    return [...this.buckets.values()].sort((a, b) => (a.name < b.name ? -1 : 1));
  }

  has(name: string): boolean {
    return this.buckets.has(name);
  }

  bucket(name: string): Bucket {
    const bucket = this.buckets.get(name);
    if (!bucket) throw new S3Error('NoSuchBucket');
    return bucket;
  }

  create(name: string): Bucket {
    if (!/^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/.test(name) || name.includes('..')) throw new S3Error('InvalidBucketName');
    if (this.buckets.has(name)) throw new S3Error('BucketAlreadyOwnedByYou');
    const bucket = new Bucket(this.dir, name);
    this.buckets.set(name, bucket);
    return bucket;
  }

  drop(name: string): void {
    if (!this.bucket(name).isEmpty) throw new S3Error('BucketNotEmpty');
    this.buckets.delete(name);
    rmSync(join(this.dir, name), { recursive: true, force: true });
  }
}
