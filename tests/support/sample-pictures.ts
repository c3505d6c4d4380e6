import { readFileSync } from 'node:fs';
import { deflateSync } from 'node:zlib';
import sharp from 'sharp';

/** Pictures as people send them, with the left half red and the right half blue, so that a turn shows. */

const red = { r: 200, g: 30, b: 30 };
const blue = { r: 30, g: 30, b: 200 };

function halves(width: number, height: number): ReturnType<typeof sharp> {
  return sharp({ create: { width, height, channels: 3, background: blue } }).composite([
    { input: { create: { width: width / 2, height, channels: 3, background: red } }, left: 0, top: 0 },
  ]);
}

/** A phone's JPEG: 120 × 80, stored lying, to be shown a quarter turn clockwise (orientation 6), with position and serial number. */
export function phoneJpeg(): Promise<Buffer> {
  const exif = {
    IFD0: { Make: 'Sample', Model: 'Sample camera' },
    IFD2: { BodySerialNumber: 'SERIAL-12345' },
    IFD3: { GPSLatitudeRef: 'N', GPSLatitude: '43/1 38/1 0/1', GPSLongitudeRef: 'W', GPSLongitude: '90/1 39/1 0/1' },
  };
  return halves(120, 80).jpeg({ quality: 95 }).withMetadata({ orientation: 6, exif }).toBuffer();
}

/** 96 × 64, HEVC inside, made by heif-enc from a drawing of our own; it carries a position too. */
export const heic = (): Buffer => readFileSync(new URL('./samples/red-left-blue-right.heic', import.meta.url));

export const plainJpeg = (width: number, height: number): Promise<Buffer> => halves(width, height).jpeg().toBuffer();

/** A PNG whose header claims the size and whose data is a few bytes: what fills a careless decoder's memory. */
export function pngClaiming(width: number, height: number): Buffer {
  const chunk = (name: string, data: Buffer): Buffer => {
    const body = Buffer.concat([Buffer.from(name, 'latin1'), data]);
    const length = Buffer.alloc(4);
    length.writeUInt32BE(data.length);
    const sum = Buffer.alloc(4);
    sum.writeUInt32BE(crc32(body));
    return Buffer.concat([length, body, sum]);
  };
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header.set([8, 2, 0, 0, 0], 8);
  const rows = deflateSync(Buffer.alloc(1_000_000));
  return Buffer.concat([Buffer.from('\x89PNG\r\n\x1a\n', 'latin1'), chunk('IHDR', header), chunk('IDAT', rows), chunk('IEND', Buffer.alloc(0))]);
}

/** The CRC of PNG (ISO 3309). */
function crc32(data: Buffer): number {
  let state = 0xffffffff;
  for (const byte of data) {
    state ^= byte;
    for (let bit = 0; bit < 8; bit += 1) state = state & 1 ? (state >>> 1) ^ 0xedb88320 : state >>> 1;
  }
  return (state ^ 0xffffffff) >>> 0;
}

/** Which halves of a picture are red and blue, read near its edges. */
export async function sides(picture: Buffer): Promise<{ left: string; right: string; top: string; bottom: string }> {
  const { data, info } = await sharp(picture).raw().toBuffer({ resolveWithObject: true });
  const at = (x: number, y: number): string => {
    const from = (Math.floor(y * (info.height - 1)) * info.width + Math.floor(x * (info.width - 1))) * info.channels;
    return (data[from] ?? 0) > (data[from + 2] ?? 0) ? 'red' : 'blue';
  };
  return { left: at(0.05, 0.5), right: at(0.95, 0.5), top: at(0.5, 0.05), bottom: at(0.5, 0.95) };
}
