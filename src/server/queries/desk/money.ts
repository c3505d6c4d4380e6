import { authorize } from '../../authorize.ts';
import { rows } from '../../db.ts';
import { balances, type Balances } from '../../ledger.ts';
import { Reconciliation } from '../../models/index.ts';
import { baseRoles, type Viewer } from '../../viewer.ts';
import type { AdjustmentKind } from '../../models/adjustment.ts';
import type { BookingState } from '~/domain/states/booking.ts';

/** A hold, the oldest first. */
export interface Hold {
  readonly booking: number;
  readonly title: string;
  readonly status: BookingState;
  readonly heldCents: number;
  readonly since: Date;
  readonly startsAt: Date | null;
  readonly timeZone: string;
  /** Why it needs a look, if it does. */
  readonly look: 'not begun' | 'over the hold' | 'no-show contested' | 'disputed' | null;
}

/** A call to the provider that is not getting through, or pay that waits. */
export interface StuckCall {
  readonly id: string;
  readonly kind: 'transfer' | 'refund' | 'reversal' | 'expire-checkout';
  readonly booking: number | null;
  readonly cents: number | null;
  readonly status: 'waiting' | 'failed' | 'stuck';
  readonly waitsFor: 'payout account' | 'bank' | 'provider' | 'moderator';
  readonly attempts: number;
  readonly error: string | null;
  readonly since: Date;
}

export interface DisputeRow {
  readonly id: string;
  readonly booking: number;
  readonly title: string;
  readonly cents: number;
  readonly status: 'open' | 'won' | 'lost';
  readonly openedAt: Date;
  readonly closedAt: Date | null;
  readonly owedBySawyerCents: number;
}

export interface AdjustmentRow {
  readonly id: string;
  readonly kind: AdjustmentKind;
  readonly booking: number | null;
  readonly object: string | null;
  readonly cents: number;
  readonly reason: string;
  readonly status: 'asked' | 'done' | 'refused';
  readonly askedBy: string;
  readonly askedAt: Date;
  readonly decidedBy: string | null;
  readonly mine: boolean;
}

export interface DeskMoney {
  readonly balances: Balances;
  readonly holds: readonly Hold[];
  readonly stuck: readonly StuckCall[];
  readonly disputes: readonly DisputeRow[];
  readonly adjustments: readonly AdjustmentRow[];
  readonly reconciliations: readonly Reconciliation[];
}

/** Two days after its start a booking that has not begun needs a look. */
const NOT_BEGUN_DAYS = 2;

// Each list is short or capped, and leans on the partial indexes of what is open.
const holdsOf = (at: Date): Promise<Hold[]> =>
  rows<Hold>(
    `SELECT booking.number AS booking, coalesce(listing.title, '') AS title, booking.status, held.cents AS "heldCents", charged.since, booking.starts_at AS "startsAt", booking.time_zone AS "timeZone",
       CASE WHEN payment.disputed_at IS NOT NULL THEN 'disputed' WHEN booking.status = 'signed' THEN 'over the hold'
         WHEN EXISTS (SELECT 1 FROM no_show WHERE booking_id = booking.id AND status = 'contested') THEN 'no-show contested'
         WHEN booking.status = 'held' AND booking.starts_at < $1 THEN 'not begun' END AS look
     FROM held_payment payment JOIN booking ON booking.id = payment.booking_id JOIN listing ON listing.id = booking.listing_id
       CROSS JOIN LATERAL (SELECT coalesce(-sum(amount_cents), 0)::int AS cents FROM ledger_entry WHERE booking_id = booking.id AND account = 'landowner held') held
       CROSS JOIN LATERAL (SELECT coalesce(min(received_at), payment.created_at) AS since FROM charge WHERE payment_id = payment.id) charged
     WHERE payment.status = 'held' ORDER BY charged.since LIMIT 200`,
    [new Date(at.getTime() - NOT_BEGUN_DAYS * 86_400_000)],
  );

const stuckOf = (at: Date): Promise<StuckCall[]> =>
  rows<StuckCall>(
    `SELECT call.id, call.kind, booking.number AS booking, (call.request->>'amountCents')::int AS cents, call.status, call.attempts, call.error, call.created_at AS since,
       CASE WHEN call.status = 'stuck' THEN 'moderator' WHEN dispute.id IS NOT NULL THEN 'bank' WHEN call.kind = 'transfer' AND NOT coalesce(profile.payouts_ready, false) THEN 'payout account' ELSE 'provider' END AS "waitsFor"
     FROM provider_call call LEFT JOIN booking ON booking.id = call.booking_id LEFT JOIN sawyer_profile profile ON profile.account_id = booking.sawyer_id
       LEFT JOIN LATERAL (SELECT id FROM card_dispute WHERE charge_id = call.charge_id AND status = 'open' LIMIT 1) dispute ON true
     WHERE call.status = 'stuck' OR (call.status IN ('waiting', 'failed') AND call.created_at < $1)
     ORDER BY call.status = 'stuck' DESC, call.created_at LIMIT 200`,
    [new Date(at.getTime() - 10 * 60_000)],
  );

const disputesOf = (): Promise<DisputeRow[]> =>
  rows<DisputeRow>(
    `SELECT dispute.id, booking.number AS booking, coalesce(listing.title, '') AS title, dispute.amount_cents AS cents, dispute.status, dispute.opened_at AS "openedAt", dispute.closed_at AS "closedAt",
       coalesce((SELECT sum(amount_cents) FROM ledger_entry WHERE booking_id = booking.id AND account = 'sawyer receivable'), 0)::int AS "owedBySawyerCents"
     FROM card_dispute dispute JOIN booking ON booking.id = dispute.booking_id JOIN listing ON listing.id = booking.listing_id
     ORDER BY dispute.status = 'open' DESC, dispute.opened_at DESC LIMIT 50`,
    [],
  );

const adjustmentsOf = (viewer: Viewer): Promise<AdjustmentRow[]> =>
  rows<AdjustmentRow>(
    `SELECT adjustment.id, adjustment.kind, booking.number AS booking, adjustment.object, adjustment.amount_cents AS cents, adjustment.reason, adjustment.status,
       asker.name AS "askedBy", adjustment.asked_at AS "askedAt", decider.name AS "decidedBy", adjustment.asked_by = $1 AS mine
     FROM adjustment LEFT JOIN booking ON booking.id = adjustment.booking_id JOIN account asker ON asker.id = adjustment.asked_by LEFT JOIN account decider ON decider.id = adjustment.decided_by
     ORDER BY adjustment.status = 'asked' DESC, adjustment.asked_at DESC LIMIT 30`,
    [viewer.id],
  );

/** All of the money that needs a moderator's eye. @throws Refusal for anyone but a moderator with a second factor */
export async function deskMoney(viewer: Viewer | null, at: Date): Promise<DeskMoney> {
  authorize(viewer, 'desk', 'seeMoney', baseRoles(viewer));
  return {
    balances: await balances(),
    holds: await holdsOf(at),
    stuck: await stuckOf(at),
    disputes: await disputesOf(),
    adjustments: await adjustmentsOf(viewer),
    reconciliations: await Reconciliation.findAll({ where: {}, order: [['beganAt', 'DESC']], limit: 5 }),
  };
}

/** @throws Refusal for anyone who may not set money right */
export const mayAdjust = (viewer: Viewer | null): void => authorize(viewer, 'desk', 'adjustMoney', baseRoles(viewer));
