import { formatCents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { listingStates } from '~/domain/states/listing.ts';
import type { Settlement } from '~/domain/trade/settlement.ts';
import { tallySigned } from '~/emails/tally-letters.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { lockBooking } from '../locks.ts';
import { type Booking, Listing } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { withTallySheet } from '../tally-sheet.ts';
import { type TallyWork, tallyWork } from '../tally-work.ts';
import { transition } from '../transition.ts';
import { system, type Actor, type Viewer } from '../viewer.ts';
import { settleBooking } from './settle-booking.ts';

const howWords = { landowner: 'The landowner signed the tally.', deadline: 'The tally was not answered in 72 hours, so it counts as signed, up to what was held.', moderator: 'A moderator decided the queried lines; the tally stands as decided.' } as const;

/** What each side reads of the money when the tally is signed. */
function moneyLines(settlement: Settlement, side: 'landowner' | 'sawyer'): (readonly [string, string])[] {
  const lines: (readonly [string, string])[] = [['The work comes to', formatCents(settlement.costCents)]];
  if (settlement.overHold) return [...lines, ['More than is held by', formatCents(settlement.overHold.lackingCents)]];
  if (side === 'landowner') return [...lines, ['Back to your card', formatCents(settlement.refundCents)]];
  return [...lines, ['Our fee', formatCents(settlement.feeCents)], ['To you', formatCents(settlement.transferCents)]];
}

/**
 * Signs a tally that the caller has locked and allowed: the settlement is frozen, the booking and listing move on and paying out begins.
 */
export async function signWork(booking: Booking, work: TallyWork, by: Actor, signedBy: 'landowner' | 'deadline' | 'moderator', name: string | null, at: Date): Promise<void> {
  await work.tally.update({ signedAt: at, signedBy, signedName: name, contentSha256: work.sha256, settlement: work.settlement });
  await transition(bookingStates, 'sign', booking, by, at, { updatedAt: at, signBy: null }, { data: { signedBy, sha256: work.sha256 } });
  const listing = await Listing.findByPk(booking.listingId, { lock: true, rejectOnEmpty: true });
  if (listing.status === 'matched') await transition(listingStates, 'finish', listing, by, at, { updatedAt: at });
  const { landowner, sawyer } = await partiesOf(booking);
  await enqueue('send-mail', await withTallySheet(tallySigned(landowner, howWords[signedBy], moneyLines(work.settlement, 'landowner'), linkTo(paths.receipt(booking.number))), booking, work, 'landowner'));
  await enqueue('send-mail', await withTallySheet(tallySigned(sawyer, howWords[signedBy], moneyLines(work.settlement, 'sawyer'), linkTo(paths.receipt(booking.number))), booking, work, 'sawyer'));
  await settleBooking(by, booking.id, at);
}

/**
 * The landowner signs the tally that they read.
 * @param sha256 of the content that was on the screen: a tally that has changed since is refused
 */
export async function signTally(by: Viewer, input: { readonly booking: number; readonly sha256: string; readonly name: string }, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(input.booking);
    authorize(by, 'booking', 'signTally', rolesOnBooking(by, booking), booking.status);
    const work = await tallyWork(booking);
    if (!work || work.sha256 !== input.sha256) throw conflict('The tally has changed since you read it. Read it as it stands now, then sign.');
    await signWork(booking, work, by, 'landowner', input.name, at);
  });
}

/** Signs a tally whose 72 hours have passed, if it still waits. */
export async function signByDeadline(number: number, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    if (booking.status !== 'tallied' || !booking.signBy || booking.signBy > at) return;
    const work = await tallyWork(booking);
    if (work) await signWork(booking, work, system('deadline'), 'deadline', null, at);
  });
}
