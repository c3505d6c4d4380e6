import { formatCents } from '~/domain/money.ts';
import { formatInstant } from '~/domain/time.ts';
import { paths } from '~/domain/paths.ts';
import type { BookingPage, Happened } from '~/server/queries/booking-page.ts';

/** What a booking's page says first: where it stands and the one thing to do. */
export interface NextStep {
  readonly title: string;
  readonly text: string;
  readonly kind: 'good' | 'care' | 'note';
  readonly action?: { readonly label: string; readonly href: string };
}

const when = (page: BookingPage, instant: Date | null): string => (instant ? formatInstant(instant, page.timeZone) : 'the agreed day');

function noShowStep(page: BookingPage, report: { readonly absentMe: boolean; readonly contested: boolean; readonly answerBy: Date }): NextStep {
  const read = { label: 'Read the report', href: paths.noShow(page.number) };
  if (report.contested) return { kind: 'note', title: 'A moderator decides who did not come', text: 'The money stays held until then.', action: read };
  if (report.absentMe) return { kind: 'care', title: `${page.otherName} says that you did not come`, text: `Answer by ${when(page, report.answerBy)}. Unanswered, the report stands and the booking ends.`, action: { label: 'Answer', href: paths.noShow(page.number) } };
  return { kind: 'note', title: 'Reported: waiting for an answer', text: `Until ${when(page, report.answerBy)}. Unanswered, the report stands and the booking ends.`, action: read };
}

/** The next step of a booking for the side that reads it. */
export function nextStep(page: BookingPage): NextStep {
  const landowner = page.side === 'landowner';
  const other = page.otherName;
  const tally = { label: landowner ? 'Read the tally' : 'Open the tally', href: landowner ? paths.signTally(page.number) : paths.tally(page.number) };
  switch (page.status) {
    case 'proposed':
      if (page.proposal && !page.proposal.mine) return { kind: 'care', title: `${other} proposes a day`, text: 'Confirm it below, or propose another.' };
      if (page.proposal) return { kind: 'note', title: `Waiting for ${other}`, text: 'You proposed a day; nothing is booked until it is confirmed.' };
      return { kind: 'care', title: 'Agree on a day', text: 'Either of you proposes, the other confirms.' };
    case 'agreed':
      return landowner
        ? { kind: 'care', title: `Pay the hold of ${formatCents(page.holdCents)}`, text: `By ${when(page, page.payBy)}, or the booking lapses. It is held until you sign the tally; what is not used returns to your card.`, action: { label: 'Pay the hold', href: paths.pay(page.number) } }
        : { kind: 'note', title: `Waiting for ${other} to pay the hold`, text: `Until ${when(page, page.payBy)}. Do not set out before this page says that the money is held.` };
    case 'held':
      if (page.noShow.open) return noShowStep(page, page.noShow.open);
      return { kind: 'good', title: `Set for ${when(page, page.startsAt)}`, text: landowner ? 'The money is held until you sign the tally. Have the logs off the dirt and within reach, dry stickers ready, and children and animals away.' : 'The money is held. The place and the access notes are below.', ...(landowner ? {} : { action: tally }) };
    case 'sawing':
      return { kind: 'good', title: 'Sawing', text: landowner ? `${other} tallies the boards. You sign the tally when it is offered to you.` : 'Tally each board, then offer the tally for signing.', action: landowner ? tally : tally };
    case 'tallied':
      return landowner
        ? { kind: 'care', title: 'Sign the tally', text: `Sign it or query a line by ${when(page, page.signBy)}. After that it counts as signed, up to the hold.`, action: tally }
        : { kind: 'note', title: `Waiting for ${other} to sign`, text: `An unanswered tally counts as signed at ${when(page, page.signBy)}, up to the hold.`, action: tally };
    case 'queried':
      return { kind: 'care', title: 'The tally is queried', text: landowner ? `${other} answers your query, and a moderator decides it if you cannot agree.` : 'Answer the query line by line. A moderator decides it if you cannot agree.', action: tally };
    case 'signed':
      return { kind: 'good', title: 'Signed, being paid out', text: landowner ? 'What was not used is on its way back to your card.' : 'Your pay is released the same day; your bank takes some days.', action: { label: 'See the receipt', href: paths.receipt(page.number) } };
    case 'settled':
      return { kind: 'good', title: 'Settled', text: landowner ? 'Stack and sticker the boards the same day. A review helps the next landowner.' : 'Released; your bank takes some days. A review helps the next sawyer.', action: { label: 'See the receipt', href: paths.receipt(page.number) } };
    case 'lapsed':
      return { kind: 'note', title: 'Lapsed', text: 'The hold was not paid in time. The day is free again and the listing is open.' };
    case 'cancelled':
      return { kind: 'note', title: 'Cancelled', text: page.cancelReason ?? 'This booking ended before sawing.' };
  }
}

const deeds: Readonly<Record<string, string>> = {
  openBooking: 'The bid was chosen and the terms were frozen',
  proposeDays: 'Days were proposed',
  agree: 'The days were agreed; the hold fell due',
  moveDays: 'The days were changed',
  move: 'The days were changed; the money stayed held',
  startCheckout: 'The card page was opened',
  receive: 'The money arrived and is held',
  addToHold: 'Money was added to the hold',
  returnMoney: 'Money that was not due goes back',
  acceptHeld: 'The held amount was accepted as full pay',
  settleAsHeld: 'A moderator settled it with what was held',
  reportNoShow: 'One side was reported not to have come',
  withdrawNoShow: 'The report was taken back',
  contestNoShow: 'The report was contested',
  dismissNoShow: 'A moderator decided that the booking goes on',
  endForNoShow: 'The report stands',
  dispute: 'The card payment is disputed at the bank',
  winDispute: 'The bank decided for the payment',
  loseDispute: 'The bank gave the payment back to the card',
  retryProviderCall: 'A moderator had a payment tried again',
  hold: 'The booking is held',
  startSawing: 'Sawing began',
  allowOnTheDay: 'The landowner allowed more on the day',
  nearTheHold: 'The work neared what is held',
  signPart: 'Part of the tally was signed',
  amendTally: 'The tally was amended',
  answerQuery: 'A queried line was answered',
  offerTally: 'The tally was offered for signing',
  query: 'The tally was queried',
  sign: 'The tally was signed',
  beginSettling: 'Paying out began',
  settle: 'Settled',
  leaveToModerator: 'It was left to a moderator',
  offerBoardsLeft: 'Boards left over were offered on the listing',
  takeDownBoardsLeft: 'The offer of boards left over was taken down',
  keepJobPage: 'The page that shows the job was put together',
  agreeToJobPage: 'Agreed to show the job to everyone',
  keepJobPrivate: 'The job is kept private',
  lapse: 'Not paid in time: lapsed',
  voidUnpaid: 'The hold is no longer needed',
  refund: 'The hold was refunded',
  cancel: 'Cancelled',
};

/** One line of the history in words. */
export const happenedWords = (line: Happened): string => (line.thing === 'heldPayment' && line.action === 'settle' ? 'The payment was settled' : (deeds[line.action] ?? line.action));
