import { machine } from './machine.ts';

/**
 * The held payment. It moves only on a verified message from the payment provider or by our own reconciliation against it.
 * A card dispute is a mark beside the state, not a state.
 */
export const paymentStates = machine({
  thing: 'heldPayment',
  states: ['due', 'held', 'settling', 'settled', 'refunded', 'void'],
  moves: {
    receive: { from: ['due'], to: 'held' },
    beginSettling: { from: ['held'], to: 'settling' },
    settle: { from: ['settling'], to: 'settled' },
    refund: { from: ['held'], to: 'refunded' },
    voidUnpaid: { from: ['due'], to: 'void' },
  },
});

export type PaymentState = (typeof paymentStates.states)[number];
export type PaymentMove = keyof typeof paymentStates.moves;
