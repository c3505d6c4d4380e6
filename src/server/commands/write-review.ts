import { reviewWritten } from '~/emails/booking-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction, refusedBy } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { Review } from '../models/booking.ts';
import { bookingLink, otherParty, partiesOf } from '../parties.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * Either side of a settled booking reviews the other, once.
 * @throws Refusal `conflict` when it is not settled yet or was reviewed before
 */
export async function writeReview(by: Viewer, input: { readonly booking: number; readonly stars: number; readonly body: string }, at: Date): Promise<void> {
  try {
    await inTransaction(async () => {
      const booking = await lockBooking(input.booking);
      authorize(by, 'booking', 'review', rolesOnBooking(by, booking), booking.status);
      const other = otherParty(await partiesOf(booking), by.id);
      const review = await Review.create({ bookingId: booking.id, authorId: by.id, subjectId: other.id, stars: input.stars, body: input.body, createdAt: at });
      await record(by, 'review', 'review', review.id, at, { data: { booking: booking.number, stars: input.stars } });
      await enqueue('send-mail', reviewWritten(other, by, bookingLink(booking)));
    });
  } catch (error) {
    if (refusedBy(error, 'review_booking_id_author_id_key')) throw conflict('You have reviewed this job already.');
    throw error;
  }
}
