import { bidStates, type BidMove, type BidState } from '~/domain/states/bid.ts';
import { enqueue } from './jobs/queue.ts';
import { Account } from './models/account.ts';
import { Bid } from './models/sawyer.ts';
import type { MailMessage } from './services/mail.ts';
import { transition } from './transition.ts';
import type { Actor } from './viewer.ts';

/** A person as letters need them. */
export interface Reader {
  readonly name: string;
  readonly email: string;
}

/** Who a letter about an account's thing goes to. */
export const readerOf = async (accountId: string): Promise<Reader> => Account.findByPk(accountId, { attributes: ['name', 'email'], rejectOnEmpty: true });

/** The bids of a listing in these states, locked, always in the same order so that two deeds never wait for each other. */
export const lockBids = (listingId: string, states: readonly BidState[]): Promise<Bid[]> =>
  Bid.findAll({ where: { listingId, status: [...states] }, order: ['id'], lock: true });

/**
 * Moves every bid of a listing that is in one of these states, and writes to its sawyer. Call it inside the transaction that holds
 * the listing's lock.
 * @returns how many were moved
 */
export async function moveBids(listingId: string, from: readonly BidState[], move: BidMove, actor: Actor, at: Date, letterTo: (sawyer: Reader, bid: Bid) => MailMessage): Promise<number> {
  const bids = await lockBids(listingId, from);
  for (const bid of bids) {
    const decided = move === 'lapse' || move === 'decline' ? { decidedAt: at } : {};
    await transition(bidStates, move, bid, actor, at, { updatedAt: at, ...decided });
    await enqueue('send-mail', letterTo(await readerOf(bid.sawyerId), bid));
  }
  return bids.length;
}
