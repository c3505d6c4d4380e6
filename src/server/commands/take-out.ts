import { takenOut } from '~/emails/desk-letters.ts';
import { authorize } from '../authorize.ts';
import { readerOf } from '../bidders.ts';
import { inTransaction } from '../db.ts';
import { conflict, notFound } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Message, Photo, Review } from '../models/index.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/** What a moderator takes out by itself, without what it stands in. */
export const takenOutAlone = ['message', 'review', 'photo'] as const;
export type TakenOutAlone = (typeof takenOutAlone)[number];
export const isTakenOutAlone = (thing: string): thing is TakenOutAlone => takenOutAlone.some((one) => one === thing);

const named: Readonly<Record<TakenOutAlone, string>> = { message: 'message', review: 'review', photo: 'photograph' };

/** Locks each kind of thing, and says whether it is out already, whose it is, and how it is taken out. */
const found: Readonly<Record<TakenOutAlone, (id: string) => Promise<{ readonly out: boolean; readonly writerId: string; readonly take: (reason: string, at: Date) => Promise<unknown> } | null>>> = {
  message: async (id) => {
    const message = await Message.findByPk(id, { lock: true });
    return message && { out: message.hiddenAt !== null, writerId: message.senderId, take: (hiddenReason, hiddenAt) => message.update({ hiddenAt, hiddenReason }) };
  },
  review: async (id) => {
    const review = await Review.findByPk(id, { lock: true });
    return review && { out: review.hiddenAt !== null, writerId: review.authorId, take: (hiddenReason, hiddenAt) => review.update({ hiddenAt, hiddenReason }) };
  },
  photo: async (id) => {
    const photo = await Photo.findByPk(id, { lock: true });
    return photo && { out: photo.removedAt !== null, writerId: photo.ownerId, take: (_reason, removedAt) => photo.update({ removedAt, caption: '', fileName: '' }) };
  },
};

/**
 * Takes a message out of its conversation, a review off the pages and out of the mean of the stars, or a photograph off its listing,
 * its day or a sawyer's page. Whoever wrote or took it is told why; the words of a message or review are kept for the record, the files of a photograph are
 * deleted by the sweep.
 * @throws Refusal `forbidden` for all but moderators, `notFound`, `conflict` when it is out already
 */
export async function takeOut(by: Viewer, input: { readonly thing: TakenOutAlone; readonly id: string; readonly reason: string }, at: Date): Promise<void> {
  authorize(by, input.thing, 'takeOut', baseRoles(by));
  await inTransaction(async () => {
    const thing = await found[input.thing](input.id);
    if (!thing) throw notFound(named[input.thing]);
    if (thing.out) throw conflict(`This ${named[input.thing]} is taken out already.`);
    await thing.take(input.reason, at);
    await record(by, 'takeOut', input.thing, input.id, at, { data: { reason: input.reason } });
    await enqueue('send-mail', takenOut(await readerOf(thing.writerId), named[input.thing], input.reason));
  });
}
