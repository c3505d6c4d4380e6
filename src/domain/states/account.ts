import { machine } from './machine.ts';

/** A closed account is gone for good; a suspended one can read and nothing else. */
export const accountStates = machine({
  thing: 'account',
  states: ['active', 'suspended', 'closed'],
  moves: {
    suspend: { from: ['active'], to: 'suspended' },
    restore: { from: ['suspended'], to: 'active' },
    close: { from: ['active'], to: 'closed' },
  },
});

export type AccountState = (typeof accountStates.states)[number];

/** What each state is called on a screen. */
export const accountStateNames: Readonly<Record<AccountState, string>> = { active: 'Active', suspended: 'Suspended', closed: 'Closed' };
