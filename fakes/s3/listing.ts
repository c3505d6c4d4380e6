import { S3Error } from './errors.ts';
import { sendXml, type Exchange } from './exchange.ts';
import type { Bucket, StoredObject } from './store.ts';
import { document, element } from './xml.ts';

interface Page {
  objects: StoredObject[];
  prefixes: string[];
  /** The last key or prefix given, when there is more after it. */
  next: string | null;
}

function pageOf(bucket: Bucket, prefix: string, delimiter: string, after: string, most: number): Page {
  const page: Page = { objects: [], prefixes: [], next: null };
  let last = after;
  for (const object of bucket.sorted()) {
    const { key } = object;
    if (!key.startsWith(prefix) || Buffer.compare(Buffer.from(key), Buffer.from(last)) <= 0) continue;
    const cut = delimiter === '' ? -1 : key.indexOf(delimiter, prefix.length);
    const common = cut < 0 ? null : key.slice(0, cut + delimiter.length);
    // A prefix already given stands for all its keys, also when it ended the page before.
    if (common !== null && common === last) continue;
    if (page.objects.length + page.prefixes.length === most) {
      page.next = last;
      break;
    }
    if (common === null) page.objects.push(object);
    else page.prefixes.push(common);
    last = common ?? key;
  }
  return page;
}

/** GET on a bucket: version 2 of the listing, and the older one that some clients still ask for. */
export function listObjects({ res, query }: Exchange, bucket: Bucket): void {
  const get = (name: string): string => query.get(name) ?? '';
  const asked = query.get('max-keys');
  if (asked !== undefined && !/^\d{1,10}$/.test(asked)) throw new S3Error('InvalidArgument', 'Argument max-keys must be a whole number');
  const most = Math.min(1000, asked === undefined ? 1000 : Number(asked));
  const second = get('list-type') === '2';
  const token = query.get('continuation-token');
  const after = second ? (token === undefined ? get('start-after') : Buffer.from(token, 'base64url').toString('utf8')) : get('marker');
  if (token === '') throw new S3Error('InvalidArgument', 'The continuation token provided is incorrect');
  const { objects, prefixes, next } = most === 0 ? { objects: [], prefixes: [], next: null } : pageOf(bucket, get('prefix'), get('delimiter'), after, most);
  const shown = (text: string): string => (get('encoding-type') === 'url' ? encodeURIComponent(text).replaceAll('%2F', '/') : text);

  const children = [
    element('Name', bucket.name),
    element('Prefix', shown(get('prefix'))),
    ...(query.has('delimiter') ? [element('Delimiter', shown(get('delimiter')))] : []),
    element('MaxKeys', most),
    ...(query.has('encoding-type') ? [element('EncodingType', get('encoding-type'))] : []),
    element('IsTruncated', next !== null),
    ...(second
      ? [
          element('KeyCount', objects.length + prefixes.length),
          ...(token !== undefined ? [element('ContinuationToken', token)] : []),
          ...(query.has('start-after') ? [element('StartAfter', shown(get('start-after')))] : []),
          ...(next !== null ? [element('NextContinuationToken', Buffer.from(next).toString('base64url'))] : []),
        ]
      : [element('Marker', shown(after)), ...(next !== null ? [element('NextMarker', shown(next))] : [])]),
    ...objects.map((object) =>
      element('Contents', [
        element('Key', shown(object.key)),
        element('LastModified', object.lastModified),
        element('ETag', `"${object.etag}"`),
        element('Size', object.size),
        element('StorageClass', 'STANDARD'),
      ]),
    ),
    ...prefixes.map((prefix) => element('CommonPrefixes', [element('Prefix', shown(prefix))])),
  ];
  sendXml(res, 200, document('ListBucketResult', children));
}

export function listBuckets({ res }: Exchange, buckets: readonly Bucket[]): void {
  const rows = buckets.map((bucket) => element('Bucket', [element('Name', bucket.name), element('CreationDate', bucket.createdAt)]));
  sendXml(res, 200, document('ListAllMyBucketsResult', [
    element('Owner', [element('ID', 'local'), element('DisplayName', 'local')]),
    element('Buckets', rows),
  ]));
}
