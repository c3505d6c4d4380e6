import { machine } from './machine.ts';

/** A bid belongs to a revision of its listing; `toConfirm` means the listing has been revised since. */
export const bidStates = machine({
  thing: 'bid',
  states: ['open', 'toConfirm', 'chosen', 'declined', 'withdrawn', 'lapsed', 'released'],
  moves: {
    change: { from: ['open', 'toConfirm'], to: 'open' },
    askToConfirm: { from: ['open'], to: 'toConfirm' },
    confirm: { from: ['toConfirm'], to: 'open' },
    choose: { from: ['open'], to: 'chosen' },
    decline: { from: ['open', 'toConfirm'], to: 'declined' },
    withdraw: { from: ['open', 'toConfirm'], to: 'withdrawn' },
    lapse: { from: ['open', 'toConfirm'], to: 'lapsed' },
    release: { from: ['chosen'], to: 'released' },
  },
});

export type BidState = (typeof bidStates.states)[number];
export type BidMove = keyof typeof bidStates.moves;
