import { fitWithin, renditionEdges } from '~/domain/photo.ts';
import type { ShownOnTheDay } from '~/schemas/day-photo.ts';
import { ApiRefusal, callApi } from '~/islands/call-api.ts';
import { database, holderOf, markSignedOut, tellChange, type Picture } from './store.ts';

/** A camera's picture is made smaller before it is kept: signal in the woods is slow, and a phone's storage is not endless. */
const QUALITY = 0.85;

async function shrunk(file: File): Promise<Pick<Picture, 'fileName' | 'type' | 'bytes'>> {
  try {
    const picture = await createImageBitmap(file);
    const { width, height } = fitWithin(picture.width, picture.height, renditionEdges.large);
    const canvas = new OffscreenCanvas(width, height);
    canvas.getContext('2d')?.drawImage(picture, 0, 0, width, height);
    const small = await canvas.convertToBlob({ type: 'image/jpeg', quality: QUALITY });
    if (small.type === 'image/jpeg' && small.size < file.size) return { fileName: 'photograph.jpg', type: small.type, bytes: await small.arrayBuffer() };
  } catch {
    // A kind of picture that this browser cannot read is sent as it is; the server decides.
  }
  return { fileName: file.name, type: file.type, bytes: await file.arrayBuffer() };
}

/** Keeps a photograph on the phone. It is on its disk when this returns, and sent when there is signal. */
export async function keepPicture(of: { readonly accountId: string; readonly booking: number; readonly shows: ShownOnTheDay; readonly hitId: string | null }, file: File): Promise<void> {
  const kept: Picture = { id: crypto.randomUUID(), ...of, ...(await shrunk(file)), takenAt: new Date().toISOString(), because: null };
  const work = (await database()).transaction('pictures', 'readwrite', { durability: 'strict' });
  await work.store.add(kept);
  await work.done;
  tellChange();
}

/** The photographs of a booking that the server does not have, oldest first. */
export async function picturesOf(accountId: string, booking: number): Promise<Picture[]> {
  const kept = await (await database()).getAllFromIndex('pictures', 'ofBooking', [accountId, booking]);
  return kept.sort((a, b) => a.takenAt.localeCompare(b.takenAt));
}

/** Drops a photograph for good: only ever because a person said so. */
export async function dropPicture(id: string): Promise<void> {
  await (await database()).delete('pictures', id);
  tellChange();
}

interface Begun {
  readonly upload: { readonly url: string; readonly fields: Readonly<Record<string, string>> } | null;
}

/** Sends one photograph: begun under its own id, stored, and said to have arrived. Done again it changes nothing. */
async function sendPicture({ id, accountId, booking, shows, hitId, fileName, type, bytes }: Picture): Promise<void> {
  const { upload } = await callApi<Begun>('POST', `/api/bookings/${booking}/photos`, { account: accountId, id, shows, hitId, fileName, type, bytes: bytes.byteLength });
  if (upload) {
    const form = new FormData();
    for (const [name, value] of Object.entries(upload.fields)) form.append(name, value);
    form.append('file', new Blob([bytes], { type }), fileName);
    const stored = await fetch(upload.url, { method: 'POST', body: form, signal: AbortSignal.timeout(120_000) }).catch(() => null);
    if (!stored?.ok) throw new ApiRefusal(stored?.status === 400 ? 400 : 0, 'Storage did not take this photograph.');
    await callApi('POST', `/api/photos/${id}/arrived`);
  }
}

/** Refusals that another try does not change. */
const forGood = ({ status }: ApiRefusal): boolean => status >= 400 && status < 500 && ![401, 408, 429].includes(status);

async function sendKept(): Promise<void> {
  const holder = await holderOf();
  if (!holder) return;
  const db = await database();
  const waiting = (await db.getAll('pictures')).filter(({ accountId, because }) => accountId === holder.accountId && because === null).sort((a, b) => a.takenAt.localeCompare(b.takenAt));
  for (const picture of waiting) {
    try {
      await sendPicture(picture);
      await db.delete('pictures', picture.id);
    } catch (error) {
      if (!(error instanceof ApiRefusal)) throw error;
      if (error.status === 401) await markSignedOut(true);
      if (!forGood(error)) return;
      await db.put('pictures', { ...picture, because: error.message });
    }
    tellChange();
  }
}

/** Sends the photographs that wait. Boards go first and are never kept waiting by a picture; one page of a phone sends at a time. */
export async function sendPictures(): Promise<void> {
  if (!('locks' in navigator)) return sendKept();
  await navigator.locks.request('skidway-pictures', { ifAvailable: true }, async (lock) => (lock ? sendKept() : undefined));
}
