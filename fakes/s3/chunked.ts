import { createHash } from 'node:crypto';
import { S3Error } from './errors.ts';
import { hmac, sameSignature, sha256Hex, type Verified } from './signature.ts';

const EMPTY = sha256Hex('');
const MAX_HEADER_LINE = 8 * 1024;

/**
 * Reads a body in the `aws-chunked` coding and yields its plain bytes. With `signed`, every chunk's signature (chained
 * to the one before, starting from the request's own) is checked; trailers are collected, and their signature checked
 * where the payload name asks for one.
 */
export class ChunkedBody {
  readonly trailers = new Map<string, string>();
  private buffer: Buffer = Buffer.alloc(0);
  private state: 'size' | 'data' | 'data-end' | 'trailers' | 'done' = 'size';
  private left = 0;
  private chunkHash = createHash('sha256');
  private claimed = '';
  private previous: string;
  private trailerSignature: string | null = null;
  private readonly verified: Verified;
  private readonly signed: boolean;
  private readonly signedTrailer: boolean;

  constructor(verified: Verified) {
    this.verified = verified;
    this.previous = verified.signature;
    this.signed = verified.payload.startsWith('STREAMING-AWS4-HMAC-SHA256-PAYLOAD');
    this.signedTrailer = this.signed && verified.payload.endsWith('-TRAILER');
  }

  async *decode(source: AsyncIterable<Buffer>): AsyncGenerator<Buffer> {
    for await (const piece of source) {
      this.buffer = this.buffer.length === 0 ? piece : Buffer.concat([this.buffer, piece]);
      yield* this.take();
    }
    if (this.state !== 'done') throw new S3Error('IncompleteBody');
  }

  private *take(): Generator<Buffer> {
    for (;;) {
      if (this.state === 'data') {
        if (this.buffer.length === 0) return;
        const part = this.buffer.subarray(0, this.left);
        this.buffer = this.buffer.subarray(part.length);
        this.left -= part.length;
        if (this.signed) this.chunkHash.update(part);
        if (this.left === 0) this.state = 'data-end';
        yield part;
        continue;
      }
      if (this.state === 'done') {
        if (this.buffer.length > 0) throw new S3Error('InvalidRequest', 'There is more after the last chunk.');
        return;
      }
      const line = this.line();
      if (line === null) return;
      if (this.state === 'size') this.startChunk(line);
      else if (this.state === 'data-end') this.endChunk(line);
      else this.trailer(line);
    }
  }

  private line(): string | null {
    const end = this.buffer.indexOf('\r\n');
    if (end > MAX_HEADER_LINE || (end < 0 && this.buffer.length > MAX_HEADER_LINE)) throw new S3Error('InvalidRequest', 'A chunk header is too long.');
    if (end < 0) return null;
    const line = this.buffer.subarray(0, end).toString('latin1');
    this.buffer = this.buffer.subarray(end + 2);
    return line;
  }

  private startChunk(line: string): void {
    const match = /^([0-9a-fA-F]{1,12})(?:;chunk-signature=([0-9a-f]{64}))?$/.exec(line);
    if (!match) throw new S3Error('InvalidRequest', 'A chunk header is not well formed.');
    this.left = parseInt(match[1] ?? '', 16);
    this.claimed = match[2] ?? '';
    this.chunkHash = createHash('sha256');
    if (this.left > 0) {
      this.state = 'data';
      return;
    }
    this.checkChunk();
    this.state = 'trailers';
  }

  private endChunk(line: string): void {
    if (line !== '') throw new S3Error('InvalidRequest', 'A chunk is longer than its header says.');
    this.checkChunk();
    this.state = 'size';
  }

  private checkChunk(): void {
    if (!this.signed) return;
    const { amzDate, scope, signingKey } = this.verified;
    const text = ['AWS4-HMAC-SHA256-PAYLOAD', amzDate, scope, this.previous, EMPTY, this.chunkHash.digest('hex')].join('\n');
    const expected = hmac(signingKey, text).toString('hex');
    if (!sameSignature(this.claimed, expected)) throw new S3Error('SignatureDoesNotMatch');
    this.previous = expected;
  }

  private trailer(line: string): void {
    if (line === '') {
      if (this.signedTrailer) this.checkTrailers();
      this.state = 'done';
      return;
    }
    const at = line.indexOf(':');
    if (at < 1) throw new S3Error('InvalidRequest', 'A trailer is not well formed.');
    const name = line.slice(0, at).trim().toLowerCase();
    const value = line.slice(at + 1).trim();
    if (name === 'x-amz-trailer-signature') this.trailerSignature = value;
    else this.trailers.set(name, value);
  }

  private checkTrailers(): void {
    const { amzDate, scope, signingKey } = this.verified;
    const canonical = [...this.trailers].sort().map(([name, value]) => `${name}:${value}\n`).join('');
    const text = ['AWS4-HMAC-SHA256-TRAILER', amzDate, scope, this.previous, sha256Hex(canonical)].join('\n');
    const expected = hmac(signingKey, text).toString('hex');
    if (!sameSignature(this.trailerSignature ?? '', expected)) throw new S3Error('SignatureDoesNotMatch');
  }
}
