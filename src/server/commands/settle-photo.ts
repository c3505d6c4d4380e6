import { photoStates } from '~/domain/states/photo.ts';
import { inTransaction } from '../db.ts';
import { Photo } from '../models/index.ts';
import { transition } from '../transition.ts';
import { system } from '../viewer.ts';

const checker = system('photograph check');

/** A photograph that may still be settled, locked; null when it was removed or is settled already. */
async function unsettled(photoId: string): Promise<Photo | null> {
  const photo = await Photo.findByPk(photoId, { lock: true });
  return photo && photo.removedAt === null && photo.status === 'checking' ? photo : null;
}

export interface MadePicture {
  readonly width: number;
  readonly height: number;
  readonly blur: string;
  /** Size of the original. */
  readonly bytes: number;
}

/** Its renditions are in storage: it is shown from now on. */
export async function acceptPhoto(photoId: string, made: MadePicture, at: Date): Promise<void> {
  await inTransaction(async () => {
    const photo = await unsettled(photoId);
    if (photo) await transition(photoStates, 'accept', photo, checker, at, { ...made, readyAt: at });
  });
}

/** It cannot be used; the reason is shown at that file to the person who sent it. */
export async function refusePhoto(photoId: string, because: string, at: Date): Promise<void> {
  await inTransaction(async () => {
    const photo = await unsettled(photoId);
    if (photo) await transition(photoStates, 'refuse', photo, checker, at, { refusedBecause: because }, { data: { because } });
  });
}
