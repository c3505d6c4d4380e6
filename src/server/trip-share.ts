import type { BidTerms } from '~/domain/trade/rate-card.ts';
import { SharedTrip, TripStop } from './models/trip.ts';

/**
 * A booking's terms with its part of a shared trip. A booking that was made before the trip keeps its frozen agreement; the part it
 * agreed to stands beside it and goes before the card's own set-up and travel.
 */
export async function withShare(bookingId: string, terms: BidTerms): Promise<BidTerms> {
  if (terms.shared) return terms;
  const stop = await TripStop.findOne({ where: { bookingId, status: 'bound' } });
  if (!stop) return terms;
  const trip = await SharedTrip.findByPk(stop.tripId, { rejectOnEmpty: true });
  return { ...terms, shared: { trip: trip.number, travelCents: stop.travelCents, setUpCents: stop.setUpCents } };
}
