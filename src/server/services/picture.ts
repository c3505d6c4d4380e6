import decodeHeic from 'heic-decode';
import sharp, { type Sharp } from 'sharp';
import { fitWithin, mostPhotoPixels, renditionEdges, renditionSizes, type RenditionFormat, type RenditionSize } from '~/domain/photo.ts';

/** Turns what someone sent into pictures of our own making: upright, without any of the camera's data, in known formats. */

export interface Rendition {
  readonly size: RenditionSize;
  readonly format: RenditionFormat;
  readonly bytes: Buffer;
}

export interface Rendered {
  /** Of the upright original, px. */
  readonly width: number;
  readonly height: number;
  /** A tiny picture as a data address, shown until the real one is there. */
  readonly blur: string;
  readonly renditions: readonly Rendition[];
}

/** The file cannot be used; the message says why to the person who sent it. */
export class PictureRefused extends Error {}

const SECONDS = 60;
const notPicture = 'This file is not a picture we can read. Choose a JPEG, PNG, WebP, AVIF or HEIC file.';
const isDrawing = 'This is an SVG drawing, which can carry programs. Choose a photograph.';
const isBroken = 'This picture is damaged or cut off. Choose another copy of it.';
const tooManyPixels = `This picture has more than ${mostPhotoPixels / 1e6} million pixels. Save it smaller and choose it again.`;

type Kind = 'jpeg' | 'png' | 'webp' | 'avif' | 'heic' | 'svg' | 'other';

/** What the first bytes say the file is, whatever its name or stated type. */
export function kindOf(bytes: Buffer): Kind {
  const ascii = (from: number, to: number): string => bytes.toString('latin1', from, to);
  if (bytes.length >= 3 && bytes[0] === 0xff && bytes[1] === 0xd8 && bytes[2] === 0xff) return 'jpeg';
  if (ascii(0, 8) === '\x89PNG\r\n\x1a\n') return 'png';
  if (ascii(0, 4) === 'RIFF' && ascii(8, 12) === 'WEBP') return 'webp';
  if (ascii(4, 8) === 'ftyp') {
    const brands = ascii(8, Math.min(bytes.readUInt32BE(0), 64, bytes.length));
    if (/avi[fs]/.test(brands)) return 'avif';
    if (/hei[cxms]|hev[cxms]|mif1|msf1/.test(brands)) return 'heic';
  }
  return /<svg[\s>]/i.test(bytes.toString('utf8', 0, 2048)) ? 'svg' : 'other';
}

function checkPixels(width: number, height: number): void {
  if (width * height > mostPhotoPixels) throw new PictureRefused(tooManyPixels);
}

interface Opened {
  readonly picture: Sharp;
  /** Of the upright picture, px. */
  readonly width: number;
  readonly height: number;
}

/** HEIC (HEVC inside) is beyond the shipped sharp; a WebAssembly decoder gives its pixels, already upright. */
async function openHeic(bytes: Buffer): Promise<Opened> {
  const found = await decodeHeic.all({ buffer: bytes });
  try {
    const [first] = found;
    if (!first) throw new PictureRefused(isBroken);
    checkPixels(first.width, first.height);
    const { width, height, data } = await first.decode();
    return { width, height, picture: sharp(Buffer.from(data.buffer, data.byteOffset, data.byteLength), { raw: { width, height, channels: 4 } }) };
  } finally {
    found.dispose();
  }
}

async function openOrdinary(bytes: Buffer): Promise<Opened> {
  // `error` also refuses a picture that is cut off, but not one with a harmless oddity.
  const picture = sharp(bytes, { limitInputPixels: mostPhotoPixels, failOn: 'error' });
  const { width, height, autoOrient } = await picture.metadata();
  checkPixels(width, height);
  // Before anything else: the camera's "which way is up" is dropped with its other data.
  return { picture: picture.rotate(), width: autoOrient.width, height: autoOrient.height };
}

async function open(bytes: Buffer): Promise<Opened> {
  const kind = kindOf(bytes);
  if (kind === 'svg') throw new PictureRefused(isDrawing);
  if (kind === 'other') throw new PictureRefused(notPicture);
  return kind === 'heic' ? openHeic(bytes) : openOrdinary(bytes);
}

/**
 * The renditions of a photograph. Nothing of the original's metadata (position, serial numbers, times) is carried over: sharp
 * drops it unless told otherwise, and it is never told.
 * @throws PictureRefused with the reason for the sender.
 */
export async function renderPicture(bytes: Buffer): Promise<Rendered> {
  try {
    const { picture, width, height } = await open(bytes);
    const largest = fitWithin(width, height, renditionEdges.large);
    // Made smaller while it is decoded, so that the whole of a large picture is never held in memory.
    const { data, info } = await picture
      .timeout({ seconds: SECONDS })
      .resize(largest.width, largest.height, { fit: 'fill' })
      .flatten({ background: '#ffffff' })
      .toColourspace('srgb')
      .raw()
      .toBuffer({ resolveWithObject: true });
    const base = (): Sharp => sharp(data, { raw: { width: info.width, height: info.height, channels: info.channels } });
    const renditions: Rendition[] = [];
    for (const size of renditionSizes) {
      const fitted = fitWithin(width, height, renditionEdges[size]);
      const sized = base().resize(fitted.width, fitted.height, { fit: 'fill' });
      renditions.push({ size, format: 'webp', bytes: await sized.clone().webp({ quality: 78 }).toBuffer() });
      renditions.push({ size, format: 'jpg', bytes: await sized.clone().jpeg({ quality: 80, progressive: true }).toBuffer() });
    }
    const tiny = await base().resize(20, 20, { fit: 'inside' }).webp({ quality: 40 }).toBuffer();
    return { width, height, blur: `data:image/webp;base64,${tiny.toString('base64')}`, renditions };
  } catch (error) {
    if (error instanceof PictureRefused) throw error;
    if (error instanceof Error && /pixel limit/i.test(error.message)) throw new PictureRefused(tooManyPixels);
    throw new PictureRefused(isBroken);
  }
}
