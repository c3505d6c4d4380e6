import { generateSync } from 'otplib';
import { randomUUID } from 'node:crypto';
import { addDays, dayAt } from '~/domain/time.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { chooseBid } from '~/server/commands/choose-bid.ts';
import { confirmDays } from '~/server/commands/confirm-days.ts';
import { enterTally } from '~/server/commands/enter-tally.ts';
import { makeModerator } from '~/server/commands/make-moderator.ts';
import { offerTally } from '~/server/commands/offer-tally.ts';
import { placeBid } from '~/server/commands/place-bid.ts';
import { proposeDays } from '~/server/commands/propose-days.ts';
import { queryTally } from '~/server/commands/query-tally.ts';
import { reportThing } from '~/server/commands/report-thing.ts';
import { openConversation, sendMessage } from '~/server/commands/send-message.ts';
import { startSawing } from '~/server/commands/start-sawing.ts';
import { execute, inTransaction } from '~/server/db.ts';
import { Account, Booking, DayProposal, HeldPayment, Message, Report } from '~/server/models/index.ts';
import { hashPassword } from '~/server/passwords.ts';
import { transition } from '~/server/transition.ts';
import { system, type Viewer } from '~/server/viewer.ts';
import { Browser, PASSWORD } from './browser.ts';
import { viewerFor } from './cast.ts';
import { openListing } from './listings.ts';
import { bidOf, setUpSawyer } from './sawing-market.ts';

/** Who asks, in the order of the access table's columns. */
export const askers = ['visitor', 'other landowner', 'owner', 'other sawyer', 'chosen sawyer', 'moderator without second factor', 'moderator'] as const;
export type Asker = (typeof askers)[number];

/** One of everything, and a signed-in browser for each asker. */
export interface AccessWorld {
  readonly browsers: Readonly<Record<Asker, Browser>>;
  /** Open, with a bid of the chosen sawyer. */
  readonly open: number;
  /** Another open one, to be withdrawn. */
  readonly spare: number;
  /** A booking with a day agreed, to be paid. */
  readonly agreed: number;
  /** A booking whose tally is queried. */
  readonly queried: number;
  readonly bid: string;
  readonly conversation: string;
  /** Written by the chosen sawyer to the owner. */
  readonly message: string;
  readonly report: string;
  readonly owner: string;
  readonly sawyer: string;
}

/** Makes the world through the commands, on the database of the running product. Its environment must be this process's already. */
export async function makeAccessWorld(origin: string): Promise<AccessWorld> {
  const at = new Date();
  const today = dayAt(at, 'America/Chicago');
  const passwordHash = await hashPassword(PASSWORD);
  const address = (name: string): string => `${name.toLowerCase()}@access.example`;
  const person = async (name: string, as: { isLandowner?: boolean; isSawyer?: boolean; isModerator?: boolean }): Promise<Viewer> =>
    viewerFor((await Account.create({ email: address(name), emailConfirmedAt: at, passwordHash, name, createdAt: at, ...as })).id);
  const ada = await person('Ada', { isLandowner: true });
  const bram = await person('Bram', { isSawyer: true });
  const cleo = await person('Cleo', { isSawyer: true });
  await person('Dora', { isLandowner: true });
  await person('Nil', { isModerator: true });
  await person('Mo', { isLandowner: true });
  const mill = await setUpSawyer(bram.id);
  await setUpSawyer(cleo.id);

  const listed = () => openListing(ada, { cameDownOn: addDays(today, -9), closesOn: addDays(today, 14) }, at);
  const open = await listed();
  const bid = await placeBid(bram, open.number, bidOf(mill, { days: [] }), at);
  const booked = async (inDays: number): Promise<Booking> => {
    const number = await chooseBid(ada, await placeBid(bram, (await listed()).number, bidOf(mill, { days: [] }), at), 1, at);
    await proposeDays(bram, { booking: number, days: [addDays(today, inDays)], startTime: '08:00', note: '' }, at);
    const booking = await Booking.findOne({ where: { number }, rejectOnEmpty: true });
    await confirmDays(ada, { booking: number, proposal: (await DayProposal.findOne({ where: { bookingId: booking.id, status: 'open' }, rejectOnEmpty: true })).id }, at);
    return booking.reload();
  };
  const agreed = await booked(10);
  const queried = await booked(11);
  await inTransaction(async () => {
    const payment = await HeldPayment.findOne({ where: { bookingId: queried.id }, lock: true, rejectOnEmpty: true });
    await transition(bookingStates, 'hold', queried, system('test'), at);
    await transition(paymentStates, 'receive', payment, system('test'), at);
  });
  await startSawing(bram, queried.number, at);
  const board = randomUUID();
  await enterTally(bram, { booking: queried.number, entries: [{ kind: 'board', id: board, logId: null, boardKind: 'board', thicknessIn: 1, widthIn: 8, secondWidthIn: null, lengthFt: 12, count: 20 }] }, at);
  await offerTally(bram, { booking: queried.number, endedBySawyer: false, note: '' }, at);
  await queryTally(ada, { booking: queried.number, lines: [{ line: 'board', lineId: board }], says: 'I counted 18.' }, at);

  const conversation = await openConversation(bram, open.number, at);
  await sendMessage(bram, { conversation: conversation.id, body: 'May I look at the logs?' }, at);
  const message = await Message.findOne({ where: { conversationId: conversation.id }, rejectOnEmpty: true });
  await reportThing(cleo, { thing: 'listing', thingId: open.id, reason: 'other', note: '', clientAddress: '' }, at);
  const report = await Report.findOne({ where: { thingId: open.id }, rejectOnEmpty: true });

  const { secret } = await makeModerator({ email: address('Mo'), name: null, password: null }, at);
  await execute('DELETE FROM rate_limit');
  const browser = async (name: string): Promise<Browser> => {
    const one = new Browser(origin);
    await one.signIn(address(name), PASSWORD);
    return one;
  };
  const mo = await browser('Mo');
  const entered = await mo.post('/sign-in/second-factor', { code: generateSync({ secret }) });
  if (entered.status !== 303) throw new Error(`The second step answered ${entered.status}.`);
  return {
    browsers: {
      visitor: new Browser(origin), 'other landowner': await browser('Dora'), owner: await browser('Ada'), 'other sawyer': await browser('Cleo'), 'chosen sawyer': await browser('Bram'),
      'moderator without second factor': await browser('Nil'), moderator: mo,
    },
    open: open.number, spare: (await listed()).number, agreed: agreed.number, queried: queried.number, bid, conversation: conversation.id, message: message.id, report: report.id, owner: ada.id, sawyer: bram.id,
  };
}
