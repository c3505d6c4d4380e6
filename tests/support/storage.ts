import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll } from 'vitest';
import { startFakeS3 } from '../../fakes/s3/server.ts';

/** Starts object storage at the address this file's environment names, with its keys and bucket, until the file's checks end. */
export async function startStorage(): Promise<void> {
  const { env } = await import('~/server/env.ts');
  const settings = env();
  const dataDir = await mkdtemp(join(tmpdir(), 'photos-'));
  const fake = await startFakeS3({
    dataDir,
    port: Number(new URL(settings.STORAGE_ENDPOINT).port),
    credentials: [{ accessKeyId: settings.STORAGE_ACCESS_KEY, secretAccessKey: settings.STORAGE_SECRET_KEY }],
    buckets: [settings.STORAGE_BUCKET],
  });
  afterAll(async () => {
    await fake.close();
    await rm(dataDir, { recursive: true, force: true });
  });
}

/** Sends a file as a browser does, with the form that we signed. */
export async function sendFile(upload: { readonly url: string; readonly fields: Readonly<Record<string, string>> }, bytes: Buffer): Promise<Response> {
  const form = new FormData();
  for (const [name, value] of Object.entries(upload.fields)) form.set(name, value);
  form.set('file', new Blob([new Uint8Array(bytes)]), 'photo');
  return fetch(upload.url, { method: 'POST', body: form });
}
