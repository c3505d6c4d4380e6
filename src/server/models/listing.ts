import type { PieceKind } from '~/domain/sawing/piece-kind.ts';
import type { PhotoStatus } from '~/domain/photo.ts';
import type { ListingState } from '~/domain/states/listing.ts';
import { day, filled, id, identity, instant, json, nullable, point, real, ref, table, text, texts, whole, yes, type Row } from './table.ts';

export type TreeOwner = 'mine' | 'permission';
export type HowDown = 'snapped' | 'uprooted' | 'felled' | 'cleared';
export type MetalRisk = 'none-known' | 'lawn-tree' | 'fence-line' | 'known-metal' | 'unknown';

/** `typed` is the form as the landowner left it; the rest is what was understood of it at publishing or revising. */
export const Listing = table('listing', {
  id: id(),
  number: identity(),
  ownerId: ref(),
  status: filled(text<ListingState>()),
  revision: filled(whole()),
  typed: filled(json<Record<string, unknown>>()),
  typedVersion: filled(whole()),
  title: nullable(text()),
  treeOwner: nullable(text<TreeOwner>()),
  treeOwnerConfirmedAt: nullable(instant()),
  howDown: nullable(text<HowDown>()),
  cameDownOn: nullable(day()),
  endsSealed: nullable(yes()),
  zip: nullable(text()),
  town: nullable(text()),
  state: nullable(text()),
  timeZone: nullable(text()),
  place: nullable(point()),
  coarse: nullable(point()),
  access: nullable(json<Record<string, unknown>>()),
  landing: nullable(json<Record<string, unknown>>()),
  waste: nullable(json<Record<string, unknown>>()),
  metalRisk: nullable(text<MetalRisk>()),
  metalNote: filled(text()),
  note: filled(text()),
  closesAt: nullable(instant()),
  lapsesAt: nullable(instant()),
  sawBy: nullable(day()),
  sawByReason: nullable(text()),
  species: filled(texts()),
  logCount: filled(whole()),
  boardFeet: filled(whole()),
  largestEndObIn: filled(real()),
  createdAt: instant(),
  updatedAt: instant(),
  publishedAt: nullable(instant()),
  hiddenAt: nullable(instant()),
  hiddenReason: nullable(text()),
});
export type Listing = Row<typeof Listing>;

export const Log = table('log', {
  id: id(),
  listingId: ref(),
  position: whole(),
  label: filled(text()),
  species: text(),
  smallEndIn: real(),
  largeEndIn: nullable(real()),
  lengthFt: real(),
  heartDefectIn: nullable(real()),
  defects: filled(json<unknown[]>()),
  note: filled(text()),
  addedOnTheDay: filled(yes()),
  removedAt: nullable(instant()),
});
export type Log = Row<typeof Log>;

export type Sizing = 'full-sawn' | 'store-size';

export const Piece = table('piece', {
  id: id(),
  listingId: ref(),
  position: whole(),
  label: filled(text()),
  thicknessIn: real(),
  widthIn: real(),
  lengthFt: real(),
  count: whole(),
  sizing: text<Sizing>(),
  kind: filled(text<PieceKind>()),
  forDwelling: filled(yes()),
});
export type Piece = Row<typeof Piece>;

export const Photo = table('photo', {
  id: id(),
  /** Null on a photograph of a sawyer's own work, which has `sawyerId` instead. */
  listingId: nullable(ref()),
  /** Set on what a sawyer shows of their own work, on their own page: the owner. */
  sawyerId: nullable(ref()),
  ownerId: ref(),
  logId: nullable(ref()),
  /** Set on a photograph of the milling day, which is the booking's and not the listing's. */
  bookingId: nullable(ref()),
  shows: nullable(text<'metal' | 'boards'>()),
  hitId: nullable(ref()),
  position: whole(),
  caption: filled(text()),
  fileName: filled(text()),
  originalKey: text(),
  status: filled(text<PhotoStatus>()),
  refusedBecause: nullable(text()),
  width: nullable(whole()),
  height: nullable(whole()),
  blur: nullable(text()),
  bytes: nullable(whole()),
  createdAt: instant(),
  readyAt: nullable(instant()),
  removedAt: nullable(instant()),
  filesRemovedAt: nullable(instant()),
});
export type Photo = Row<typeof Photo>;
