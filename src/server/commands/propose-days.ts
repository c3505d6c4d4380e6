import { checkProposedDays } from '~/domain/trade/milling-days.ts';
import type { Day } from '~/domain/time.ts';
import { daysProposed } from '~/emails/booking-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { DayProposal } from '../models/booking.ts';
import { bookingLink, otherParty, partiesOf } from '../parties.ts';
import { sawyerDays } from '../queries/open-days.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

export interface ProposedDays {
  readonly booking: number;
  readonly days: readonly Day[];
  /** `HH:MM` on the site's clock. */
  readonly startTime: string;
  readonly note: string;
}

/**
 * Either side proposes the milling days; an open proposal of either side is replaced. Nothing is booked until the other confirms.
 * @throws Refusal `invalid` for days that cannot be, `conflict` when the sawyer is booked on one of them or has it off
 */
export async function proposeDays(by: Viewer, input: ProposedDays, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'proposeDay', rolesOnBooking(by, booking), booking.status);
    const { days, problems } = checkProposedDays(input.days, input.startTime, booking.timeZone, at);
    if (problems.length > 0) throw invalid(problems);

    const standing = await sawyerDays(booking.sawyerId, booking.timeZone, at, [], booking.id);
    const clash = days.find((day) => standing.some((one) => one.day === day && one.state === 'booked'));
    if (clash) throw conflict(`The sawyer is booked on ${clash}. Choose another day.`);
    const away = days.find((day) => standing.some((one) => one.day === day && one.away));
    if (away) throw conflict(by.id === booking.sawyerId ? `You have ${away} off. Take it out of your days off first, or choose another day.` : `The sawyer has ${away} off. Choose another day.`);

    await DayProposal.update({ status: 'replaced', decidedAt: at }, { where: { bookingId: booking.id, status: 'open' } });
    await DayProposal.create({ bookingId: booking.id, proposedBy: by.id, days: [...days], startTime: input.startTime, note: input.note.trim().slice(0, 1000), createdAt: at });
    await booking.update({ updatedAt: at });
    await record(by, 'proposeDays', 'booking', booking.id, at, { data: { days } });

    const parties = await partiesOf(booking);
    const other = otherParty(parties, by.id);
    await enqueue('send-mail', daysProposed(other, { name: by.name, email: by.email }, days, input.startTime, input.note.trim(), bookingLink(booking)));
  });
}
