import { createHash } from 'node:crypto';
import type { IncomingHttpHeaders } from 'node:http';
import { S3Error } from './errors.ts';

/** A running digest that ends as base64, as S3's checksum headers carry it. */
interface Digest {
  update(data: Buffer): void;
  base64(): string;
}

function crcTable(polynomial: number): Uint32Array {
  return Uint32Array.from({ length: 256 }, (_, index) => {
    let value = index;
    for (let bit = 0; bit < 8; bit += 1) value = value & 1 ? (value >>> 1) ^ polynomial : value >>> 1;
    return value >>> 0;
  });
}

function crc(table: Uint32Array): Digest {
  let state = 0xffffffff;
  return {
    update(data) {
      for (const byte of data) state = ((table[(state ^ byte) & 0xff] ?? 0) ^ (state >>> 8)) >>> 0;
    },
    base64() {
      const out = Buffer.alloc(4);
      out.writeUInt32BE((state ^ 0xffffffff) >>> 0);
      return out.toString('base64');
    },
  };
}

function hash(name: 'sha1' | 'sha256'): Digest {
  const inner = createHash(name);
  return { update: (data) => void inner.update(data), base64: () => inner.digest('base64') };
}

const makers: Record<string, () => Digest> = {
  // Reflected polynomials: IEEE 802.3 and Castagnoli (RFC 3720).
  'x-amz-checksum-crc32': () => crc(crcTable(0xedb88320)),
  'x-amz-checksum-crc32c': () => crc(crcTable(0x82f63b78)),
  'x-amz-checksum-sha1': () => hash('sha1'),
  'x-amz-checksum-sha256': () => hash('sha256'),
};

/** The checksum a client promises for its body, in a header or in a trailer to come. */
export class BodyChecksum {
  readonly name: string | null;
  private readonly digest: Digest | null;
  private readonly expected: string | null;

  constructor(headers: IncomingHttpHeaders) {
    const inHeader = Object.keys(headers).find((name) => /^x-amz-checksum-(?!algorithm|type|mode)/.test(name));
    const trailer = headers['x-amz-trailer'];
    const name = inHeader ?? (typeof trailer === 'string' ? trailer.trim().toLowerCase() : undefined) ?? null;
    const maker = name === null ? undefined : makers[name];
    if (name !== null && !maker) throw new S3Error('NotImplemented', `The checksum ${name} is not implemented here.`);
    this.name = name;
    this.digest = maker ? maker() : null;
    const value = inHeader ? headers[inHeader] : undefined;
    this.expected = typeof value === 'string' ? value : null;
  }

  update(data: Buffer): void {
    this.digest?.update(data);
  }

  /** Compares with the header, or with the trailer when the value came after the body. Returns what to echo. */
  finish(trailers: ReadonlyMap<string, string>): { name: string; value: string } | null {
    if (!this.name || !this.digest) return null;
    const expected = this.expected ?? trailers.get(this.name);
    const value = this.digest.base64();
    if (expected === undefined) throw new S3Error('InvalidRequest', `The trailer ${this.name} is missing.`);
    if (expected !== value) throw new S3Error('BadDigest', `The ${this.name} you specified did not match the calculated checksum.`);
    return { name: this.name, value };
  }
}
