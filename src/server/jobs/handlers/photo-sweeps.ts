import { Op } from 'sequelize';
import { allKeys } from '~/domain/photo-keys.ts';
import { refusePhoto } from '../../commands/settle-photo.ts';
import { rows } from '../../db.ts';
import { Photo } from '../../models/index.ts';
import { removeObjects, uploadFormSeconds } from '../../services/storage.ts';
import { enqueue } from '../queue.ts';
import type { Sweep } from './sweep.ts';

const before = (at: Date, seconds: number): Date => new Date(at.getTime() - seconds * 1000);

/**
 * A check whose job was lost, or gave up while storage was away, begins again. One that has failed for hours is refused: it is
 * the picture, not the weather. Leans on `photo_unfinished`.
 */
const checkAgain: Sweep = async (at) => {
  const stuck = await rows<{ id: string; arrivedAt: Date }>(
    `SELECT photo.id, event.at AS "arrivedAt" FROM photo JOIN event ON event.thing = 'photo' AND event.thing_id = photo.id AND event.action = 'arrive'
     WHERE photo.status = 'checking' AND photo.removed_at IS NULL AND event.at <= $1
       AND NOT EXISTS (SELECT 1 FROM pgboss.job WHERE name = 'process-photo' AND data ->> 'photoId' = photo.id::text AND state < 'completed')
     ORDER BY event.at LIMIT 100`,
    [before(at, 120)],
  );
  for (const { id, arrivedAt } of stuck) {
    if (arrivedAt < before(at, 6 * 3600)) await refusePhoto(id, 'We could not read this picture. Save another copy of it and choose that one.', at);
    else await enqueue('process-photo', { photoId: id });
  }
};

/** An upload that never came, two hours after its form ran out, is forgotten. */
const forgetUnsent: Sweep = async (at) => {
  await Photo.update({ removedAt: at }, { where: { status: 'awaiting', removedAt: null, createdAt: { [Op.lte]: before(at, uploadFormSeconds * 3) } } });
};

/**
 * Files of removed photographs leave storage. Their upload form must have run out first, or a file could still arrive behind us.
 * Leans on `photo_files_left`.
 */
const removeFiles: Sweep = async (at) => {
  const removed = await Photo.findAll({
    where: { removedAt: { [Op.not]: null }, filesRemovedAt: null, createdAt: { [Op.lte]: before(at, uploadFormSeconds * 1.1) } },
    order: [['removedAt', 'ASC']],
    limit: 100,
  });
  if (removed.length === 0) return;
  await removeObjects(removed.flatMap(allKeys));
  await Photo.update({ filesRemovedAt: at }, { where: { id: removed.map(({ id }) => id) } });
};

export const photoSweeps: Readonly<Record<string, Sweep>> = {
  'check photographs again': checkAgain,
  'forget photographs that never came': forgetUnsent,
  'remove files of removed photographs': removeFiles,
};
