import { payoutReminder } from '~/emails/money-letters.ts';
import { paths } from '~/domain/paths.ts';
import { inTransaction, rows } from '../db.ts';
import { enqueue } from '../jobs/queue.ts';
import { linkTo } from '../parties.ts';

/** Days after which a sawyer is reminded that pay waits for a payout account; after the last, again every 28 days. */
const AFTER_DAYS = [1, 3, 7, 14, 28] as const;
const DAY_MS = 86_400_000;

/** How many reminders are due for pay that has waited since an instant. */
export function remindersDue(since: Date, at: Date): number {
  const days = (at.getTime() - since.getTime()) / DAY_MS;
  const last = AFTER_DAYS[AFTER_DAYS.length - 1] ?? 28;
  return AFTER_DAYS.filter((after) => after <= days).length + Math.max(0, Math.floor((days - last) / 28));
}

/**
 * Reminds sawyers whose pay waits for a payout account: one letter for all their waiting jobs, at growing intervals counted from the
 * oldest. Leans on provider_call_waiting.
 */
export async function remindOfPayouts(at: Date): Promise<void> {
  const waiting = await rows<{ sawyerId: string; name: string; email: string; since: Date; sent: number; cents: number; jobs: number; calls: string[] }>(
    `SELECT account.id AS "sawyerId", account.name, account.email, min(call.created_at) AS since, max(call.reminders) AS sent,
       sum((call.request->>'amountCents')::int)::int AS cents, count(DISTINCT call.booking_id)::int AS jobs, array_agg(call.id) AS calls
     FROM provider_call call JOIN booking ON booking.id = call.booking_id JOIN account ON account.id = booking.sawyer_id
       LEFT JOIN sawyer_profile profile ON profile.account_id = booking.sawyer_id
     WHERE call.kind = 'transfer' AND call.status IN ('waiting', 'failed') AND NOT coalesce(profile.payouts_ready, false)
     GROUP BY account.id`,
  );
  for (const { name, email, since, sent, cents, jobs, calls } of waiting) {
    const due = remindersDue(since, at);
    if (due <= sent) continue;
    await inTransaction(async () => {
      // Of two workers that sweep at once, one changes the rows.
      const changed = await rows(`UPDATE provider_call SET reminders = $2 WHERE id = ANY($1::uuid[]) AND reminders < $2 RETURNING id`, [calls, due]);
      if (changed.length > 0) await enqueue('send-mail', payoutReminder({ name, email }, cents, jobs, linkTo(paths.payouts)));
    });
  }
}
