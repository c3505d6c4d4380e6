import { machine } from './machine.ts';

/** A report that one side did not come. `over`: the work was moved, begun or cancelled, or the one reported came after all. */
export const noShowStates = machine({
  thing: 'noShow',
  states: ['reported', 'contested', 'stands', 'dismissed', 'over'],
  moves: {
    contest: { from: ['reported'], to: 'contested' },
    stand: { from: ['reported', 'contested'], to: 'stands' },
    dismiss: { from: ['contested'], to: 'dismissed' },
    pass: { from: ['reported', 'contested'], to: 'over' },
  },
});

export type NoShowState = (typeof noShowStates.states)[number];
