import { formatCents } from '~/domain/money.ts';
import { formatInstant } from '~/domain/time.ts';
import type { MoneyOfBooking, MoneyStep } from '~/server/queries/money-of-booking.ts';

/** One line of the money's story, in plain words for the side that reads it. */
export interface MoneyLine {
  readonly words: string;
  readonly at: Date | null;
  readonly tone: 'done' | 'ahead' | 'trouble';
}

function stepLine(step: MoneyStep, money: MoneyOfBooking): MoneyLine {
  const cents = formatCents(step.cents);
  const card = money.side === 'landowner' ? 'your card' : 'the card';
  const to = money.side === 'sawyer' ? 'you' : money.sawyerName;
  const done = (words: string): MoneyLine => ({ words, at: step.at, tone: 'done' });
  const ahead = (words: string): MoneyLine => ({ words, at: null, tone: 'ahead' });
  const trouble = (words: string): MoneyLine => ({ words, at: step.at, tone: 'trouble' });
  switch (step.kind) {
    case 'charge':
      return done(step.purpose === 'hold' || step.purpose === null ? `${cents} arrived and was held` : `${cents} was added to the hold`);
    case 'returned':
      return done(`${cents} arrived when nothing was due; it goes back whole`);
    case 'refund':
      if (step.state === 'done') return done(`${cents} sent back to ${card}; the bank takes some days`);
      return step.state === 'stuck' ? trouble(`${cents} could not be sent back to ${card}; a moderator is looking at it`) : ahead(`${cents} is on its way back to ${card}`);
    case 'transfer':
      if (step.state === 'done') return done(`${cents} released to ${to}; the bank takes some days`);
      if (step.state === 'stuck') return trouble(`${cents} could not be released to ${to}; a moderator is looking at it`);
      return ahead(step.state === 'waits' ? `${cents} for ${to} waits for a payout account` : `${cents} is being released to ${to}`);
    case 'reversal':
      if (step.state === 'done') return done(`${cents} was taken back from ${to} after the dispute`);
      return step.state === 'stuck' ? trouble(`${cents} is owed back by ${to} after the dispute; a moderator writes about it`) : ahead(`${cents} is being taken back from ${to} after the dispute`);
    case 'dispute':
      if (step.state === 'won') return done(`The card dispute over ${cents} was decided for the payment`);
      return trouble(step.state === 'lost' ? `The bank gave ${cents} back to ${card} after a dispute` : `The card payment of ${cents} is disputed at the bank`);
  }
}

/** What comes next with the money, or null when nothing does. */
function nextLine(money: MoneyOfBooking): MoneyLine | null {
  const ahead = (words: string): MoneyLine => ({ words, at: null, tone: 'ahead' });
  const mine = money.side === 'landowner';
  if (money.waitsFor === 'moderator') return ahead('A moderator looks at this and writes to you.');
  if (money.waitsFor === 'bank') return ahead('Nothing is paid out until the bank has decided.');
  if (money.waitsFor === 'top-up') {
    const lacking = formatCents(money.settlement?.lackingCents ?? 0);
    if (money.heldCents === 0) return ahead(`The bank took the hold back, so nothing is held: ${mine ? 'pay' : `it waits for ${money.landownerName} to pay`} the ${lacking} that the tally came to.`);
    return ahead(mine ? `The tally is ${lacking} more than the hold: pay the rest, unless ${money.sawyerName} accepts what is held.` : `The tally is ${lacking} more than the hold: it waits for ${money.landownerName} to pay the rest, or for ${money.side === 'sawyer' ? 'you' : money.sawyerName} to accept what is held.`);
  }
  switch (money.status) {
    case 'agreed':
      return ahead(`${mine ? 'You pay' : `${money.landownerName} pays`} the hold of ${formatCents(money.dueCents)}${money.payBy ? ` by ${formatInstant(money.payBy, money.timeZone)}` : ''}.`);
    case 'held':
    case 'sawing':
    case 'tallied':
    case 'queried':
      return ahead(`${formatCents(money.heldCents)} is held until ${mine ? 'you sign' : `${money.landownerName} signs`} the tally. Then the work is paid and the rest goes back.`);
    default:
      return null;
  }
}

/** The whole story: what has happened, then what comes next. */
export function moneyLines(money: MoneyOfBooking): MoneyLine[] {
  const next = nextLine(money);
  return [...money.steps.map((step) => stepLine(step, money)), ...(next ? [next] : [])];
}
