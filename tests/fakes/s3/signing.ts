import { createHash, createHmac } from 'node:crypto';
import { request } from 'node:http';

/**
 * A client of our own that signs as the S3 API reference describes, for the bodies the SDK does not send over plain
 * HTTP. It shares no code with the server under test.
 */

export interface Answer {
  status: number;
  headers: NodeJS.Dict<string | string[]>;
  body: string;
}

/** One raw HTTP request with exactly these headers (Host included) and this body. */
export function send(port: number, method: string, path: string, headers: Record<string, string>, body?: Buffer): Promise<Answer> {
  return new Promise((resolve, reject) => {
    const req = request({ host: '127.0.0.1', port, method, path, headers, setHost: !('Host' in headers) }, (res) => {
      const pieces: Buffer[] = [];
      res.on('data', (piece: Buffer) => pieces.push(piece));
      res.on('end', () => resolve({ status: res.statusCode ?? 0, headers: res.headers, body: Buffer.concat(pieces).toString('utf8') }));
      res.on('error', reject);
    });
    req.on('error', reject);
    req.end(body);
  });
}

const hmac = (key: string | Buffer, text: string): Buffer => createHmac('sha256', key).update(text).digest();
const sha = (data: string | Buffer): string => createHash('sha256').update(data).digest('hex');

export interface SigningContext {
  accessKeyId: string;
  secretAccessKey: string;
  region: string;
  amzDate: string;
}

/** Header signature of a request whose path needs no encoding. Returns the headers to send, and the seed signature. */
export function sign(context: SigningContext, method: string, path: string, headers: Record<string, string>): { headers: Record<string, string>; signature: string; key: Buffer; scope: string } {
  const day = context.amzDate.slice(0, 8);
  const scope = `${day}/${context.region}/s3/aws4_request`;
  const all: Record<string, string> = { ...headers, 'x-amz-date': context.amzDate };
  const lower = Object.entries(all).map(([name, value]) => [name.toLowerCase(), value] as const).sort((a, b) => (a[0] < b[0] ? -1 : 1));
  const names = lower.map(([name]) => name).join(';');
  const canonical = [method, path, '', ...lower.map(([name, value]) => `${name}:${value}`), '', names, all['x-amz-content-sha256'] ?? ''].join('\n');
  const key = hmac(hmac(hmac(hmac(`AWS4${context.secretAccessKey}`, day), context.region), 's3'), 'aws4_request');
  const signature = hmac(key, ['AWS4-HMAC-SHA256', context.amzDate, scope, sha(canonical)].join('\n')).toString('hex');
  const authorization = `AWS4-HMAC-SHA256 Credential=${context.accessKeyId}/${scope},SignedHeaders=${names},Signature=${signature}`;
  return { headers: { ...all, Authorization: authorization }, signature, key, scope };
}

/** The body in signed chunks. With `spoil`, the last data chunk is changed after it was signed. */
export function signedChunks(seed: { signature: string; key: Buffer; scope: string }, amzDate: string, chunks: readonly Buffer[], spoil = false): Buffer {
  let previous = seed.signature;
  const pieces = [...chunks, Buffer.alloc(0)].map((chunk, index) => {
    previous = hmac(seed.key, ['AWS4-HMAC-SHA256-PAYLOAD', amzDate, seed.scope, previous, sha(''), sha(chunk)].join('\n')).toString('hex');
    const sent = spoil && index === chunks.length - 1 ? Buffer.alloc(chunk.length, 'x') : chunk;
    return Buffer.concat([Buffer.from(`${chunk.length.toString(16)};chunk-signature=${previous}\r\n`), sent, Buffer.from('\r\n')]);
  });
  return Buffer.concat(pieces);
}
