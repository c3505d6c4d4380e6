import type { IncomingMessage, ServerResponse } from 'node:http';
import { S3Error } from './errors.ts';
import { header, keptHeaders, rawBody, sendEmpty, sendXml } from './exchange.ts';
import { readPostForm } from './form.ts';
import { enforcePolicy } from './policy.ts';
import type { Credentials } from './signature.ts';
import type { Bucket } from './store.ts';
import { document, element } from './xml.ts';

interface PostOptions {
  credentials: readonly Credentials[];
  region: string;
  now: Date;
}

/** The end of a form: the closing delimiter and a little slack. What is more than this past the limit is certainly file. */
const FORM_SLACK = 64 * 1024;

/** A browser's form upload: nothing but the signed policy authorises it. */
export async function postObject(req: IncomingMessage, res: ServerResponse, bucket: Bucket, options: PostOptions): Promise<void> {
  const form = await readPostForm(header(req, 'content-type'), rawBody(req));
  const { fields } = form;
  const key = (fields.get('key') ?? '').replaceAll('${filename}', form.fileName);
  if (key === '') throw new S3Error('InvalidArgument', 'Bucket POST must contain a field named "key".');
  if (Buffer.byteLength(key) > 1024) throw new S3Error('KeyTooLongError');
  fields.set('key', key);
  const size = enforcePolicy(fields, { ...options, bucketName: bucket.name });
  // The declared length already shows that the file cannot fit: nothing of it is read.
  if (Number(header(req, 'content-length') ?? 0) > size.most + FORM_SLACK) throw new S3Error('EntityTooLarge');
  const received = await bucket.receive(form.file, size.most);
  if (received.size < size.least) {
    bucket.discard(received.blob);
    throw new S3Error('EntityTooSmall');
  }
  const headers = keptHeaders((name) => fields.get(name), [...fields.keys()]);
  bucket.commit({ key, blob: received.blob, size: received.size, etag: received.md5, lastModified: options.now.toISOString(), headers });
  answer(req, res, bucket, fields, key, `"${received.md5}"`);
}

function answer(req: IncomingMessage, res: ServerResponse, bucket: Bucket, fields: ReadonlyMap<string, string>, key: string, etag: string): void {
  const location = `http://${header(req, 'host') ?? ''}/${bucket.name}/${key.split('/').map(encodeURIComponent).join('/')}`;
  const redirect = fields.get('success_action_redirect') ?? fields.get('redirect');
  if (redirect !== undefined && URL.canParse(redirect)) {
    const url = new URL(redirect);
    for (const [name, value] of Object.entries({ bucket: bucket.name, key, etag })) url.searchParams.set(name, value);
    sendEmpty(res, 303, { Location: url.href });
    return;
  }
  const status = Number(fields.get('success_action_status'));
  res.setHeader('ETag', etag);
  res.setHeader('Location', location);
  if (status === 201) {
    sendXml(res, 201, document('PostResponse', [element('Location', location), element('Bucket', bucket.name), element('Key', key), element('ETag', etag)]));
    return;
  }
  sendEmpty(res, status === 200 ? 200 : 204);
}
