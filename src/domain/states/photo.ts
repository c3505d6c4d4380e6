import { machine } from './machine.ts';

/** `awaiting`: its upload was begun; `checking`: it arrived and its renditions are being made. */
export const photoStates = machine({
  thing: 'photo',
  states: ['awaiting', 'checking', 'ready', 'refused'],
  moves: {
    arrive: { from: ['awaiting'], to: 'checking' },
    accept: { from: ['checking'], to: 'ready' },
    refuse: { from: ['checking'], to: 'refused' },
  },
});
