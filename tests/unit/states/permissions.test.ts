import { describe, expect, it } from 'vitest';
import { abilities, may, permissions, type Role } from '~/domain/permissions.ts';
import { accountStates } from '~/domain/states/account.ts';
import { bidStates } from '~/domain/states/bid.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { listingStates } from '~/domain/states/listing.ts';
import { allows } from '~/domain/states/machine.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { tripStates, tripStopStates } from '~/domain/states/trip.ts';

const roles: readonly Role[] = ['owner', 'bidder', 'landowner', 'sawyer', 'anySawyer', 'member', 'moderator'];

/** Every role × action × state that is allowed, as lines a reviewer can read. */
function matrix(): string[] {
  const states = { listing: listingStates.states, bid: bidStates.states, booking: bookingStates.states, sawyer: [], trip: tripStates.states, tripStop: tripStopStates.states, account: accountStates.states, message: [], review: [], photo: [], report: [], desk: [] } as const;
  const lines: string[] = [];
  for (const subject of Object.keys(permissions) as (keyof typeof permissions)[]) {
    for (const action of Object.keys(permissions[subject])) {
      for (const role of roles) {
        const where = [undefined, ...states[subject]].filter((state) => may(subject, action as never, new Set([role]), state));
        if (where.length > 0) lines.push(`${subject}.${action} ${role}: ${where.includes(undefined) ? 'any' : where.join(' ')}`);
        const suspended = [undefined, ...states[subject]].filter((state) => may(subject, action as never, new Set([role, 'suspended']), state));
        if (suspended.length > 0) lines.push(`  ${role} while suspended: ${suspended.includes(undefined) ? 'any' : suspended.join(' ')}`);
      }
    }
  }
  return lines;
}

describe('permissions', () => {
  it('allows exactly this', () => {
    expect(matrix()).toMatchSnapshot();
  });
  it('gives nobody anything', () => {
    expect(Object.values(abilities('booking', new Set(), 'held')).some(Boolean)).toBe(false);
    expect(Object.values(abilities('listing', new Set(), 'open')).some(Boolean)).toBe(false);
  });
});

describe('state tables', () => {
  it.each([accountStates, listingStates, bidStates, bookingStates, paymentStates, tripStates, tripStopStates])('$thing: every state but the first is reached by a move', (table) => {
    const reached = new Set(Object.values(table.moves).map((move) => move.to as string));
    for (const state of table.states.slice(1)) expect(reached).toContain(state);
  });
  it('has no way back from the end', () => {
    for (const move of Object.keys(bookingStates.moves) as (keyof typeof bookingStates.moves)[]) {
      for (const state of ['settled', 'lapsed', 'cancelled'] as const) expect(allows(bookingStates, move, state)).toBe(false);
    }
  });
});
