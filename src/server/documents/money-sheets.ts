import { formatCents } from '~/domain/money.ts';
import { dayAt, formatDayWithYear } from '~/domain/time.ts';
import { withUnit } from '~/domain/trade/price.ts';
import type { EarningsStatement } from '../queries/earnings-statement.ts';
import type { MoneyOfBooking } from '../queries/money-of-booking.ts';
import type { PaymentsStatement } from '../queries/payments-statement.ts';
import type { MoneySheet } from './money-sheet.ts';

const EARNED = { settlement: 'Tally settled', cancellation: 'Cancelled late', dispute: 'Card dispute lost', adjustment: 'Set right by a moderator' } as const;
const PAID = { hold: 'Hold', 'top-up': 'Rest of the tally', increase: 'Added to the hold', refund: 'Back to your card', dispute: 'Given back by the bank' } as const;
const TAX_NOTE = 'Tax is at the rate the sawyer states; Skidway does not compute tax. For your tax papers ask an adviser.';

/** `August 2026` or `2026`. */
export const periodWords = (period: string): string =>
  period.length === 4 ? period : new Intl.DateTimeFormat('en-US', { month: 'long', year: 'numeric', timeZone: 'UTC' }).format(new Date(`${period}-01T00:00:00Z`));

/** A sawyer's earnings of a year or month. */
export function earningsSheet(name: string, statement: EarningsStatement, number: string): MoneySheet {
  const { totals } = statement;
  return {
    title: 'Earnings', number,
    facts: [['Sawyer', name], ['Period', periodWords(statement.period)]],
    columns: [{ heading: 'Day', part: 0.17 }, { heading: 'Job', part: 0.31 }, { heading: 'For the work', part: 0.14, figure: true }, { heading: 'Tax inside', part: 0.12, figure: true }, { heading: 'Fee', part: 0.12, figure: true }, { heading: 'To you', part: 0.14, figure: true }],
    rows: statement.lines.map((line) => [
      formatDayWithYear(line.day), `${line.title}, booking ${line.booking}, ${line.landowner}${line.what === 'settlement' ? '' : ` (${EARNED[line.what].toLowerCase()})`}`,
      formatCents(line.workCents), formatCents(line.taxCents), formatCents(line.feeCents), formatCents(line.toSawyerCents),
    ]),
    totals: [[`${periodWords(statement.period)} in all`, '', formatCents(totals.workCents), formatCents(totals.taxCents), formatCents(totals.feeCents), formatCents(totals.toSawyerCents)]],
    notes: [TAX_NOTE],
  };
}

/** A landowner's payments of a year or month. */
export function paymentsSheet(name: string, statement: PaymentsStatement, number: string): MoneySheet {
  const { totals } = statement;
  return {
    title: 'Payments', number,
    facts: [['Landowner', name], ['Period', periodWords(statement.period)]],
    columns: [{ heading: 'Day', part: 0.18 }, { heading: 'Job', part: 0.34 }, { heading: 'What', part: 0.2 }, { heading: 'Paid', part: 0.14, figure: true }, { heading: 'Back', part: 0.14, figure: true }],
    rows: statement.lines.map((line) => [formatDayWithYear(line.day), `${line.title}, booking ${line.booking}, ${line.sawyer}`, PAID[line.what], line.paidCents === 0 ? '' : formatCents(line.paidCents), line.backCents === 0 ? '' : formatCents(line.backCents)]),
    totals: [[`${periodWords(statement.period)} in all`, '', '', formatCents(totals.paidCents), formatCents(totals.backCents)]],
    notes: ['What is paid is held until you sign the tally; what is not used goes back to your card.'],
  };
}

/** The receipt of a signed booking for one of its sides. @throws RangeError when nothing is signed */
export function receiptSheet(money: MoneyOfBooking, number: string): MoneySheet {
  const { settlement } = money;
  if (!settlement) throw new RangeError('There is no receipt before a tally is signed.');
  const { whole, parts, lostCents } = settlement;
  const total = (label: string, cents: number): string[] => [label, '', '', formatCents(cents)];
  const sums = money.side === 'landowner'
    ? [total('Paid for the work', parts.payableCents), total('Back to your card', parts.refundCents)]
    : [total('Paid for the work', parts.payableCents), total(`Fee (${money.feeBasisPoints / 100} %, not on tax)`, -parts.feeCents), total('To the sawyer', parts.transferCents)];
  return {
    title: 'Receipt', number,
    facts: [['Day', formatDayWithYear(dayAt(settlement.signedAt, money.timeZone))], ['Job', `${money.title}, booking ${money.number}`], ['Landowner', money.landownerName], ['Sawyer', money.sawyerName]],
    columns: [{ heading: 'For', part: 0.46 }, { heading: 'Quantity', part: 0.2, figure: true }, { heading: 'Price', part: 0.16, figure: true }, { heading: 'Amount', part: 0.18, figure: true }],
    rows: whole.lines.map((line) => [line.label, withUnit(line.quantity.toLocaleString('en-US', { maximumFractionDigits: 2 }), line.quantity, line.unit), line.unit === '%' ? '' : formatCents(line.unitCents), formatCents(line.amountCents)]),
    totals: [total('The work came to', whole.costCents), ...sums, ...(lostCents > 0 ? [total('Given back by the bank after a dispute', lostCents)] : [])],
    notes: [...(parts.taxCents > 0 ? [`Tax of ${formatCents(parts.taxCents)} is inside. ${TAX_NOTE}`] : []), ...(settlement.lackingCents > 0 ? [`${formatCents(settlement.lackingCents)} was not held and is not paid.`] : [])],
  };
}
