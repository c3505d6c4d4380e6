import { machine } from './machine.ts';

/** `move` keeps a held booking held: a new day, confirmed by both, swapped in one step. */
export const bookingStates = machine({
  thing: 'booking',
  states: ['proposed', 'agreed', 'held', 'sawing', 'tallied', 'queried', 'signed', 'settled', 'lapsed', 'cancelled'],
  moves: {
    agree: { from: ['proposed'], to: 'agreed' },
    hold: { from: ['agreed'], to: 'held' },
    move: { from: ['held'], to: 'held' },
    startSawing: { from: ['held'], to: 'sawing' },
    offerTally: { from: ['sawing'], to: 'tallied' },
    query: { from: ['tallied'], to: 'queried' },
    sign: { from: ['tallied', 'queried'], to: 'signed' },
    settle: { from: ['signed'], to: 'settled' },
    lapse: { from: ['agreed'], to: 'lapsed' },
    cancel: { from: ['proposed', 'agreed', 'held'], to: 'cancelled' },
  },
});

export type BookingState = (typeof bookingStates.states)[number];
export type BookingMove = keyof typeof bookingStates.moves;
