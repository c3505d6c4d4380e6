/** What happens when a test card is charged. */
export interface TestCard {
  readonly number: string;
  /** The provider's name for the same card as a ready-made payment method. */
  readonly method: string;
  readonly brand: 'visa' | 'mastercard';
  readonly shows: string;
  readonly decline?: { readonly code: string; readonly declineCode?: string; readonly message: string };
  /** The money is available at once instead of after the settlement time. */
  readonly availableAtOnce?: true;
  readonly thenDisputed?: true;
  readonly refunds?: 'fail later' | 'finish later';
}

const declined = (declineCode: string, message = 'Your card was declined.', code = 'card_declined'): NonNullable<TestCard['decline']> =>
  code === 'card_declined' ? { code, declineCode, message } : { code, message };

/** The provider's published test numbers, as documented under "Testing" (numbers and codes from memory). */
export const TEST_CARDS: readonly TestCard[] = [
  { number: '4242424242424242', method: 'pm_card_visa', brand: 'visa', shows: 'Payment succeeds' },
  { number: '5555555555554444', method: 'pm_card_mastercard', brand: 'mastercard', shows: 'Payment succeeds' },
  { number: '4000000000000077', method: 'pm_card_bypassPending', brand: 'visa', shows: 'Succeeds, money available at once', availableAtOnce: true },
  { number: '4000000000000002', method: 'pm_card_visa_chargeDeclined', brand: 'visa', shows: 'Declined', decline: declined('generic_decline') },
  { number: '4000000000009995', method: 'pm_card_visa_chargeDeclinedInsufficientFunds', brand: 'visa', shows: 'Declined: insufficient funds', decline: declined('insufficient_funds', 'Your card has insufficient funds.') },
  { number: '4000000000009987', method: 'pm_card_visa_chargeDeclinedLostCard', brand: 'visa', shows: 'Declined: lost card', decline: declined('lost_card') },
  { number: '4000000000000069', method: 'pm_card_chargeDeclinedExpiredCard', brand: 'visa', shows: 'Declined: expired card', decline: declined('', 'Your card has expired.', 'expired_card') },
  { number: '4000000000000127', method: 'pm_card_chargeDeclinedIncorrectCvc', brand: 'visa', shows: 'Declined: wrong security code', decline: declined('', "Your card's security code is incorrect.", 'incorrect_cvc') },
  { number: '4000000000000119', method: 'pm_card_chargeDeclinedProcessingError', brand: 'visa', shows: 'Declined: processing error', decline: declined('', 'An error occurred while processing your card. Try again in a little bit.', 'processing_error') },
  { number: '4000000000000259', method: 'pm_card_createDispute', brand: 'visa', shows: 'Succeeds, then disputed', thenDisputed: true },
  { number: '4000000000007726', method: 'pm_card_pendingRefund', brand: 'visa', shows: 'Succeeds; a refund takes a while', refunds: 'finish later' },
  { number: '4000000000005126', method: 'pm_card_refundFail', brand: 'visa', shows: 'Succeeds; a refund fails later', refunds: 'fail later' },
];

/** Whether the last digit is the check digit of the others (ISO/IEC 7812-1, Luhn). */
export function hasCheckDigit(number: string): boolean {
  let sum = 0;
  for (const [index, digit] of [...number].reverse().entries()) {
    const doubled = Number(digit) * (index % 2 === 1 ? 2 : 1);
    sum += doubled > 9 ? doubled - 9 : doubled;
  }
  return number.length >= 12 && sum % 10 === 0;
}

/** A typed number as a test card, or the reason why it is not one. */
export function readCard(typed: string): TestCard | { readonly code: string; readonly message: string } {
  const number = typed.replace(/[\s-]/g, '');
  if (!/^\d{12,19}$/.test(number) || !hasCheckDigit(number)) return { code: 'incorrect_number', message: 'Your card number is incorrect.' };
  return TEST_CARDS.find((card) => card.number === number) ?? { code: 'card_declined', message: 'Your card was declined. This page takes test cards only.' };
}

export const cardOfMethod = (method: string): TestCard | undefined => TEST_CARDS.find((card) => card.method === method);
