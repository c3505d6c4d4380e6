import { photoAlt, pictureView, type PhotoStatus, type PhotoView, type PictureView } from '~/domain/photo.ts';
import { may } from '~/domain/permissions.ts';
import type { ListingState } from '~/domain/states/listing.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { rolesOnListing } from '../authorize.ts';
import { oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import { Listing, Log } from '../models/index.ts';
import type { Viewer } from '../viewer.ts';

interface PhotoRow {
  id: string;
  status: PhotoStatus;
  refusedBecause: string | null;
  fileName: string;
  caption: string;
  logId: string | null;
  logLabel: string | null;
  width: number | null;
  height: number | null;
  blur: string | null;
}

const columns = `photo.id, photo.status, photo.refused_because AS "refusedBecause", photo.file_name AS "fileName", photo.caption,
  photo.log_id AS "logId", CASE WHEN log.label = '' THEN 'log ' || log.position ELSE log.label END AS "logLabel",
  photo.width, photo.height, photo.blur`;

function picture(row: PhotoRow): PictureView | null {
  if (row.status !== 'ready' || row.width === null || row.height === null) return null;
  return pictureView({ id: row.id, width: row.width, height: row.height, blur: row.blur ?? '' }, photoAlt(row.caption, row.logLabel));
}

const view = (row: PhotoRow): PhotoView => ({
  id: row.id,
  status: row.status,
  refusedBecause: row.refusedBecause,
  fileName: row.fileName,
  caption: row.caption,
  logId: row.logId,
  picture: picture(row),
});

/** Every photograph of a listing in its order, unfinished and refused ones included. Leans on `photo_of_listing`. */
export async function allPhotos(listingId: string): Promise<PhotoView[]> {
  const found = await rows<PhotoRow>(
    `SELECT ${columns} FROM photo LEFT JOIN log ON log.id = photo.log_id
     WHERE photo.listing_id = $1 AND photo.booking_id IS NULL AND photo.removed_at IS NULL ORDER BY photo.position, photo.created_at, photo.id`,
    [listingId],
  );
  return found.map(view);
}

/** One photograph, whoever asks: for a command's answer. */
export async function onePhoto(photoId: string): Promise<PhotoView> {
  const found = await oneRow<PhotoRow>(`SELECT ${columns} FROM photo LEFT JOIN log ON log.id = photo.log_id WHERE photo.id = $1 AND photo.removed_at IS NULL`, [photoId]);
  if (!found) throw notFound('photograph');
  return view(found);
}

/** A photograph of a listing as readers see it: ready, with what it shows. */
export interface ShownPhoto {
  readonly id: string;
  readonly caption: string;
  readonly logId: string | null;
  readonly picture: PictureView;
}

/** The photographs that readers of a listing see, in order. Whether they may read the listing is decided by the caller. */
export async function shownPhotos(listingId: string): Promise<ShownPhoto[]> {
  const photos = await allPhotos(listingId);
  return photos.flatMap(({ id, caption, logId, picture: shown }) => (shown ? [{ id, caption, logId, picture: shown }] : []));
}

/** The first photograph of each listing that has one, by listing id: for lists. Leans on `photo_of_listing`. */
export async function firstPictures(listingIds: readonly string[]): Promise<Map<string, PictureView>> {
  if (listingIds.length === 0) return new Map();
  const found = await rows<PhotoRow & { listingId: string }>(
    `SELECT DISTINCT ON (photo.listing_id) photo.listing_id AS "listingId", ${columns}
     FROM photo LEFT JOIN log ON log.id = photo.log_id
     WHERE photo.listing_id = ANY($1::uuid[]) AND photo.booking_id IS NULL AND photo.removed_at IS NULL AND photo.status = 'ready'
     ORDER BY photo.listing_id, photo.position, photo.created_at, photo.id`,
    [listingIds],
  );
  return new Map(found.flatMap((row) => {
    const shown = picture(row);
    return shown ? [[row.listingId, shown] as const] : [];
  }));
}

/** The owner's own view of a listing's photographs, for the editor. @throws Refusal when it is not theirs */
export async function photosForOwner(viewer: Viewer, listingId: string): Promise<PhotoView[]> {
  const listing = await Listing.findByPk(listingId);
  if (!listing || !rolesOnListing(viewer, listing).has('owner')) throw notFound('listing');
  return allPhotos(listingId);
}

/** What the board of photographs is given. */
export interface PhotoEditor {
  readonly listingId: string;
  readonly logs: readonly { readonly id: string; readonly label: string }[];
  readonly photos: readonly PhotoView[];
}

/** The board of photographs of a listing, by its number; null when the viewer may not change them. */
export async function photoEditor(viewer: Viewer | null, number: number): Promise<PhotoEditor | null> {
  const listing = viewer ? await Listing.findOne({ where: { number } }) : null;
  if (!listing || !may('listing', 'addPhoto', rolesOnListing(viewer, listing), listing.status)) return null;
  const logs = await Log.findAll({ where: { listingId: listing.id, removedAt: null }, order: ['position'] });
  return {
    listingId: listing.id,
    logs: logs.map(({ id, position, label, species }) => ({ id, label: label || `Log ${position}, ${speciesOf(species).name.toLowerCase()}` })),
    photos: await allPhotos(listing.id),
  };
}

/**
 * Whether the viewer may see a photograph's renditions now, and whether everyone may keep them: then any cache may, for a while.
 * They are seen by whoever may read the listing's page: everyone once it is published and while it is not hidden, its owner
 * always, moderators except for drafts. A photograph of the milling day is for the two sides of its booking and moderators,
 * and for everyone on a job's page that both sides have agreed to.
 * @throws Refusal `notFound`, the same for what does not exist and what is not theirs to see.
 */
export async function photoAudience(viewer: Viewer | null, photoId: string): Promise<'everyone' | 'viewer'> {
  const found = await oneRow<{ ownerId: string; status: ListingState; isHidden: boolean; sides: string[] | null; onJobPage: boolean }>(
    `SELECT listing.owner_id AS "ownerId", listing.status, listing.hidden_at IS NOT NULL AS "isHidden",
       CASE WHEN booking.id IS NOT NULL THEN ARRAY[booking.landowner_id, booking.sawyer_id]::text[] END AS sides,
       EXISTS (SELECT 1 FROM job_page JOIN booking job ON job.id = job_page.booking_id JOIN account landowner ON landowner.id = job.landowner_id JOIN account sawyer ON sawyer.id = job.sawyer_id
         WHERE job.listing_id = photo.listing_id AND job.status = 'settled' AND photo.id = ANY(job_page.photo_ids) AND landowner_agreed_at IS NOT NULL AND sawyer_agreed_at IS NOT NULL
           AND landowner.status = 'active' AND sawyer.status = 'active') AND listing.hidden_at IS NULL AS "onJobPage"
     FROM photo JOIN listing ON listing.id = photo.listing_id LEFT JOIN booking ON booking.id = photo.booking_id
     WHERE photo.id = $1 AND photo.status = 'ready' AND photo.removed_at IS NULL`,
    [photoId],
  );
  if (!found) throw notFound('photograph');
  // Both sides may take their word back, so no cache keeps it for everybody.
  if (found.onJobPage) return 'viewer';
  if (found.sides !== null) {
    if (viewer && (found.sides.includes(viewer.id) || (viewer.active && viewer.isModerator))) return 'viewer';
    throw notFound('photograph');
  }
  const isShown = found.status !== 'draft' && !found.isHidden;
  if (isShown) return found.status === 'open' ? 'everyone' : 'viewer';
  if (viewer?.active && (viewer.id === found.ownerId || (viewer.isModerator && found.status !== 'draft'))) return 'viewer';
  throw notFound('photograph');
}
