import { randomBytes } from 'node:crypto';
import { addDays, dayAt } from '~/domain/time.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { startCheckout } from '~/server/commands/start-checkout.ts';
import { Account, Booking, DayProposal, Piece } from '~/server/models/index.ts';
import { hashPassword } from '~/server/passwords.ts';
import type { Viewer } from '~/server/viewer.ts';
import { PASSWORD } from '../../support/browser.ts';
import { viewerFor } from '../../support/cast.ts';
import { bidOf, makeOpenListing, setUpSawyer } from '../../support/sawing-market.ts';
import type { Job } from './job.ts';

// Run by itself beside the running product: makes a landowner, a sawyer and a held booking for tomorrow, and says them as a line of JSON;
// as often as its second argument says. With `agreed` the day is in four days and the hold is left to be paid.
const [standing, times] = process.argv.slice(2);
const unpaid = standing === 'agreed';
const at = new Date();
const person = async (name: string, as: { isLandowner?: boolean; isSawyer?: boolean }): Promise<{ viewer: Viewer; email: string }> => {
  const email = `${name.toLowerCase()}-${randomBytes(4).toString('hex')}@day.example`;
  const account = await Account.create({ email, emailConfirmedAt: at, passwordHash: await hashPassword(PASSWORD), name, createdAt: at, ...as });
  return { viewer: await viewerFor(account.id), email };
};

async function payHold(landowner: Awaited<ReturnType<typeof person>>, number: number): Promise<void> {
  const cardPage = await startCheckout(landowner.viewer, { booking: number }, new Date());
  await fetch(cardPage, {
    method: 'POST', redirect: 'manual',
    body: new URLSearchParams({ email: landowner.email, cardNumber: '4242424242424242', cardExpiry: '12/49', cardCvc: '123', billingName: 'Ada', billingPostalCode: '54665' }),
  });
  const until = Date.now() + 20_000;
  while ((await Booking.findOne({ where: { number }, rejectOnEmpty: true })).status !== 'held') {
    if (Date.now() > until) throw new Error('The hold never came.');
    await new Promise((done) => setTimeout(done, 100));
  }
}

async function makeOne(): Promise<Job> {
  const ada = await person('Ada', { isLandowner: true });
  const bram = await person('Bram', { isSawyer: true });
  const mill = await setUpSawyer(bram.viewer.id);
  const listing = await makeOpenListing(ada.viewer.id, { closesAt: new Date(at.getTime() + 20 * 86_400_000) });
  await listing.update({
    access: { truck: 'to-the-logs', gateWidthIn: 120, slope: 'level', lines: 'none', machine: 'tractor', machineNote: '', water: 'yes', helpers: 2 },
    landing: { pad: true, offDirt: true, parallel: true, rolling: true, reDecks: 'not-needed', note: 'Behind the red barn.' },
    waste: { slabs: 'left', sawdust: 'left' },
  });
  await Piece.create({ listingId: listing.id, position: 1, label: 'Table top', thicknessIn: 1.25, widthIn: 8, lengthFt: 12, count: 12, sizing: 'full-sawn' });
  const bid = await placeBid(bram.viewer, listing.number, bidOf(mill, { days: [] }), at);
  const number = await chooseBid(ada.viewer, bid, 1, at);
  const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
  await proposeDays(bram.viewer, { booking: number, days: [addDays(dayAt(at, booking.timeZone), unpaid ? 4 : 1)], startTime: '08:00', note: '' }, at);
  await confirmDays(ada.viewer, { booking: number, proposal: (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id }, at);
  if (!unpaid) await payHold(ada, number);
  return { number, landowner: ada.email, sawyer: bram.email, password: PASSWORD };
}

const jobs: Job[] = [];
for (let made = 0; made < Number(times ?? 1); made += 1) jobs.push(await makeOne());
process.stdout.write(jobs.map((job) => `${JSON.stringify(job)}\n`).join(''), () => process.exit(0));
