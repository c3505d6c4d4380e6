import sharp from 'sharp';
import { beforeAll, describe, expect, it } from 'vitest';
import { largestPhotoBytes, mostPhotos, type PhotoView } from '~/domain/photo.ts';
import { allKeys, renditionKey } from '~/domain/photo-keys.ts';
import { beginPhotoUpload, type BegunUpload } from '~/server/commands/begin-photo-upload.ts';
import { changePhoto } from '~/server/commands/change-photo.ts';
import { finishPhotoUpload } from '~/server/commands/finish-photo-upload.ts';
import { publishListing } from '~/server/commands/publish-listing.ts';
import { orderPhotos } from '~/server/commands/order-photos.ts';
import { removePhoto } from '~/server/commands/remove-photo.ts';
import { saveDraft } from '~/server/commands/save-draft.ts';
import { withdrawListing } from '~/server/commands/withdraw-listing.ts';
import { execute, oneRow, rows } from '~/server/db.ts';
import type { Refusal } from '~/server/errors.ts';
import { processPhoto } from '~/server/jobs/handlers/process-photo.ts';
import { photoSweeps } from '~/server/jobs/handlers/photo-sweeps.ts';
import { Event, Listing, Photo } from '~/server/models/index.ts';
import { firstPictures, onePhoto, photoAudience, photoEditor, photosForOwner, shownPhotos } from '~/server/queries/photos.ts';
import { MissingObject, readObject, storageAnswers } from '~/server/services/storage.ts';
import { makeCast, type Cast } from '../support/cast.ts';
import { LISTED_AT, openListing, typedListing } from '../support/listings.ts';
import { heic, phoneJpeg, plainJpeg, pngClaiming, sides } from '../support/sample-pictures.ts';
import { sendFile, startStorage } from '../support/storage.ts';

const at = LISTED_AT;
let cast: Cast;
let listing: Listing;

beforeAll(async () => {
  await startStorage();
  cast = await makeCast();
  listing = await openListing(cast.ada);
});

const begin = (fileName = 'a.jpg', type = 'image/jpeg', bytes = 1000, listingId = listing.id): Promise<BegunUpload> =>
  beginPhotoUpload(cast.ada, { listingId, fileName, type, bytes }, at);

/** From the choosing of a file to the end of its check. */
async function add(bytes: Buffer, fileName = 'a.jpg', type = 'image/jpeg', listingId = listing.id): Promise<PhotoView> {
  const { photo, upload } = await begin(fileName, type, bytes.length, listingId);
  expect((await sendFile(upload, bytes)).status).toBe(204);
  expect((await finishPhotoUpload(cast.ada, photo.id, at)).status).toBe('checking');
  await processPhoto({ photoId: photo.id });
  return onePhoto(photo.id);
}

describe('adding a photograph', () => {
  it('goes from the browser to storage, is checked, and is shown upright without the camera’s data', async () => {
    const photo = await add(await phoneJpeg(), 'IMG_1.JPG');
    expect(photo).toMatchObject({ status: 'ready', fileName: 'IMG_1.JPG', refusedBecause: null, picture: { width: 80, height: 120, src: `/photos/${photo.id}/medium.jpg` } });
    const shown = await readObject(renditionKey(photo.id, 'large', 'webp'), 10_000_000);
    expect((await sharp(shown).metadata()).exif).toBeUndefined();
    expect(shown.includes('SERIAL-12345')).toBe(false);
    expect(await sides(shown)).toMatchObject({ top: 'red', bottom: 'blue' });
  });

  it('takes a phone’s HEIC that comes without a type', async () => {
    const photo = await add(heic(), 'IMG_2.HEIC', '');
    expect(photo).toMatchObject({ status: 'ready', picture: { width: 96, height: 64 } });
  });

  it.each([
    ['a text file under a picture’s name', async () => Buffer.from('Measured on Sunday: 14 in.'), /not a picture/],
    ['a drawing that can carry programs', async () => Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'), /SVG/],
    ['a file that would fill the memory', async () => pngClaiming(50_000, 50_000), /60 million pixels/],
    ['a file cut off on the way', async () => (await plainJpeg(900, 600)).subarray(0, 700), /damaged or cut off/],
  ])('refuses %s with a reason at that file, and the others go on', async (_name, make, reason) => {
    const [bad, good] = [await add(await make(), 'bad.jpg'), await add(await plainJpeg(60, 40))];
    expect(bad).toMatchObject({ status: 'refused', refusedBecause: expect.stringMatching(reason) as string, picture: null });
    expect(good.status).toBe('ready');
    await removePhoto(cast.ada, bad.id, at);
    await removePhoto(cast.ada, good.id, at);
  });

  it('refuses what can be known before anything is sent', async () => {
    await expect(begin('notes.txt', 'text/plain')).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'file' }] });
    await expect(begin('big.jpg', 'image/jpeg', largestPhotoBytes + 1)).rejects.toMatchObject({ kind: 'invalid' });
  });

  it('signs a form that storage holds to: this key, this type, this size', async () => {
    const { upload } = await begin();
    expect((await sendFile({ ...upload, fields: { ...upload.fields, key: 'originals/other' } }, Buffer.from('x'))).status).toBe(403);
    expect((await sendFile({ ...upload, fields: { ...upload.fields, 'Content-Type': 'text/html' } }, Buffer.from('x'))).status).toBe(403);
    const tooLarge = await sendFile(upload, Buffer.alloc(largestPhotoBytes + 1));
    expect([tooLarge.status, await tooLarge.text()]).toEqual([400, expect.stringContaining('EntityTooLarge')]);
  });

  it('refuses one whose file never arrived', async () => {
    const { photo } = await begin();
    await finishPhotoUpload(cast.ada, photo.id, at);
    await processPhoto({ photoId: photo.id });
    expect(await onePhoto(photo.id)).toMatchObject({ status: 'refused', refusedBecause: 'The file did not arrive. Add it again.' });
  });

  it('is checked once although eight windows say at once that it arrived, and twice changes nothing', async () => {
    const { photo, upload } = await begin();
    await sendFile(upload, await plainJpeg(60, 40));
    await Promise.all(Array.from({ length: 8 }, () => finishPhotoUpload(cast.ada, photo.id, at)));
    expect(await rows(`SELECT 1 FROM pgboss.job WHERE name = 'process-photo' AND data ->> 'photoId' = $1`, [photo.id])).toHaveLength(1);
    await Promise.all([processPhoto({ photoId: photo.id }), processPhoto({ photoId: photo.id })]);
    await processPhoto({ photoId: photo.id });
    expect(await Event.count({ where: { thing: 'photo', thingId: photo.id } })).toBe(2);
    expect((await onePhoto(photo.id)).status).toBe('ready');
  });

  it('works for a draft, and stops at the most a listing may have', async () => {
    const draft = await saveDraft(cast.ada, { number: null, typedVersion: null, typed: typedListing() }, at);
    expect((await add(await plainJpeg(60, 40), 'd.jpg', 'image/jpeg', draft.id)).status).toBe('ready');
    await execute(
      `INSERT INTO photo (listing_id, owner_id, position, original_key, created_at) SELECT $1, $2, n, 'test/' || n, $3 FROM generate_series(2, ${mostPhotos}) n`,
      [draft.id, cast.ada.id, at],
    );
    await expect(begin('one-more.jpg', 'image/jpeg', 10, draft.id)).rejects.toMatchObject({ kind: 'conflict' });
  });
});

describe('who may do what', () => {
  it('only the owner changes photographs, and a stranger learns nothing', async () => {
    const photo = await add(await plainJpeg(60, 40));
    for (const other of [cast.dora, cast.bram, cast.mo]) {
      await expect(beginPhotoUpload(other, { listingId: listing.id, fileName: 'a.jpg', type: 'image/jpeg', bytes: 1 }, at)).rejects.toMatchObject({ kind: 'notFound' });
      await expect(changePhoto(other, photo.id, { caption: 'mine' })).rejects.toMatchObject({ kind: 'notFound' });
      await expect(finishPhotoUpload(other, photo.id, at)).rejects.toMatchObject({ kind: 'notFound' });
      await expect(removePhoto(other, photo.id, at)).rejects.toMatchObject({ kind: 'notFound' });
      await expect(orderPhotos(other, { listingId: listing.id, ids: [photo.id] })).rejects.toMatchObject({ kind: 'notFound' });
      await expect(photosForOwner(other, listing.id)).rejects.toMatchObject({ kind: 'notFound' });
    }
  });

  it('everyone sees those of a published listing, only its owner those of a draft or a hidden one', async () => {
    const draft = await saveDraft(cast.dora, { number: null, typedVersion: null, typed: typedListing() }, at);
    const begun = await beginPhotoUpload(cast.dora, { listingId: draft.id, fileName: 'a.jpg', type: 'image/jpeg', bytes: 10 }, at);
    await sendFile(begun.upload, await plainJpeg(60, 40));
    await expect(photoAudience(cast.dora, begun.photo.id)).rejects.toMatchObject({ kind: 'notFound' });
    await finishPhotoUpload(cast.dora, begun.photo.id, at);
    await processPhoto({ photoId: begun.photo.id });
    const seenBy = async (): Promise<string[]> => Promise.all([null, cast.bram, cast.mo, cast.dora].map((viewer) => photoAudience(viewer, begun.photo.id).catch((error: Error) => (error as Refusal).kind)));
    expect(await seenBy()).toEqual(['notFound', 'notFound', 'notFound', 'viewer']);
    await publishListing(cast.dora, { number: draft.number, typedVersion: draft.typedVersion, typed: draft.typed }, at);
    expect(await seenBy()).toEqual(['everyone', 'everyone', 'everyone', 'everyone']);
    await execute('UPDATE listing SET hidden_at = $2 WHERE id = $1', [draft.id, at]);
    expect(await seenBy()).toEqual(['notFound', 'notFound', 'viewer', 'viewer']);
    await execute('UPDATE listing SET hidden_at = NULL WHERE id = $1', [draft.id]);
    await withdrawListing(cast.dora, { number: draft.number, reason: '' }, at);
    expect(await seenBy()).toEqual(['viewer', 'viewer', 'viewer', 'viewer']);
    await expect(beginPhotoUpload(cast.dora, { listingId: draft.id, fileName: 'a.jpg', type: 'image/jpeg', bytes: 10 }, at)).rejects.toMatchObject({ kind: 'conflict' });
    expect(await photoEditor(cast.dora, draft.number)).toBeNull();
  });

  it('the board is for the owner, with the logs by name', async () => {
    expect(await photoEditor(cast.bram, listing.number ?? 0)).toBeNull();
    expect(await photoEditor(null, listing.number ?? 0)).toBeNull();
    expect((await photoEditor(cast.ada, listing.number ?? 0))?.logs[0]?.label).toMatch(/^Log 1, [a-z ]+$/);
  });
});

describe('arranging', () => {
  it('keeps caption, log and order; what another device added comes last', async () => {
    const own = await openListing(cast.ada);
    const photos = [await add(await plainJpeg(60, 40), '1.jpg', 'image/jpeg', own.id), await add(await plainJpeg(60, 40), '2.jpg', 'image/jpeg', own.id), await add(await plainJpeg(60, 40), '3.jpg', 'image/jpeg', own.id)];
    const [one, two, three] = photos.map(({ id }) => id) as [string, string, string];
    const log = await oneRow<{ id: string }>('SELECT id FROM log WHERE listing_id = $1 ORDER BY position LIMIT 1', [own.id]);
    expect(await changePhoto(cast.ada, one, { caption: 'Butt end', logId: log?.id ?? null })).toMatchObject({ caption: 'Butt end', logId: log?.id, picture: { alt: 'Butt end' } });
    expect(await changePhoto(cast.ada, one, { caption: '' })).toMatchObject({ logId: log?.id, picture: { alt: 'Photograph of log 1' } });
    const other = await oneRow<{ id: string }>('SELECT id FROM log WHERE listing_id = $1 LIMIT 1', [listing.id]);
    await expect(changePhoto(cast.ada, one, { logId: other?.id ?? null })).rejects.toMatchObject({ kind: 'invalid' });
    const ordered = await orderPhotos(cast.ada, { listingId: own.id, ids: [three, one, '00000000-0000-4000-8000-000000000000', three] });
    expect(ordered.map(({ id }) => id)).toEqual([three, one, two]);
    expect((await firstPictures([own.id, listing.id])).get(own.id)?.src).toBe(`/photos/${three}/medium.jpg`);
    await removePhoto(cast.ada, three, at);
    expect((await shownPhotos(own.id)).map(({ id }) => id)).toEqual([one, two]);
    await expect(removePhoto(cast.ada, three, at)).rejects.toMatchObject({ kind: 'notFound' });
  });
});

describe('the sweeps', () => {
  const later = (hours: number): Date => new Date(at.getTime() + hours * 3_600_000);

  it('delete the files of what was removed, once its form has run out', async () => {
    const photo = await add(await plainJpeg(60, 40));
    const row = await Photo.findByPk(photo.id, { rejectOnEmpty: true });
    await removePhoto(cast.ada, photo.id, at);
    await photoSweeps['remove files of removed photographs']?.(later(0.5));
    expect((await readObject(row.originalKey, 1e6)).length).toBeGreaterThan(0);
    await photoSweeps['remove files of removed photographs']?.(later(2));
    for (const key of allKeys(row)) await expect(readObject(key, 1e6)).rejects.toBeInstanceOf(MissingObject);
    expect((await row.reload()).filesRemovedAt).toEqual(later(2));
  });

  it('forget what never came, begin a lost check again, and refuse what fails for hours', async () => {
    const awaited = (await begin()).photo.id;
    const lost = (await begin()).photo.id;
    await finishPhotoUpload(cast.ada, lost, at);
    await execute(`DELETE FROM pgboss.job WHERE name = 'process-photo'`);
    await photoSweeps['check photographs again']?.(later(1));
    await photoSweeps['check photographs again']?.(later(1));
    expect(await rows(`SELECT 1 FROM pgboss.job WHERE name = 'process-photo' AND data ->> 'photoId' = $1`, [lost])).toHaveLength(1);
    await execute(`DELETE FROM pgboss.job WHERE name = 'process-photo'`);
    await photoSweeps['check photographs again']?.(later(7));
    expect(await onePhoto(lost)).toMatchObject({ status: 'refused' });
    await photoSweeps['forget photographs that never came']?.(later(4));
    await expect(onePhoto(awaited)).rejects.toMatchObject({ kind: 'notFound' });
  });
});

it('storage answers with our key and bucket', async () => {
  expect(await storageAnswers()).toBe(true);
});
