import { machine } from './machine.ts';

/** `closed` is shown as "closed to bids": the closing date has passed and the landowner still has seven days to choose. */
export const listingStates = machine({
  thing: 'listing',
  states: ['draft', 'open', 'closed', 'matched', 'done', 'withdrawn', 'lapsed'],
  moves: {
    publish: { from: ['draft'], to: 'open' },
    revise: { from: ['open'], to: 'open' },
    withdraw: { from: ['open'], to: 'withdrawn' },
    closeToBids: { from: ['open'], to: 'closed' },
    lapse: { from: ['closed'], to: 'lapsed' },
    match: { from: ['open', 'closed'], to: 'matched' },
    reopen: { from: ['matched'], to: 'open' },
    finish: { from: ['matched'], to: 'done' },
  },
});

export type ListingState = (typeof listingStates.states)[number];
export type ListingMove = keyof typeof listingStates.moves;
