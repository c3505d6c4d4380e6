import { readBoardLines } from '~/domain/timber/board-lines.ts';
import type { BoardsLeftForm } from '~/schemas/after-forms.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { invalid } from '../errors.ts';
import { lockBooking } from '../locks.ts';
import { BoardsLeft } from '../models/index.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/** Puts up a notice of boards left over, in place of the one that stands. @throws Refusal `invalid` for lines that cannot be read */
export async function offerBoardsLeft(by: Viewer, number: number, form: BoardsLeftForm, at: Date): Promise<void> {
  const read = readBoardLines(form.boards);
  if (!read.ok) throw invalid(read.problems);
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'offerBoardsLeft', rolesOnBooking(by, booking), booking.status);
    await BoardsLeft.update({ takenDownAt: at }, { where: { bookingId: booking.id, takenDownAt: null } });
    await BoardsLeft.create({ bookingId: booking.id, listingId: booking.listingId, boards: [...read.value], asks: form.asks, putUpAt: at });
    await record(by, 'offerBoardsLeft', 'booking', booking.id, at);
  });
}

/** Takes the notice down. Without one nothing happens. */
export async function takeDownBoardsLeft(by: Viewer, number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'offerBoardsLeft', rolesOnBooking(by, booking), booking.status);
    const [down] = await BoardsLeft.update({ takenDownAt: at }, { where: { bookingId: booking.id, takenDownAt: null } });
    if (down > 0) await record(by, 'takeDownBoardsLeft', 'booking', booking.id, at);
  });
}
