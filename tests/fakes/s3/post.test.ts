import { request } from 'node:http';
import { HeadObjectCommand } from '@aws-sdk/client-s3';
import { createPresignedPost, type PresignedPost, type PresignedPostOptions } from '@aws-sdk/s3-presigned-post';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { BUCKET, clientFor, codeOf, KEYS, startCast, type Cast } from './cast.ts';

const ORIGIN = 'http://localhost:4321';
let cast: Cast;
let now: Date;
beforeEach(async () => {
  now = new Date();
  cast = await startCast({ now: () => now, allowedOrigins: [ORIGIN] });
});
afterEach(() => cast.end());

const policy = (more: Partial<PresignedPostOptions> = {}): Promise<PresignedPost> =>
  createPresignedPost(cast.client, {
    Bucket: BUCKET,
    Key: 'uploads/7/one.jpg',
    Expires: 300,
    Fields: { 'Content-Type': 'image/jpeg' },
    Conditions: [['content-length-range', 1, 1000], ['eq', '$Content-Type', 'image/jpeg']],
    ...more,
  });

async function post({ url, fields }: PresignedPost, body: string | Uint8Array<ArrayBuffer> = 'jpeg bytes', change: Record<string, string | null> = {}): Promise<{ status: number; code: string; text: string; headers: Headers }> {
  const form = new FormData();
  for (const [name, value] of Object.entries({ ...fields, ...change })) if (value !== null) form.set(name, value);
  form.set('file', new Blob([body]), 'photo.jpg');
  const answer = await fetch(url, { method: 'POST', body: form, headers: { Origin: ORIGIN } });
  const text = await answer.text();
  return { status: answer.status, code: /<Code>(\w+)<\/Code>/.exec(text)?.[1] ?? '', text, headers: answer.headers };
}

describe('a presigned form', () => {
  test('lets one file in, with the type the policy says', async () => {
    const answer = await post(await policy());
    expect(answer.status).toBe(204);
    const head = await cast.client.send(new HeadObjectCommand({ Bucket: BUCKET, Key: 'uploads/7/one.jpg' }));
    expect(head).toMatchObject({ ContentLength: 10, ContentType: 'image/jpeg', ETag: answer.headers.get('etag') });
  });

  test('answers with the key when asked for 201, and puts the file name into it', async () => {
    const open = await policy({ Key: 'uploads/7/${filename}', Fields: { 'Content-Type': 'image/jpeg', success_action_status: '201' } });
    const answer = await post(open);
    expect(answer.status).toBe(201);
    expect(answer.text).toContain('<Key>uploads/7/photo.jpg</Key>');
  });

  test('refuses another key, another type, a missing or an added field', async () => {
    const open = await policy();
    expect(await post(open, 'x', { key: 'uploads/8/one.jpg' })).toMatchObject({ status: 403, code: 'AccessDenied' });
    expect(await post(open, 'x', { 'Content-Type': 'image/svg+xml' })).toMatchObject({ status: 403, code: 'AccessDenied' });
    expect(await post(open, 'x', { 'Content-Type': null })).toMatchObject({ status: 403, code: 'AccessDenied' });
    const added = await post(open, 'x', { 'x-amz-meta-note': 'hello' });
    expect(added.text).toContain('Extra input fields: x-amz-meta-note');
    expect((await post(open, 'x', { 'x-ignore-note': 'hello' })).status).toBe(204);
  });

  test('refuses a file too large or too small, and keeps nothing of it', async () => {
    const open = await policy();
    expect(await post(open, new Uint8Array(1001))).toMatchObject({ status: 400, code: 'EntityTooLarge' });
    expect(await post(open, '')).toMatchObject({ status: 400, code: 'EntityTooSmall' });
    expect(await codeOf(cast.client.send(new HeadObjectCommand({ Bucket: BUCKET, Key: 'uploads/7/one.jpg' })))).toBe('NotFound');
    expect((await post(open, new Uint8Array(1000))).status).toBe(204);
  });

  test('stops a large file early instead of reading it all', async () => {
    const { url, fields } = await policy();
    const boundary = 'edge';
    const head = Object.entries(fields).map(([name, value]) => `--${boundary}\r\nContent-Disposition: form-data; name="${name}"\r\n\r\n${value}\r\n`).join('');
    const start = `${head}--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="a.jpg"\r\n\r\n`;
    let sent = 0;
    const whole = 400 * 1024 ** 2;
    const outcome = await new Promise<string>((resolve) => {
      const req = request(url, { method: 'POST', headers: { 'Content-Type': `multipart/form-data; boundary=${boundary}`, 'Transfer-Encoding': 'chunked' } });
      let seen = 'nothing';
      req.on('response', (res) => {
        res.setEncoding('utf8');
        res.on('data', (text: string) => (seen = /<Code>(\w+)/.exec(text)?.[1] ?? seen));
        res.on('error', () => resolve(seen));
        res.on('close', () => resolve(seen));
      });
      req.on('error', () => resolve(seen));
      const piece = Buffer.alloc(1024 ** 2);
      const pump = (): void => {
        while (sent < whole && !req.destroyed) {
          sent += piece.length;
          if (!req.write(piece)) return void req.once('drain', pump);
        }
      };
      req.write(start);
      pump();
    });
    expect(outcome).toBe('EntityTooLarge');
    expect(sent).toBeLessThan(whole / 2);
  });

  test('is worth nothing after its time, with a changed policy, or signed by someone else', async () => {
    const open = await policy();
    const wider = Buffer.from(JSON.stringify({ expiration: '2099-01-01T00:00:00Z', conditions: [] })).toString('base64');
    expect(await post(open, 'x', { Policy: wider })).toMatchObject({ status: 403, code: 'SignatureDoesNotMatch' });
    expect(await post(open, 'x', { Policy: null })).toMatchObject({ status: 403, code: 'AccessDenied' });
    const stranger = clientFor(cast.fake.url, { ...KEYS, secretAccessKey: 'guess' });
    const forged = await createPresignedPost(stranger, { Bucket: BUCKET, Key: 'k' });
    expect(await post(forged)).toMatchObject({ status: 403, code: 'SignatureDoesNotMatch' });
    stranger.destroy();
    now = new Date(now.getTime() + 301_000);
    expect((await post(open)).text).toContain('Policy expired');
  });

  test('is refused in words when it is not a form', async () => {
    const answer = await fetch(`${cast.fake.url}/${BUCKET}`, { method: 'POST', body: 'x', headers: { 'Content-Type': 'multipart/form-data; boundary=b' } });
    expect([answer.status, await answer.text()]).toEqual([400, expect.stringContaining('MalformedPOSTRequest')]);
  });
});

describe('other origins', () => {
  const ask = (origin: string) => fetch(`${cast.fake.url}/${BUCKET}`, { method: 'OPTIONS', headers: { Origin: origin, 'Access-Control-Request-Method': 'POST', 'Access-Control-Request-Headers': 'x-requested' } });

  test('the configured one may ask and read, another may not', async () => {
    const yes = await ask(ORIGIN);
    expect([yes.status, yes.headers.get('access-control-allow-origin'), yes.headers.get('access-control-allow-headers')]).toEqual([200, ORIGIN, 'x-requested']);
    const no = await ask('http://elsewhere.example');
    expect([no.status, no.headers.get('access-control-allow-origin')]).toEqual([403, null]);
    expect((await post(await policy())).headers.get('access-control-allow-origin')).toBe(ORIGIN);
    const get = await fetch(`${cast.fake.url}/${BUCKET}/x`, { headers: { Origin: 'http://elsewhere.example' } });
    expect(get.headers.get('access-control-allow-origin')).toBeNull();
    expect(get.headers.get('set-cookie')).toBeNull();
  });
});
