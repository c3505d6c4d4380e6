import { machine } from './machine.ts';

/** A shared trip is offered to several landowners and binds all who are left at once, or ends. */
export const tripStates = machine({
  thing: 'shared_trip',
  states: ['offered', 'agreed', 'ended'],
  moves: {
    agree: { from: ['offered'], to: 'agreed' },
    end: { from: ['offered'], to: 'ended' },
  },
});
export type TripState = (typeof tripStates.states)[number];

/** One landowner's stop. Who has agreed is asked again when somebody leaves and the figure changes. */
export const tripStopStates = machine({
  thing: 'trip_stop',
  states: ['asked', 'agreed', 'bound', 'out'],
  moves: {
    agree: { from: ['asked'], to: 'agreed' },
    askAgain: { from: ['agreed'], to: 'asked' },
    bind: { from: ['agreed'], to: 'bound' },
    leave: { from: ['asked', 'agreed'], to: 'out' },
  },
});
export type TripStopState = (typeof tripStopStates.states)[number];
