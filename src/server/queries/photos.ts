import { photoAlt, pictureView, workAlt, type PhotoStatus, type PhotoView, type PictureView } from '~/domain/photo.ts';
import { may } from '~/domain/permissions.ts';
import type { ListingState } from '~/domain/states/listing.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { authorize, rolesOnListing } from '../authorize.ts';
import { oneRow, rows } from '../db.ts';
import { notFound } from '../errors.ts';
import { Listing, Log } from '../models/index.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { publicSawyerConditions } from './sawyers-near.ts';

interface PhotoRow {
  id: string;
  status: PhotoStatus;
  refusedBecause: string | null;
  fileName: string;
  caption: string;
  logId: string | null;
  logLabel: string | null;
  isWork: boolean;
  width: number | null;
  height: number | null;
  blur: string | null;
}

const columns = `photo.id, photo.status, photo.refused_because AS "refusedBecause", photo.file_name AS "fileName", photo.caption,
  photo.log_id AS "logId", CASE WHEN log.label = '' THEN 'log ' || log.position ELSE log.label END AS "logLabel",
  photo.sawyer_id IS NOT NULL AS "isWork", photo.width, photo.height, photo.blur`;

function picture(row: PhotoRow): PictureView | null {
  if (row.status !== 'ready' || row.width === null || row.height === null) return null;
  return pictureView({ id: row.id, width: row.width, height: row.height, blur: row.blur ?? '' }, row.isWork ? workAlt(row.caption, null) : photoAlt(row.caption, row.logLabel));
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

/** Every photograph of a sawyer's own work in its order, unfinished and refused ones included. Leans on `photo_of_sawyer`. */
export async function workPhotos(sawyerId: string): Promise<PhotoView[]> {
  const found = await rows<PhotoRow>(
    `SELECT ${columns} FROM photo LEFT JOIN log ON log.id = photo.log_id WHERE photo.sawyer_id = $1 AND photo.removed_at IS NULL ORDER BY photo.position, photo.created_at, photo.id`,
    [sawyerId],
  );
  return found.map(view);
}

/** A photograph of a sawyer's own work as readers of the sawyer's page see it. */
export interface OwnWork {
  readonly id: string;
  readonly caption: string;
  readonly picture: PictureView;
}

/** What a sawyer shows of their own work, in order. Whether their page may be read is decided by the caller. */
export async function shownWork(sawyerId: string, sawyerName: string): Promise<OwnWork[]> {
  const ready = (await workPhotos(sawyerId)).flatMap(({ id, caption, picture: shown }) => (shown ? [{ id, caption, picture: shown }] : []));
  return ready.map((photo, index) => ({ ...photo, picture: { ...photo.picture, alt: workAlt(photo.caption, `${sawyerName}, photograph ${index + 1}`) } }));
}

/** A sawyer's own photographs of work, for their board. @throws Refusal `forbidden` when the viewer is no sawyer */
export async function ownWorkPhotos(viewer: Viewer): Promise<PhotoView[]> {
  authorize(viewer, 'sawyer', 'keepProfile', baseRoles(viewer));
  return workPhotos(viewer.id);
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
  /** Null for the board of one's own work. */
  readonly listingId: string | null;
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
 * and for everyone on a job's page that both sides have agreed to. One of a sawyer's own work is seen by everyone while the
 * sawyer's page is, and by that sawyer and moderators always.
 * @throws Refusal `notFound`, the same for what does not exist and what is not theirs to see.
 */
export async function photoAudience(viewer: Viewer | null, photoId: string): Promise<'everyone' | 'viewer'> {
  const work = await oneRow<{ ownerId: string; isShown: boolean }>(
    `SELECT photo.owner_id AS "ownerId", EXISTS (SELECT 1 FROM sawyer_profile s JOIN account a ON a.id = s.account_id WHERE s.account_id = photo.sawyer_id AND ${publicSawyerConditions}) AS "isShown"
     FROM photo WHERE photo.id = $1 AND photo.sawyer_id IS NOT NULL AND photo.status = 'ready' AND photo.removed_at IS NULL`,
    [photoId],
  );
  if (work?.isShown) return 'everyone';
  if (work && viewer && (viewer.id === work.ownerId || (viewer.active && viewer.isModerator))) return 'viewer';
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
