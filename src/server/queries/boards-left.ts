import { boardsLeftOn, type BoardsLeftNotice } from '../boards-left.ts';

/** The boards left over that a listing's page shows. Whether the page may be read is decided by the caller. */
export const boardsLeftOnPage = (listingId: string): Promise<BoardsLeftNotice | null> => boardsLeftOn(listingId);
