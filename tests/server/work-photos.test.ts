import { beforeAll, describe, expect, it } from 'vitest';
import { mostWorkPhotos, type PhotoView } from '~/domain/photo.ts';
import { allKeys } from '~/domain/photo-keys.ts';
import { beginWorkPhoto } from '~/server/commands/begin-work-photo.ts';
import { changePhoto } from '~/server/commands/change-photo.ts';
import { closeAccount } from '~/server/commands/close-account.ts';
import { finishPhotoUpload } from '~/server/commands/finish-photo-upload.ts';
import { orderWorkPhotos } from '~/server/commands/order-photos.ts';
import { removePhoto } from '~/server/commands/remove-photo.ts';
import { takeOut } from '~/server/commands/take-out.ts';
import { execute, rows } from '~/server/db.ts';
import type { Refusal } from '~/server/errors.ts';
import { photoSweeps } from '~/server/jobs/handlers/photo-sweeps.ts';
import { processPhoto } from '~/server/jobs/handlers/process-photo.ts';
import { Account, Photo, SawyerProfile } from '~/server/models/index.ts';
import { accountExport } from '~/server/queries/account-export.ts';
import { historyOf } from '~/server/queries/desk/events.ts';
import { deskReports } from '~/server/queries/desk/reports.ts';
import { onePhoto, ownWorkPhotos, photoAudience } from '~/server/queries/photos.ts';
import { reportable } from '~/server/queries/report-page.ts';
import { sawyerPage } from '~/server/queries/sawyer-page.ts';
import { reportThing } from '~/server/commands/report-thing.ts';
import { MissingObject, readObject } from '~/server/services/storage.ts';
import { hashPassword } from '~/server/passwords.ts';
import type { Viewer } from '~/server/viewer.ts';
import { makeCast, viewerFor, type Cast } from '../support/cast.ts';
import { setUpSawyer } from '../support/sawing-market.ts';
import { phoneJpeg, plainJpeg } from '../support/sample-pictures.ts';
import { sendFile, startStorage } from '../support/storage.ts';

const at = new Date('2026-08-05T18:00:00Z');
let cast: Cast;

beforeAll(async () => {
  await startStorage();
  cast = await makeCast();
  for (const sawyer of [cast.bram, cast.cleo]) await setUpSawyer(sawyer.id);
});

const begin = (by: Viewer, caption = '') => beginWorkPhoto(by, { fileName: 'mill.jpg', type: 'image/jpeg', bytes: 1000, caption }, at);

/** From the choosing of a file to the end of its check. */
async function add(by: Viewer, caption = '', bytes?: Buffer): Promise<PhotoView> {
  const { photo, upload } = await begin(by, caption);
  expect((await sendFile(upload, bytes ?? (await plainJpeg(90, 60)))).status).toBe(204);
  await finishPhotoUpload(by, photo.id, at);
  await processPhoto({ photoId: photo.id });
  return onePhoto(photo.id);
}

const seenBy = (id: string): Promise<string[]> => Promise.all([null, cast.ada, cast.cleo, cast.mo, cast.bram].map((viewer) => photoAudience(viewer, id).catch((error: Error) => (error as Refusal).kind)));

describe('photographs of a sawyer’s own work', () => {
  it('stand on their page in their order, with words for who cannot see them', async () => {
    const [one, two, three] = [await add(cast.bram, 'A stack of walnut', await phoneJpeg()), await add(cast.bram), await add(cast.bram, 'The mill at a landing')];
    expect(one).toMatchObject({ status: 'ready', logId: null, picture: { width: 80, height: 120, alt: 'A stack of walnut' } });
    const ordered = await orderWorkPhotos(cast.bram, { ids: [three.id, two.id] });
    expect(ordered.map(({ id }) => id)).toEqual([three.id, two.id, one.id]);
    const { ownWork, photos } = await sawyerPage(cast.bram.id, null, at);
    expect(ownWork.map(({ picture }) => picture.alt)).toEqual(['The mill at a landing', expect.stringMatching(/^Work by .+, photograph 2$/), 'A stack of walnut']);
    expect(photos).toEqual([]);
    expect(await changePhoto(cast.bram, two.id, { caption: 'Slabs' })).toMatchObject({ caption: 'Slabs', picture: { alt: 'Slabs' } });
    await expect(changePhoto(cast.bram, two.id, { logId: two.id })).rejects.toMatchObject({ kind: 'invalid' });
    await removePhoto(cast.bram, two.id, at);
    expect((await sawyerPage(cast.bram.id, null, at)).ownWork.map(({ id }) => id)).toEqual([three.id, one.id]);
    expect((await sawyerPage(cast.cleo.id, null, at)).ownWork).toEqual([]);
  });

  it('are changed by that sawyer alone, and a stranger learns nothing', async () => {
    const { id } = await add(cast.bram);
    for (const other of [cast.ada, cast.cleo, cast.mo]) {
      await expect(changePhoto(other, id, { caption: 'mine' })).rejects.toMatchObject({ kind: 'notFound' });
      await expect(finishPhotoUpload(other, id, at)).rejects.toMatchObject({ kind: 'notFound' });
      await expect(removePhoto(other, id, at)).rejects.toMatchObject({ kind: 'notFound' });
    }
    const before = (await ownWorkPhotos(cast.bram)).map((photo) => photo.id);
    await orderWorkPhotos(cast.cleo, { ids: [id] });
    expect((await ownWorkPhotos(cast.bram)).map((photo) => photo.id)).toEqual(before);
    for (const other of [cast.ada, cast.mo]) await expect(begin(other)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('are seen by everyone while the page is, and by their sawyer and moderators otherwise', async () => {
    const { id } = await add(cast.bram);
    expect(await seenBy(id)).toEqual(['everyone', 'everyone', 'everyone', 'everyone', 'everyone']);
    await execute(`UPDATE account SET status = 'suspended', suspended_reason = 'x' WHERE id = $1`, [cast.bram.id]);
    expect(await seenBy(id)).toEqual(['notFound', 'notFound', 'notFound', 'viewer', 'viewer']);
    await expect(begin(cast.bram)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(begin(await viewerFor(cast.bram.id))).rejects.toMatchObject({ kind: 'forbidden' });
    expect(await reportable(cast.ada, 'photo', id)).toBeNull();
    await execute(`UPDATE account SET status = 'active', suspended_reason = NULL WHERE id = $1`, [cast.bram.id]);
    expect((await seenBy(id))[0]).toBe('everyone');
  });

  it('are for a profile: who has saved none is told to', async () => {
    await SawyerProfile.destroy({ where: { accountId: cast.dora.id } });
    await Account.update({ isSawyer: true }, { where: { id: cast.dora.id } });
    await expect(begin(await viewerFor(cast.dora.id))).rejects.toMatchObject({ kind: 'conflict', message: expect.stringContaining('Save your profile first') as string });
  });

  it('can be reported by whoever reads the page and taken out by a moderator, files and all', async () => {
    const { id } = await add(cast.bram, 'A neighbour’s yard');
    const row = await Photo.findByPk(id, { rejectOnEmpty: true });
    expect(await reportable(cast.bram, 'photo', id)).toBeNull();
    expect(await reportable(null, 'photo', id)).toMatchObject({ title: 'A neighbour’s yard', picture: { width: 90 } });
    await reportThing(cast.ada, { thing: 'photo', thingId: id, reason: 'other', note: 'My yard.', clientAddress: '192.0.2.1' }, at);
    const waiting = (await deskReports(cast.mo, false, 1)).reports.find(({ thingId }) => thingId === id);
    expect(waiting).toMatchObject({ about: 'A neighbour’s yard', listing: null, personId: cast.bram.id });
    await takeOut(cast.mo, { thing: 'photo', id, reason: 'It shows a neighbour.' }, at);
    for (const reader of [null, cast.bram, cast.mo]) await expect(photoAudience(reader, id)).rejects.toMatchObject({ kind: 'notFound' });
    expect((await sawyerPage(cast.bram.id, null, at)).ownWork.some((photo) => photo.id === id)).toBe(false);
    expect((await historyOf(cast.mo, 'account', cast.bram.id)).filter(({ thingId }) => thingId === id).map(({ action }) => action)).toEqual(['takeOut', 'accept', 'arrive']);
    await photoSweeps['remove files of removed photographs']?.(new Date(at.getTime() + 2 * 3_600_000));
    for (const key of allKeys(row)) await expect(readObject(key, 1e6)).rejects.toBeInstanceOf(MissingObject);
  });

  it('go along when the account’s data is taken', async () => {
    const { id } = await add(cast.bram, 'Taken along');
    const { photographs } = await accountExport(cast.bram, at);
    expect((photographs as { id: string }[]).find((photo) => photo.id === id)).toMatchObject({ listing: null, of_own_work: true, caption: 'Taken along', status: 'ready' });
  });

  it('stop at the most a page may have, however many are begun at once', async () => {
    const free = mostWorkPhotos - (await ownWorkPhotos(cast.cleo)).length;
    const begun = await Promise.allSettled(Array.from({ length: free + 3 }, () => begin(cast.cleo)));
    expect(begun.filter(({ status }) => status === 'fulfilled')).toHaveLength(free);
    expect(new Set((await ownWorkPhotos(cast.cleo)).map(({ id }) => id)).size).toBe(mostWorkPhotos);
    expect(await rows('SELECT position FROM photo WHERE sawyer_id = $1 GROUP BY position HAVING count(*) > 1', [cast.cleo.id])).toEqual([]);
  });

  it('leave with the account', async () => {
    await setUpSawyer(cast.dora.id);
    await Account.update({ passwordHash: await hashPassword('tamarack in the rain') }, { where: { id: cast.dora.id } });
    const dora = await viewerFor(cast.dora.id);
    const { id } = await add(dora, 'Gone soon');
    await closeAccount(dora, { password: 'tamarack in the rain' }, at);
    expect(await Photo.findByPk(id)).toMatchObject({ removedAt: at, caption: '', fileName: '' });
    for (const reader of [null, cast.mo]) await expect(photoAudience(reader, id)).rejects.toMatchObject({ kind: 'notFound' });
    // Whoever was still signed in on another device adds nothing any more.
    await expect(begin(dora)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('are in one place, says the database', async () => {
    const place = { ownerId: cast.bram.id, position: 1, originalKey: 'a', createdAt: at };
    await expect(Photo.create(place)).rejects.toThrow(/photo_in_one_place/);
    await expect(Photo.create({ ...place, sawyerId: cast.bram.id, ownerId: cast.ada.id })).rejects.toThrow(/photo_of_own_work/);
  });
});
