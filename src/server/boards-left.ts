import type { BoardLine } from '~/domain/timber/board-lines.ts';
import { oneRow } from './db.ts';

export interface BoardsLeftNotice {
  readonly boards: readonly BoardLine[];
  readonly asks: string;
  readonly putUpAt: Date;
}

/** The notice of boards left over that stands on a listing, while its owner's account is active; null without one. Leans on `boards_left_of_listing`. */
export async function boardsLeftOn(listingId: string): Promise<BoardsLeftNotice | null> {
  const found = await oneRow<BoardsLeftNotice>(
    `SELECT boards_left.boards, boards_left.asks, boards_left.put_up_at AS "putUpAt"
     FROM boards_left JOIN listing ON listing.id = boards_left.listing_id JOIN account ON account.id = listing.owner_id AND account.status = 'active'
     WHERE boards_left.listing_id = $1 AND boards_left.taken_down_at IS NULL ORDER BY boards_left.put_up_at DESC LIMIT 1`,
    [listingId],
  );
  return found ?? null;
}
