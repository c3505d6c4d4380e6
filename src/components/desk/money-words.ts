import type { Hold, StuckCall, AdjustmentRow } from '~/server/queries/desk/money.ts';

/** The desk's money in words. */
export const callWords: Readonly<Record<StuckCall['kind'], string>> = { transfer: 'Pay to the sawyer', refund: 'Back to the card', reversal: 'Taken back from the sawyer', 'expire-checkout': 'End of a card page' };

export const waitWords: Readonly<Record<StuckCall['waitsFor'], string>> = { 'payout account': 'waits for the sawyer’s payout account', bank: 'waits for the bank’s decision', provider: 'being tried', moderator: 'stuck' };

export const lookWords: Readonly<Record<NonNullable<Hold['look']>, string>> = {
  'not begun': 'The day has passed and sawing has not begun', 'over the hold': 'Signed above the hold', 'no-show contested': 'No-show to decide', disputed: 'Disputed at the bank',
};

export const adjustmentWords: Readonly<Record<AdjustmentRow['kind'], string>> = {
  forgive: 'Forgive what the sawyer owes', 'fee-to-landowner': 'Fee back to the landowner’s card', 'fee-to-sawyer': 'Fee to the sawyer', 'hold-to-landowner': 'Part of the hold back to the card', 'enter-difference': 'Enter a difference',
};

/** Whole days between two instants, in words. */
export function agoWords(since: Date, at: Date): string {
  const days = Math.floor((at.getTime() - since.getTime()) / 86_400_000);
  return days <= 0 ? 'today' : days === 1 ? '1 day' : `${days} days`;
}
