import { S3Error } from './errors.ts';

/** "The form data, file excluded, is at most 20 KB" (S3 API reference, POST Object). */
const MAX_FORM = 20 * 1024;

export interface PostForm {
  /** Names in lower case, as S3 compares them. */
  fields: Map<string, string>;
  fileName: string;
  fileType: string | undefined;
  file: AsyncIterable<Buffer>;
}

function boundaryOf(contentType: string | undefined): string {
  const match = /^multipart\/form-data\s*;.*?boundary=(?:"([^"]{1,200})"|([^\s;]{1,200}))/i.exec(contentType ?? '');
  const boundary = match?.[1] ?? match?.[2];
  if (!boundary) throw new S3Error('MalformedPOSTRequest');
  return boundary;
}

/** A reader over the body that can stop at a delimiter without holding more than a piece in memory. */
class Reader {
  private buffer: Buffer = Buffer.alloc(0);
  private readonly source: AsyncIterator<Buffer>;

  constructor(source: AsyncIterable<Buffer>) {
    this.source = source[Symbol.asyncIterator]();
  }

  private async more(): Promise<void> {
    const { value, done } = await this.source.next();
    if (done) throw new S3Error('MalformedPOSTRequest');
    this.buffer = this.buffer.length === 0 ? value : Buffer.concat([this.buffer, value]);
  }

  async take(length: number): Promise<string> {
    while (this.buffer.length < length) await this.more();
    const taken = this.buffer.subarray(0, length).toString('utf8');
    this.buffer = this.buffer.subarray(length);
    return taken;
  }

  /** Everything before the delimiter, which is consumed too. */
  async *until(delimiter: Buffer): AsyncGenerator<Buffer> {
    for (;;) {
      const at = this.buffer.indexOf(delimiter);
      if (at >= 0) {
        const last = this.buffer.subarray(0, at);
        this.buffer = this.buffer.subarray(at + delimiter.length);
        if (last.length > 0) yield last;
        return;
      }
      const safe = this.buffer.length - delimiter.length + 1;
      if (safe > 0) {
        const piece = this.buffer.subarray(0, safe);
        this.buffer = this.buffer.subarray(safe);
        yield piece;
      }
      await this.more();
    }
  }

  async text(delimiter: Buffer, limit: number): Promise<string> {
    const pieces: Buffer[] = [];
    let size = 0;
    for await (const piece of this.until(delimiter)) {
      size += piece.length;
      if (size > limit) throw new S3Error('MalformedPOSTRequest', 'The form fields are larger than 20 KB.');
      pieces.push(piece);
    }
    return Buffer.concat(pieces).toString('utf8');
  }
}

/** A parameter of a Content-Disposition header (RFC 7578): quotes and line ends arrive percent-encoded from browsers. */
function parameter(headers: string, name: string): string | undefined {
  const match = new RegExp(`^content-disposition:.*?;\\s*${name}="([^"]*)"`, 'im').exec(headers);
  return match?.[1]?.replaceAll('%22', '"').replaceAll('%0D', '\r').replaceAll('%0A', '\n');
}

/**
 * Reads the fields up to the part named `file`, and hands the file over as a stream. Whatever follows the file is
 * ignored, as S3 does.
 */
export async function readPostForm(contentType: string | undefined, body: AsyncIterable<Buffer>): Promise<PostForm> {
  const boundary = boundaryOf(contentType);
  const reader = new Reader(body);
  const delimiter = Buffer.from(`\r\n--${boundary}`);
  const fields = new Map<string, string>();
  let left = MAX_FORM;
  await reader.text(Buffer.from(`--${boundary}`), 1024);
  for (;;) {
    const ending = await reader.take(2);
    if (ending === '--') throw new S3Error('InvalidArgument', 'POST requires exactly one file upload per request.');
    if (ending !== '\r\n') throw new S3Error('MalformedPOSTRequest');
    const headers = await reader.text(Buffer.from('\r\n\r\n'), 8 * 1024);
    const name = parameter(headers, 'name')?.toLowerCase();
    if (name === undefined) throw new S3Error('MalformedPOSTRequest');
    if (name === 'file') {
      const fileType = /^content-type:\s*(\S.*?)\s*$/im.exec(headers)?.[1];
      return { fields, fileName: (parameter(headers, 'filename') ?? '').replace(/^.*[\\/]/, ''), fileType, file: reader.until(delimiter) };
    }
    const value = await reader.text(delimiter, left);
    left -= value.length;
    fields.set(name, value);
  }
}
