import { matchSpecies } from '../../src/domain/timber/species.ts';
import { beginPhotoUpload, type BegunUpload } from '../../src/server/commands/begin-photo-upload.ts';
import { finishPhotoUpload } from '../../src/server/commands/finish-photo-upload.ts';
import { processPhoto } from '../../src/server/jobs/handlers/process-photo.ts';
import { Log } from '../../src/server/models/listing.ts';
import type { Viewer } from '../../src/server/viewer.ts';
import { listingOf, trees } from './listings.ts';
import { who } from './people.ts';
import { drawPicture } from './pictures.ts';
import type { Timeline } from './timeline.ts';
import type { Tree } from './trees.ts';

// A picture is drawn once and sent by several landowners: drawing costs more than everything else of the story.
const drawn = new Map<string, Promise<Buffer>>();

function pictureOf(species: readonly string[], kind: 'end' | 'landing', variant: number): Promise<Buffer> {
  const key = `${kind} ${kind === 'end' ? species[0] : [...new Set(species)].join(' ')} ${variant}`;
  const known = drawn.get(key);
  if (known) return known;
  const seed = [...key].reduce((sum, letter) => (sum * 31 + letter.charCodeAt(0)) % 100_003, 7);
  const made = drawPicture(kind === 'end' ? { kind, species: species[0] ?? '' } : { kind, species }, seed);
  drawn.set(key, made);
  return made;
}

/** Sends one picture that was begun as the browser does: posts the file to storage, says that it is there, and has it checked. */
export async function sendPicture(by: Viewer, { photo, upload }: BegunUpload, fileName: string, bytes: Buffer, at: Date): Promise<void> {
  const form = new FormData();
  for (const [name, value] of Object.entries(upload.fields)) form.append(name, value);
  form.append('file', new Blob([new Uint8Array(bytes)], { type: 'image/jpeg' }), fileName);
  const answer = await fetch(upload.url, { method: 'POST', body: form });
  if (!answer.ok) throw new Error(`Storage did not take ${fileName}: ${answer.status} ${await answer.text()}`);
  await finishPhotoUpload(by, photo.id, at);
  await processPhoto({ photoId: photo.id });
}

const send = async (by: Viewer, listingId: string, logId: string | null, fileName: string, caption: string, bytes: Buffer, at: Date): Promise<void> =>
  sendPicture(by, await beginPhotoUpload(by, { listingId, fileName, type: 'image/jpeg', bytes: bytes.length, logId, caption }, at), fileName, bytes, at);

/** The landing first, then log ends, from the butt on. */
async function sendPictures(tree: Tree, at: Date): Promise<void> {
  const by = await who(tree.owner);
  const { id } = await listingOf(tree.key);
  const logs = await Log.findAll({ where: { listingId: id, removedAt: null }, order: [['position', 'ASC']] });
  const species = tree.logs.map((log) => matchSpecies(log.species)?.code ?? '');
  for (let index = 0; index < (tree.pictures ?? 0); index += 1) {
    const log = logs[index - 1];
    if (index === 0) await send(by, id, null, 'landing.jpg', 'The logs at the landing', await pictureOf(species, 'landing', 0), at);
    else if (log) await send(by, id, log.id, `log-${index}.jpg`, index === 1 ? 'The small end, with the tape across' : 'Its small end', await pictureOf([log.species], 'end', index % 2), at);
  }
}

// Two at a time, beside the telling: nothing else of the story waits for a picture.
const lanes: Promise<void>[] = [Promise.resolve(), Promise.resolve()];
let turn = 0;

/** Has pictures sent when a lane is free. */
export function inALane(sends: () => Promise<void>): void {
  const lane = turn++ % lanes.length;
  lanes[lane] = lanes[lane]?.then(sends) ?? Promise.resolve();
}

/** Pictures of the logs, on the evening of the day they were listed. */
export function tellPhotos(timeline: Timeline): void {
  for (const tree of trees) {
    if (!tree.pictures || tree.listed === null) continue;
    timeline.add(tree.listed, '18:55', async (at) => inALane(() => sendPictures(tree, at)));
  }
}

/** Resolves when every picture that was begun is ready to be seen. */
export const photosReady = async (): Promise<void> => void (await Promise.all(lanes));
