import { paths } from '~/domain/paths.ts';
import { env } from './env.ts';
import { Account } from './models/account.ts';
import type { Booking } from './models/booking.ts';

/** The two people of a booking, as letters and calendars need them. */
export interface Party {
  readonly id: string;
  readonly name: string;
  readonly email: string;
}

export interface Parties {
  readonly landowner: Party;
  readonly sawyer: Party;
}

export const partyOf = async (id: string): Promise<Party> => {
  const account = await Account.findByPk(id, { attributes: ['id', 'name', 'email'], rejectOnEmpty: true });
  return { id: account.id, name: account.name, email: account.email };
};

/** Finds both sides of a booking. */
export async function partiesOf(booking: Booking): Promise<Parties> {
  return { landowner: await partyOf(booking.landownerId), sawyer: await partyOf(booking.sawyerId) };
}

/** The other side, seen from an account of the booking. */
export const otherParty = (parties: Parties, accountId: string): Party => (parties.landowner.id === accountId ? parties.sawyer : parties.landowner);

/** A full address of ours, for a letter. */
export const linkTo = (path: string): string => new URL(path, env().ORIGIN).href;

/** The address of a booking's page. */
export const bookingLink = (booking: Booking): string => linkTo(paths.booking(booking.number));
