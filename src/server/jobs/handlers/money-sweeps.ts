import { checkOpenCheckouts } from '../../commands/check-checkouts.ts';
import { lapseUnpaid } from '../../commands/lapse-unpaid.ts';
import { reconcile } from '../../commands/reconcile.ts';
import { sweepNoShows } from '../../commands/no-show.ts';
import { remindOfPayouts } from '../../commands/remind-of-payouts.ts';
import { oneRow, rows } from '../../db.ts';
import { enqueue } from '../queue.ts';
import type { Sweep } from './sweep.ts';

const minutesBefore = (at: Date, minutes: number): Date => new Date(at.getTime() - minutes * 60_000);

/** Calls whose job was lost or whose next try has come. */
const callAgain: Sweep = async (at) => {
  const due = await rows<{ id: string }>(
    `SELECT id FROM provider_call WHERE status IN ('waiting', 'failed') AND coalesce(claimed_until, created_at + interval '1 minute') <= $1 ORDER BY created_at LIMIT 200`,
    [at],
  );
  for (const { id } of due) await enqueue('make-provider-call', { callId: id });
};

/** Messages that were recorded and, for whatever reason, not handled. */
const handleAgain: Sweep = async (at) => {
  const left = await rows<{ id: string }>('SELECT id FROM provider_event WHERE handled_at IS NULL AND received_at <= $1 ORDER BY received_at LIMIT 200', [minutesBefore(at, 5)]);
  for (const { id } of left) await enqueue('handle-provider-event', { eventId: id });
};

/** Once a day the ledger is compared with the provider's books. */
const reconcileNightly: Sweep = async (at) => {
  const recent = await oneRow('SELECT 1 FROM reconciliation WHERE began_at > $1', [minutesBefore(at, 24 * 60)]);
  if (!recent) await reconcile(at);
};

/** The sweeps of money, in the order they run. */
export const moneySweeps: Readonly<Record<string, Sweep>> = {
  // Before anything lapses, a payment whose message was lost is looked for.
  'check open checkouts': (at) => checkOpenCheckouts(at, minutesBefore(at, 2)),
  'lapse unpaid bookings': lapseUnpaid,
  'let no-show reports stand': sweepNoShows,
  'make provider calls again': callAgain,
  'remind of payout accounts': remindOfPayouts,
  'handle provider messages again': handleAgain,
  'reconcile nightly': reconcileNightly,
};
