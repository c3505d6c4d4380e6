import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { mostDayPhotos } from '~/domain/photo.ts';
import type { BeginDayPhoto } from '~/schemas/day-photo.ts';
import { beginDayPhoto } from '~/server/commands/begin-day-photo.ts';
import { finishPhotoUpload } from '~/server/commands/finish-photo-upload.ts';
import { removePhoto } from '~/server/commands/remove-photo.ts';
import { takeEntries } from '~/server/commands/take-entries.ts';
import { execute, inTransaction } from '~/server/db.ts';
import { dayPhotos } from '~/server/day-photos.ts';
import { processPhoto } from '~/server/jobs/handlers/process-photo.ts';
import { Booking, Photo, Tally } from '~/server/models/index.ts';
import { bookingPage } from '~/server/queries/booking-page.ts';
import { allPhotos, firstPictures, photoAudience } from '~/server/queries/photos.ts';
import { tallyPage } from '~/server/queries/tally-page.ts';
import type { Viewer } from '~/server/viewer.ts';
import { makeCast, type Cast } from '../support/cast.ts';
import { makeAgreedBooking } from '../support/money-market.ts';
import { plainJpeg } from '../support/sample-pictures.ts';
import { sendFile, startStorage } from '../support/storage.ts';

let cast: Cast;
let booking: Booking;
const at = new Date('2026-08-05T18:00:00Z');
const hit = randomUUID();

beforeAll(async () => {
  await startStorage();
  cast = await makeCast();
  booking = await makeAgreedBooking(cast.ada, cast.bram);
  // Straight to sawing: how money is held is another file's subject.
  await inTransaction(async () => {
    await Booking.update({ status: 'sawing' }, { where: { id: booking.id } });
    await Tally.create({ bookingId: booking.id, createdAt: at });
  });
  await takeEntries(cast.bram, { booking: booking.number, entries: [{ kind: 'hit', id: hit, logId: null, outcome: 'destroyed', note: '' }] }, at);
});

const input = (change: Partial<BeginDayPhoto> = {}): BeginDayPhoto => ({ id: randomUUID(), shows: 'boards', hitId: null, fileName: 'a.jpg', type: 'image/jpeg', bytes: 1000, ...change });
let seconds = 0;
const begin = (by: Viewer, change: Partial<BeginDayPhoto> = {}) => beginDayPhoto(by, booking.number, input(change), new Date(at.getTime() + 1000 * seconds++));

/** From the taking of a picture to the end of its check. */
async function add(by: Viewer, change: Partial<BeginDayPhoto> = {}): Promise<string> {
  const { photo, upload } = await begin(by, change);
  if (!upload) throw new Error('There is nothing to send.');
  expect((await sendFile(upload, await plainJpeg(90, 60))).status).toBe(204);
  await finishPhotoUpload(by, photo.id, at);
  await processPhoto({ photoId: photo.id });
  return photo.id;
}

describe('photographs of the milling day', () => {
  it('show the metal and the boards to both sides, named by what they show', async () => {
    await add(cast.bram, { shows: 'metal', hitId: hit });
    await add(cast.bram);
    for (const reader of [cast.ada, cast.bram]) {
      const { photos } = await bookingPage(reader, booking.number, at);
      expect(photos.map(({ words, byName, picture }) => [words, byName, picture?.width])).toEqual([
        ['Metal hit, blade destroyed', 'Bram', 90],
        ['Boards', 'Bram', 90],
      ]);
    }
    expect((await tallyPage(cast.bram, booking.number)).view.photos.map(({ hitId }) => hitId)).toEqual([hit, null]);
  });

  it('are for the two sides and moderators alone, and never stand among the listing’s', async () => {
    const id = await add(cast.ada);
    for (const reader of [cast.ada, cast.bram, cast.mo]) expect(await photoAudience(reader, id)).toBe('viewer');
    for (const reader of [null, cast.cleo, cast.dora]) await expect(photoAudience(reader, id)).rejects.toMatchObject({ kind: 'notFound' });
    expect(await allPhotos(booking.listingId)).toEqual([]);
    expect((await firstPictures([booking.listingId])).size).toBe(0);
    await expect(begin(cast.cleo)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(begin(cast.mo)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(removePhoto(cast.bram, id, at)).rejects.toMatchObject({ kind: 'notFound' });
    await removePhoto(cast.ada, id, at);
    expect((await dayPhotos(booking.id)).some((photo) => photo.id === id)).toBe(false);
  });

  it('arrive once however often they are sent', async () => {
    const id = randomUUID();
    const before = await Photo.count({ where: { bookingId: booking.id } });
    expect((await begin(cast.bram, { id })).upload).not.toBeNull();
    await add(cast.bram, { id });
    expect((await begin(cast.bram, { id })).upload).toBeNull();
    await finishPhotoUpload(cast.bram, id, at);
    expect(await Photo.count({ where: { bookingId: booking.id } })).toBe(before + 1);
    // Another's id is nobody's to send under.
    await expect(begin(cast.ada, { id })).rejects.toMatchObject({ kind: 'notFound' });
  });

  it('keep one of a hit that was taken back, and do not take another job’s hit', async () => {
    const lost = randomUUID();
    const id = await add(cast.bram, { shows: 'metal', hitId: lost });
    expect((await dayPhotos(booking.id)).find((photo) => photo.id === id)).toMatchObject({ words: 'Metal hit', hitId: null });
  });

  it('stop at the most a job may have', async () => {
    await execute(
      `INSERT INTO photo (listing_id, booking_id, shows, owner_id, position, original_key, created_at) SELECT $1, $2, 'boards', $3, 0, 'test/' || n, $4 FROM generate_series(1, ${mostDayPhotos}) n`,
      [booking.listingId, booking.id, cast.bram.id, at],
    );
    await expect(begin(cast.bram)).rejects.toMatchObject({ kind: 'conflict' });
  });
});
