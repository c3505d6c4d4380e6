import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { happenedWords } from '~/components/booking-words.ts';
import { bookingStates } from '~/domain/states/booking.ts';
import { paymentStates } from '~/domain/states/payment.ts';
import { root } from '../../src/launch/setup.mjs';

/** The deeds that commands write down about a booking or its payment, read out of their source: `record(by, 'deed', 'booking', …)`. */
function writtenDown(): string[] {
  const deeds = new Set<string>();
  for (const file of readdirSync(`${root}/src/server`, { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.ts'))) {
    const source = readFileSync(`${root}/src/server/${file}`, 'utf8');
    for (const [, deed = ''] of source.matchAll(/record\(\w+, ([^,]+), (?:'booking'|'heldPayment')/g)) for (const [, name = ''] of deed.replace(/=== '\w+'/g, '').matchAll(/'(\w+)'/g)) deeds.add(name);
  }
  return [...deeds];
}

describe('the history of a booking', () => {
  it('has words for every move and every deed that is written down', () => {
    const found = writtenDown();
    expect(found).toEqual(expect.arrayContaining(['openBooking', 'agreeToJobPage', 'keepJobPrivate', 'dispute']));
    const all = [...found, ...Object.keys(bookingStates.moves), ...Object.keys(paymentStates.moves)];
    expect(all.filter((action) => happenedWords({ thing: 'booking', action, at: new Date(0), byName: null }) === action)).toEqual([]);
  });
});
