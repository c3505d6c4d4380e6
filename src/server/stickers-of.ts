import { boardsOf, stickersFor } from '~/domain/trade/evening-before.ts';
import { type Listing, Piece } from './models/index.ts';

/** Stickers for the boards that a listing's cut list wants, or for those that its logs are expected to give. */
export async function stickersOf(listing: Listing): Promise<number> {
  const [species = 'white-oak'] = listing.species;
  const pieces = await Piece.findAll({ where: { listingId: listing.id } });
  return stickersFor(pieces.length > 0 ? pieces.map(({ thicknessIn, widthIn, lengthFt, count }) => ({ species, thicknessIn, widthIn, lengthFt, count })) : [boardsOf(species, listing.boardFeet)]);
}
