import { Bid, Booking, Mill } from '../models/index.ts';
import { inTransaction } from '../db.ts';
import { learnOfMill } from '../mill-notes.ts';

/** A job is settled: its mill's pace and yield are worked out anew. Done twice it changes nothing. */
export async function learnFromJob(bookingId: string): Promise<void> {
  await inTransaction(async () => {
    const booking = await Booking.findByPk(bookingId, { rejectOnEmpty: true });
    const bid = await Bid.findByPk(booking.bidId, { rejectOnEmpty: true });
    const mill = await Mill.findByPk(bid.millId, { lock: true });
    if (mill) await learnOfMill(mill);
  });
}
