import { abilities, may, permissions, type Action, type Role, type Subject } from '~/domain/permissions.ts';
import { conflict, forbidden, signedOut } from './errors.ts';
import { baseRoles, type Viewer } from './viewer.ts';

interface ListingLike {
  readonly ownerId: string;
  readonly status: string;
}
interface BidLike {
  readonly sawyerId: string;
  readonly status: string;
}
interface BookingLike {
  readonly landownerId: string;
  readonly sawyerId: string;
  readonly status: string;
}

/** What this viewer is to a listing. Nobody is a sawyer on their own listing. */
export function rolesOnListing(viewer: Viewer | null, listing: ListingLike): Set<Role> {
  const roles = baseRoles(viewer);
  if (viewer && viewer.id === listing.ownerId) {
    roles.add('owner');
    roles.delete('anySawyer');
  }
  return roles;
}

/** What this viewer is to a bid. */
export function rolesOnBid(viewer: Viewer | null, bid: BidLike, listing: ListingLike): Set<Role> {
  const roles = rolesOnListing(viewer, listing);
  if (viewer && viewer.id === bid.sawyerId) roles.add('bidder');
  return roles;
}

/** What this viewer is to a booking. */
export function rolesOnBooking(viewer: Viewer | null, booking: BookingLike): Set<Role> {
  const roles = baseRoles(viewer);
  if (viewer && viewer.id === booking.landownerId) roles.add('landowner');
  if (viewer && viewer.id === booking.sawyerId) roles.add('sawyer');
  return roles;
}

/** What this viewer is to a shared trip. */
export function rolesOnTrip(viewer: Viewer | null, trip: { readonly sawyerId: string; readonly landownerIds: readonly string[] }): Set<Role> {
  const roles = baseRoles(viewer);
  if (viewer && viewer.id === trip.sawyerId) roles.add('sawyer');
  if (viewer && trip.landownerIds.includes(viewer.id)) roles.add('landowner');
  return roles;
}

/** What this viewer is to a stop of a shared trip. */
export function rolesOnTripStop(viewer: Viewer | null, stop: { readonly landownerId: string }): Set<Role> {
  const roles = baseRoles(viewer);
  if (viewer && viewer.id === stop.landownerId) roles.add('landowner');
  return roles;
}

/**
 * Lets the deed pass or refuses it.
 * @throws Refusal `signedOut` when nobody is signed in, `forbidden` when the roles never allow it, `conflict` when they would
 *   allow it in another state of the thing.
 */
export function authorize<S extends Subject>(viewer: Viewer | null, subject: S, action: Action<S>, roles: ReadonlySet<Role>, state?: string): asserts viewer is Viewer {
  if (!viewer) throw signedOut();
  if (may(subject, action, roles, state)) return;
  if (!viewer.active) throw forbidden('This account is suspended: it can read and finish what has begun, nothing else.');
  const rule = (permissions[subject] as Readonly<Record<string, { who: readonly Role[] }>>)[action];
  if (rule?.who.some((role) => roles.has(role))) throw conflict('That can no longer be done: things have moved on. Load the page again to see where it stands.');
  if (!viewer.emailConfirmed) throw forbidden('Confirm your e-mail address first: the link is in the message we sent you.');
  throw forbidden();
}

export { abilities };
