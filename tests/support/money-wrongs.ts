import { Booking, Charge, HeldPayment, ProviderCall } from '~/server/models/index.ts';
import { checkBooks, type MoneyHouse } from './money-market.ts';

/** What no order of events may do. */
export async function wrongs(house: MoneyHouse, bookings: readonly Booking[]): Promise<string[]> {
  const faults = await checkBooks(house, bookings.map(({ id }) => id));
  const groups = house.fake.control.books().groups;
  for (const booking of bookings) {
    const group = groups[`booking-${booking.number}`];
    if (group && group.transferred - group.reversed + group.refunded > group.charged) faults.push(`booking ${booking.number}: paid out ${group.transferred - group.reversed + group.refunded} of ${group.charged}`);
    const payment = await HeldPayment.findOne({ where: { bookingId: booking.id }, rejectOnEmpty: true });
    const calls = await ProviderCall.findAll({ where: { bookingId: booking.id } });
    const disputed = (await Charge.findAll({ where: { paymentId: payment.id } })).some((charge) => house.fake.control.objects('dispute').some((each) => each.charge === charge.providerChargeId && each.status !== 'won'));
    const open = calls.filter(({ status }) => !['done', 'stuck', 'dropped'].includes(status));
    if (!disputed && open.length > 0) faults.push(`booking ${booking.number}: ${open.map((call) => `${call.kind} ${call.status} ${call.attempts} ${call.error ?? ''}`).join('; ')}`);
    const now = await Booking.findByPk(booking.id, { rejectOnEmpty: true });
    if (now.status === 'held' && payment.status !== 'held') faults.push(`booking ${booking.number} is held, its payment ${payment.status}`);
    // Signed, and the bank had given the whole hold back to the card: nothing was left to settle.
    const gone = disputed && payment.status === 'refunded';
    if (now.status === 'settled' && payment.status !== 'settled' && !gone) faults.push(`booking ${booking.number} is settled, its payment ${payment.status}`);
    if (['cancelled', 'lapsed'].includes(now.status) && !['void', 'refunded', 'settled'].includes(payment.status) && !disputed && calls.every(({ status }) => status === 'done' || status === 'dropped')) faults.push(`booking ${booking.number} is ${now.status}, its payment ${payment.status}`);
  }
  return faults;
}
