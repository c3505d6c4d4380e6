import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { S3Client } from '@aws-sdk/client-s3';
import { startFakeS3, type FakeS3, type FakeS3Options } from '../../../fakes/s3/server.ts';

export const KEYS = { accessKeyId: 'TESTKEY', secretAccessKey: 'test-secret' };
export const BUCKET = 'photos';

export interface Cast {
  fake: FakeS3;
  client: S3Client;
  dataDir: string;
  end: () => Promise<void>;
}

export function clientFor(url: string, credentials = KEYS): S3Client {
  return new S3Client({ endpoint: url, region: 'us-east-1', credentials, forcePathStyle: true, maxAttempts: 1, requestChecksumCalculation: 'WHEN_REQUIRED', responseChecksumValidation: 'WHEN_REQUIRED' });
}

/** A fake with one bucket on a free port, and the real SDK's client for it. */
export async function startCast(options: Partial<FakeS3Options> = {}): Promise<Cast> {
  const dataDir = options.dataDir ?? (await mkdtemp(join(tmpdir(), 'storage-')));
  const fake = await startFakeS3({ credentials: [KEYS], buckets: [BUCKET], ...options, dataDir });
  const client = clientFor(fake.url);
  const end = async (): Promise<void> => {
    client.destroy();
    await fake.close();
    await rm(dataDir, { recursive: true, force: true });
  };
  return { fake, client, dataDir, end };
}

/** The error code of a refused SDK call; fails when the call was not refused. */
export async function codeOf(call: Promise<unknown>): Promise<string> {
  try {
    await call;
  } catch (error) {
    return (error as Error).name;
  }
  throw new Error('The call was expected to be refused.');
}
