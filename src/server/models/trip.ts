import type { TripState, TripStopState } from '~/domain/states/trip.ts';
import { day, filled, id, identity, instant, json, nullable, ref, table, text, timeOfDay, whole, yes, type Row } from './table.ts';

export const SharedTrip = table('shared_trip', {
  id: id(),
  number: identity(),
  sawyerId: ref(),
  outingId: nullable(ref()),
  status: filled(text<TripState>()),
  version: filled(whole()),
  day: day(),
  startTime: filled(timeOfDay()),
  timeZone: text(),
  card: json<unknown>(),
  miles: whole(),
  aloneMiles: whole(),
  provenBest: yes(),
  wholeCents: whole(),
  aloneCents: whole(),
  answerBy: instant(),
  endedBecause: nullable(text()),
  createdAt: instant(),
  updatedAt: instant(),
});
export type SharedTrip = Row<typeof SharedTrip>;

export const TripStop = table('trip_stop', {
  id: id(),
  tripId: ref(),
  listingId: ref(),
  bidId: ref(),
  bookingId: nullable(ref()),
  landownerId: ref(),
  status: filled(text<TripStopState>()),
  position: whole(),
  landing: text(),
  legMiles: whole(),
  arrivesMin: whole(),
  leavesMin: whole(),
  aloneTravelCents: whole(),
  travelCents: whole(),
  setUpCents: whole(),
  aloneCostCents: whole(),
  costCents: whole(),
  holdCents: whole(),
  bidSeenAt: instant(),
  agreedVersion: nullable(whole()),
  answeredAt: nullable(instant()),
  outBecause: nullable(text()),
});
export type TripStop = Row<typeof TripStop>;
