import { paths } from './paths.ts';

/** The most a photograph may weigh. */
export const largestPhotoBytes = 25 * 1024 * 1024;
/** The most pixels a photograph may have: more is a mistake or an attempt to fill the machine's memory. */
export const mostPhotoPixels = 60_000_000;
/** Photographs of one listing. */
export const mostPhotos = 40;
/** Photographs that a sawyer shows of their own work. */
export const mostWorkPhotos = 24;
/** Photographs of one milling day. */
export const mostDayPhotos = 60;
export const longestCaption = 200;

/** The picture types taken in, each with the endings that name it. */
export const photoTypes = {
  'image/jpeg': ['jpg', 'jpeg', 'jfif'],
  'image/png': ['png'],
  'image/webp': ['webp'],
  'image/avif': ['avif'],
  'image/heic': ['heic'],
  'image/heif': ['heif'],
} as const satisfies Readonly<Record<string, readonly string[]>>;

export type PhotoType = keyof typeof photoTypes;

const typeNames = Object.keys(photoTypes) as PhotoType[];

/**
 * The type of a file a person chose. Phones often give a HEIC picture an empty or a general type, so the ending of its name
 * decides then. Null when it is not a picture we take; what the bytes really are is found out later.
 */
export function photoType(fileName: string, saidType: string): PhotoType | null {
  const said = saidType.toLowerCase().split(';')[0]?.trim() ?? '';
  const known = typeNames.find((type) => type === said || (said === 'image/jpg' && type === 'image/jpeg'));
  if (known) return known;
  if (said !== '' && said !== 'application/octet-stream') return null;
  const ending = /\.([a-z0-9]+)$/i.exec(fileName)?.[1]?.toLowerCase() ?? '';
  return typeNames.find((type) => (photoTypes[type] as readonly string[]).includes(ending)) ?? null;
}

/** Why a chosen file cannot be used, known before anything is sent; null when it may be tried. */
export function photoProblem(fileName: string, saidType: string, bytes: number): string | null {
  if (photoType(fileName, saidType) === null) return 'This is not a picture we can use. Choose a JPEG, PNG, WebP, AVIF or HEIC file.';
  if (bytes === 0) return 'This file is empty. Choose another one.';
  if (bytes > largestPhotoBytes) return `This picture is ${(bytes / 1024 ** 2).toFixed(1)} MB. The most is 25 MB: save it smaller or choose another one.`;
  return null;
}

/** The sizes a photograph is kept in: the longer edge, in pixels, never enlarged. */
export const renditionEdges = { small: 480, medium: 1024, large: 2048 } as const;
export type RenditionSize = keyof typeof renditionEdges;
export const renditionSizes = Object.keys(renditionEdges) as RenditionSize[];
export const renditionTypes = { webp: 'image/webp', jpg: 'image/jpeg' } as const;
export type RenditionFormat = keyof typeof renditionTypes;

/** Reads `medium.webp`; null for any other name. */
export function parseRendition(name: string): { size: RenditionSize; format: RenditionFormat } | null {
  const match = /^(small|medium|large)\.(webp|jpg)$/.exec(name);
  return match ? { size: match[1] as RenditionSize, format: match[2] as RenditionFormat } : null;
}

/** The size of a picture inside a square of `edgePx`, never enlarged. */
export function fitWithin(widthPx: number, heightPx: number, edgePx: number): { width: number; height: number } {
  const scale = Math.min(1, edgePx / Math.max(widthPx, heightPx));
  return { width: Math.max(1, Math.round(widthPx * scale)), height: Math.max(1, Math.round(heightPx * scale)) };
}

/** A picture as an `<img>` needs it: `src` is JPEG, `srcset` WebP in its three widths, `blur` a tiny data address. */
export interface PictureView {
  readonly src: string;
  readonly srcset: string;
  readonly width: number;
  readonly height: number;
  readonly alt: string;
  readonly blur: string;
}

/** The picture of a photograph that is ready. Width and height are the upright original's, in pixels. */
export function pictureView(photo: { readonly id: string; readonly width: number; readonly height: number; readonly blur: string }, alt: string): PictureView {
  // The smallest rendition of a width names it: a small original has the same width in all three.
  const widths = new Map([...renditionSizes].reverse().map((size) => [fitWithin(photo.width, photo.height, renditionEdges[size]).width, size] as const));
  const srcset = [...widths].reverse().map(([width, size]) => `${paths.photo(photo.id, `${size}.webp`)} ${width}w`).join(', ');
  return { src: paths.photo(photo.id, 'medium.jpg'), srcset, width: photo.width, height: photo.height, alt, blur: photo.blur };
}

export type PhotoStatus = 'awaiting' | 'checking' | 'ready' | 'refused';

/** A photograph of a listing, or of a sawyer's work, as its owner sees it. `picture` is there once it is ready. */
export interface PhotoView {
  readonly id: string;
  readonly status: PhotoStatus;
  /** In words for a person, when refused. */
  readonly refusedBecause: string | null;
  readonly fileName: string;
  readonly caption: string;
  readonly logId: string | null;
  readonly picture: PictureView | null;
}

/** What a picture shows, in words: its caption, else the log it belongs to, else that it shows the logs. */
export const photoAlt = (caption: string, logLabel: string | null): string => caption.trim() || (logLabel ? `Photograph of ${logLabel}` : 'Photograph of the logs');

/** What a picture of a sawyer's own work shows, in words: its caption, else whose work it is. */
export const workAlt = (caption: string, sawyerName: string | null): string => caption.trim() || (sawyerName ? `Work by ${sawyerName}` : 'Photograph of your work');
