import { roundCents, type Cents } from '~/domain/money.ts';
import type { Settlement } from '~/domain/trade/settlement.ts';
import { rows } from '../db.ts';

/** One thing that changed what a sawyer earned, dated by the site's own calendar. */
export interface EarningsLine {
  readonly day: string;
  readonly booking: number;
  readonly title: string;
  readonly landowner: string;
  readonly what: 'settlement' | 'cancellation' | 'dispute' | 'adjustment';
  /** What the landowner paid for the work, tax inside. */
  readonly workCents: Cents;
  readonly taxCents: Cents;
  readonly feeCents: Cents;
  readonly toSawyerCents: Cents;
}

export interface EarningsStatement {
  /** `2026` or `2026-08`. */
  readonly period: string;
  readonly lines: readonly EarningsLine[];
  readonly totals: Pick<EarningsLine, 'workCents' | 'taxCents' | 'feeCents' | 'toSawyerCents'>;
}

interface Found {
  readonly day: string;
  readonly booking: number;
  readonly title: string;
  readonly landowner: string;
  readonly cause: string;
  readonly feeCents: Cents;
  readonly toSawyerCents: Cents;
  readonly settlement: Settlement | null;
}

const whatOf = (cause: string): EarningsLine['what'] =>
  cause === 'settlement' || cause === 'cancellation' || cause === 'adjustment' ? cause : 'dispute';

/** The tax inside what was paid for the work: the same part of it as of the cost. */
function taxIn({ cause, settlement }: Found, workCents: Cents): Cents {
  if (cause !== 'settlement' || settlement === null || settlement.costCents === 0) return 0;
  const costTax = settlement.overHold?.ifToppedUp.taxCents ?? settlement.taxCents;
  return roundCents((costTax * workCents) / settlement.costCents);
}

/**
 * What a sawyer earned in a year or month, from the ledger: every group that changed what is owed to or by them, payments themselves
 * left out. Leans on `booking_of_sawyer` and `ledger_entry_of_booking`.
 */
export async function earningsStatement(sawyerId: string, period: string): Promise<EarningsStatement> {
  const found = await rows<Found>(
    `SELECT to_char(grp.at AT TIME ZONE booking.time_zone, 'YYYY-MM-DD') AS day, booking.number AS booking, coalesce(listing.title, '') AS title, landowner.name AS landowner, grp.cause,
       coalesce(-sum(entry.amount_cents) FILTER (WHERE entry.account = 'platform fee'), 0)::int AS "feeCents",
       coalesce(-sum(entry.amount_cents) FILTER (WHERE entry.account IN ('sawyer payable', 'sawyer receivable')), 0)::int AS "toSawyerCents",
       (SELECT tally.settlement FROM tally WHERE tally.booking_id = booking.id AND tally.signed_at IS NOT NULL ORDER BY part DESC LIMIT 1) AS settlement
     FROM booking JOIN ledger_group grp ON grp.booking_id = booking.id JOIN ledger_entry entry ON entry.group_id = grp.id
       JOIN listing ON listing.id = booking.listing_id JOIN account landowner ON landowner.id = booking.landowner_id
     WHERE booking.sawyer_id = $1 AND grp.cause NOT IN ('transfer', 'reversal') AND entry.account IN ('platform fee', 'sawyer payable', 'sawyer receivable')
       AND to_char(grp.at AT TIME ZONE booking.time_zone, 'YYYY-MM') LIKE $2
     GROUP BY grp.id, grp.at, grp.cause, booking.id, listing.title, landowner.name ORDER BY grp.at, booking.number`,
    [sawyerId, `${period}%`],
  );
  const lines = found.map((one): EarningsLine => {
    const workCents = one.feeCents + one.toSawyerCents;
    return { day: one.day, booking: one.booking, title: one.title, landowner: one.landowner, what: whatOf(one.cause), workCents, taxCents: taxIn(one, workCents), feeCents: one.feeCents, toSawyerCents: one.toSawyerCents };
  });
  const sum = (pick: (line: EarningsLine) => Cents): Cents => lines.reduce((total, line) => total + pick(line), 0);
  return { period, lines, totals: { workCents: sum((line) => line.workCents), taxCents: sum((line) => line.taxCents), feeCents: sum((line) => line.feeCents), toSawyerCents: sum((line) => line.toSawyerCents) } };
}
