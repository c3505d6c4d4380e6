import { inTransaction, rows } from '../db.ts';
import { Account, HeldPayment } from '../models/index.ts';
import { lockBooking } from '../locks.ts';
import { takeBack } from '../take-back.ts';
import { record } from '../transition.ts';
import { system } from '../viewer.ts';
import { endBeforeSawing } from './cancel-booking.ts';

const suspension = system('suspension');

/** What came of it, counted. `left` are bookings that wait for the bank: they stay on the desk. */
export interface WoundUp {
  readonly cancelled: number;
  readonly left: number;
  readonly listings: number;
  readonly bids: number;
}

const isSuspended = async (accountId: string): Promise<boolean> => (await Account.findByPk(accountId, { attributes: ['status'] }))?.status === 'suspended';

async function endOne(number: number, at: Date): Promise<'cancelled' | 'left' | 'gone on'> {
  return inTransaction(async () => {
    const booking = await lockBooking(number);
    if (booking.status !== 'proposed' && booking.status !== 'agreed' && booking.status !== 'held') return 'gone on';
    const payment = await HeldPayment.findOne({ where: { bookingId: booking.id } });
    if (payment?.disputedAt) {
      await record(suspension, 'leaveToModerator', 'booking', booking.id, at, { data: { why: 'disputed' } });
      return 'left';
    }
    await endBeforeSawing(suspension, booking, { side: 'sawyer', saidBy: 'A moderator', reason: 'One of the two accounts can no longer take part.' }, at);
    return 'cancelled';
  });
}

/**
 * After a suspension: bookings before sawing are cancelled for both with everything returned, then open listings and bids are taken
 * back (an ended booking opens its listing first). Bookings on which sawing has begun go on; the desk shows them. Running it twice, or
 * after the account was restored, changes nothing.
 */
export async function windUpAccount(accountId: string, at: Date): Promise<WoundUp> {
  const found = await rows<{ number: number }>(
    `SELECT number FROM booking WHERE (landowner_id = $1 OR sawyer_id = $1) AND status IN ('proposed', 'agreed', 'held') ORDER BY number`,
    [accountId],
  );
  let cancelled = 0;
  let left = 0;
  for (const { number } of found) {
    if (!(await isSuspended(accountId))) break;
    const came = await endOne(number, at);
    if (came === 'cancelled') cancelled += 1;
    if (came === 'left') left += 1;
  }
  if (!(await isSuspended(accountId))) return { cancelled, left, listings: 0, bids: 0 };
  const back = await inTransaction(() => takeBack(accountId, suspension, 'The account was suspended.', at));
  return { cancelled, left, ...back };
}
