import { rows } from '../db.ts';
import { SawyerProfile } from '../models/sawyer.ts';
import type { Viewer } from '../viewer.ts';

/** One job's pay, as its sawyer sees it. */
export interface Pay {
  readonly bookingNumber: number;
  readonly title: string;
  readonly cents: number;
  readonly state: 'released' | 'waits' | 'under way' | 'stuck';
  readonly at: Date;
}

export interface MonthOfPay {
  /** `2026-08`. */
  readonly month: string;
  readonly workCents: number;
  readonly feeCents: number;
  readonly releasedCents: number;
  readonly jobs: number;
}

export interface PayoutsPage {
  readonly account: 'none' | 'begun' | 'ready';
  /** Held for jobs that are agreed and not yet signed. */
  readonly heldCents: number;
  /** Owed to the sawyer and not yet released. */
  readonly waitingCents: number;
  readonly releasedCents: number;
  /** Owed by the sawyer after a card dispute that was lost. */
  readonly owedBackCents: number;
  readonly pays: readonly Pay[];
  readonly months: readonly MonthOfPay[];
}

/** What a sawyer has earned, what is on its way and what it waits for. Leans on `booking_of_sawyer` and `ledger_entry_of_booking`. */
export async function payoutsPage(viewer: Viewer): Promise<PayoutsPage> {
  const profile = await SawyerProfile.findByPk(viewer.id);
  const [sums] = await rows<{ held: number; waiting: number; owedBack: number }>(
    `SELECT coalesce(-sum(entry.amount_cents) FILTER (WHERE entry.account = 'landowner held'), 0)::int AS held,
       coalesce(-sum(entry.amount_cents) FILTER (WHERE entry.account = 'sawyer payable'), 0)::int AS waiting,
       coalesce(sum(entry.amount_cents) FILTER (WHERE entry.account = 'sawyer receivable'), 0)::int AS "owedBack"
     FROM ledger_entry entry JOIN booking ON booking.id = entry.booking_id WHERE booking.sawyer_id = $1`,
    [viewer.id],
  );
  const pays = await rows<Pay>(
    `SELECT booking.number AS "bookingNumber", coalesce(listing.title, '') AS title, sum((call.request->>'amountCents')::int)::int AS cents,
       CASE WHEN bool_and(call.status = 'done') THEN 'released' WHEN bool_or(call.status = 'stuck') THEN 'stuck' WHEN NOT coalesce(bool_and(profile.payouts_ready), false) THEN 'waits' ELSE 'under way' END AS state,
       max(coalesce(call.done_at, call.created_at)) AS at
     FROM provider_call call JOIN booking ON booking.id = call.booking_id JOIN listing ON listing.id = booking.listing_id LEFT JOIN sawyer_profile profile ON profile.account_id = booking.sawyer_id
     WHERE call.kind = 'transfer' AND call.status <> 'dropped' AND booking.sawyer_id = $1 GROUP BY booking.number, listing.title ORDER BY at DESC LIMIT 100`,
    [viewer.id],
  );
  const months = await rows<MonthOfPay>(
    `SELECT to_char(grp.at AT TIME ZONE coalesce(booking.time_zone, 'UTC'), 'YYYY-MM') AS month,
       -sum(entry.amount_cents) FILTER (WHERE entry.account IN ('sawyer payable', 'platform fee'))::int AS "workCents",
       coalesce(-sum(entry.amount_cents) FILTER (WHERE entry.account = 'platform fee'), 0)::int AS "feeCents",
       coalesce(-sum(entry.amount_cents) FILTER (WHERE entry.account = 'sawyer payable'), 0)::int AS "releasedCents",
       count(DISTINCT booking.id)::int AS jobs
     FROM ledger_group grp JOIN ledger_entry entry ON entry.group_id = grp.id JOIN booking ON booking.id = grp.booking_id
     WHERE booking.sawyer_id = $1 AND grp.cause IN ('settlement', 'cancellation') AND entry.account IN ('sawyer payable', 'platform fee')
     GROUP BY 1 ORDER BY 1 DESC LIMIT 36`,
    [viewer.id],
  );
  const releasedCents = pays.filter(({ state }) => state === 'released').reduce((sum, { cents }) => sum + cents, 0);
  return {
    account: !profile?.payoutAccount ? 'none' : profile.payoutsReady ? 'ready' : 'begun',
    heldCents: sums?.held ?? 0, waitingCents: sums?.waiting ?? 0, owedBackCents: sums?.owedBack ?? 0, releasedCents, pays, months,
  };
}
