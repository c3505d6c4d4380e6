import type { Cents } from '~/domain/money.ts';
import { currentTransaction, oneRow, rows } from './db.ts';
import { LedgerEntry, type LedgerAccount } from './models/money.ts';

/** One side of a group. What Skidway has is positive, what it owes is negative; a group sums to zero. */
export interface Side {
  readonly account: LedgerAccount;
  readonly amountCents: Cents;
}

export interface Posting {
  readonly at: Date;
  /** What kind of thing caused it, and which one: the pair is written once ever. */
  readonly cause: string;
  readonly causeId: string;
  readonly bookingId: string | null;
  readonly actorId?: string | null;
  readonly note?: string;
  readonly sides: readonly Side[];
}

/**
 * Writes one group of the ledger: the only writer of its rows. Sides of zero are left out.
 * @returns false when this cause was written before; nothing is written then
 * @throws RangeError for a group that does not sum to zero, has fractions of a cent or fewer than two sides
 */
export async function post({ at, cause, causeId, bookingId, actorId = null, note = '', sides }: Posting): Promise<boolean> {
  if (!currentTransaction()) throw new Error('post needs a transaction');
  const written = sides.filter(({ amountCents }) => amountCents !== 0);
  if (written.some(({ amountCents }) => !Number.isSafeInteger(amountCents))) throw new RangeError('The ledger takes whole cents.');
  const sum = written.reduce((total, { amountCents }) => total + amountCents, 0);
  if (sum !== 0) throw new RangeError(`A ledger group must sum to zero; ${cause} ${causeId} comes to ${sum}.`);
  if (written.length < 2) throw new RangeError('A ledger group has at least two sides.');
  const group = await oneRow<{ id: string }>(
    `INSERT INTO ledger_group (at, cause, cause_id, booking_id, actor_id, note) VALUES ($1, $2, $3, $4, $5, $6)
     ON CONFLICT (cause, cause_id) DO NOTHING RETURNING id`,
    [at, cause, causeId, bookingId, actorId, note],
  );
  if (!group) return false;
  await LedgerEntry.bulkCreate(written.map(({ account, amountCents }) => ({ groupId: group.id, account, amountCents, bookingId })));
  return true;
}

export type Balances = Readonly<Record<LedgerAccount, Cents>>;

const NOTHING: Balances = {
  'provider balance': 0, 'landowner held': 0, 'sawyer payable': 0, 'refund payable': 0, 'platform fee': 0, 'provider fee': 0, 'sawyer receivable': 0, 'dispute loss': 0,
};

/** Every account's balance, of one booking or of all. Balances are always derived, never kept. */
export async function balances(bookingId?: string): Promise<Balances> {
  const found = await rows<{ account: LedgerAccount; cents: number }>(
    `SELECT account, sum(amount_cents)::float8 AS cents FROM ledger_entry ${bookingId === undefined ? '' : 'WHERE booking_id = $1'} GROUP BY account`,
    bookingId === undefined ? [] : [bookingId],
  );
  return { ...NOTHING, ...Object.fromEntries(found.map(({ account, cents }) => [account, cents])) };
}

/** What is held for a booking and not promised to anyone yet. */
export const heldFor = async (bookingId: string): Promise<Cents> => 0 - (await balances(bookingId))['landowner held'];
