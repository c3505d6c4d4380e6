import { bookingStates } from '~/domain/states/booking.ts';
import { signingDeadline } from '~/domain/time.ts';
import { paths } from '~/domain/paths.ts';
import { tallyToSign } from '~/emails/tally-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { tallyWork } from '../tally-work.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/** The same from a phone, where a repeated send finds it offered and changes nothing. */
export async function offerOnce(by: Viewer, input: { readonly booking: number; readonly endedBySawyer: boolean; readonly note: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    if (rolesOnBooking(by, booking).has('sawyer') && !['held', 'sawing'].includes(booking.status)) return;
    await offerTally(by, input, at);
  });
}

/**
 * The sawyer offers the tally for signing, or a moderator does when the sawyer has left: then it may be empty. From now on the landowner has 72 hours; unanswered it counts as signed, up to the hold.
 * @throws Refusal `conflict` for a tally with nothing in it
 */
export async function offerTally(by: Viewer, input: { readonly booking: number; readonly endedBySawyer: boolean; readonly note: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    const roles = rolesOnBooking(by, booking);
    authorize(by, 'booking', 'offerTally', roles, booking.status);
    const work = await tallyWork(booking);
    const mayBeEmpty = input.endedBySawyer && !roles.has('sawyer');
    if (!work || (work.boards.length + work.culls.length + work.clock.length === 0 && !mayBeEmpty)) throw conflict('There is nothing in the tally yet. Enter boards, a cull log or hours first.');
    const signBy = signingDeadline(at);
    await work.tally.update({ offeredAt: at, endedBySawyer: input.endedBySawyer, note: input.note.trim().slice(0, 1000) });
    await transition(bookingStates, 'offerTally', booking, by, at, { signBy, signReminders: 0, updatedAt: at });
    const counted = await tallyWork(booking);
    await work.tally.update({ contentSha256: counted?.sha256 ?? null });
    const { landowner, sawyer } = await partiesOf(booking);
    await enqueue('send-mail', tallyToSign(landowner, sawyer.name, counted?.settlement.costCents ?? 0, signBy, booking.timeZone, linkTo(paths.signTally(booking.number)), false));
  });
}
