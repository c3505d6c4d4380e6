import type { PaymentState } from '~/domain/states/payment.ts';
import { filled, id, identity, instant, json, keyText, nullable, ref, table, text, whole, type Row } from './table.ts';

export const HeldPayment = table('held_payment', {
  id: id(),
  bookingId: ref(),
  status: filled(text<PaymentState>()),
  dueCents: whole(),
  transferGroup: text(),
  disputedAt: nullable(instant()),
  heldAcceptedAt: nullable(instant()),
  createdAt: instant(),
  updatedAt: instant(),
});
export type HeldPayment = Row<typeof HeldPayment>;

export const Checkout = table('checkout', {
  id: id(),
  paymentId: ref(),
  purpose: text<'hold' | 'top-up' | 'increase'>(),
  amountCents: whole(),
  status: filled(text<'creating' | 'open' | 'complete' | 'expired'>()),
  providerSessionId: nullable(text()),
  url: nullable(text()),
  idempotencyKey: text(),
  expiresAt: instant(),
  createdAt: instant(),
  completedAt: nullable(instant()),
});
export type Checkout = Row<typeof Checkout>;

export const Charge = table('charge', {
  id: id(),
  paymentId: ref(),
  checkoutId: nullable(ref()),
  providerChargeId: text(),
  providerIntentId: text(),
  amountCents: whole(),
  receivedAt: instant(),
  returnedBecause: nullable(text()),
});
export type Charge = Row<typeof Charge>;

export const ProviderCall = table('provider_call', {
  id: id(),
  kind: text<'transfer' | 'refund' | 'reversal' | 'expire-checkout'>(),
  bookingId: nullable(ref()),
  paymentId: nullable(ref()),
  chargeId: nullable(ref()),
  idempotencyKey: text(),
  request: json<Record<string, unknown>>(),
  /** `dropped`: the bank had given the money back to the card before the call was made. */
  status: filled(text<'waiting' | 'done' | 'failed' | 'stuck' | 'dropped'>()),
  attempts: filled(whole()),
  providerId: nullable(text()),
  response: nullable(json<unknown>()),
  error: nullable(text()),
  createdAt: instant(),
  claimedUntil: nullable(instant()),
  doneAt: nullable(instant()),
  /** For a reversal: the call whose transfer it takes back. */
  reverses: nullable(ref()),
  /** For a refund: those of this call that the bank sent back, by the provider's ids. They never move again. */
  cameBack: filled(json<readonly string[]>()),
});
export type ProviderCall = Row<typeof ProviderCall>;

export const ProviderEvent = table('provider_event', {
  id: keyText(),
  type: text(),
  createdAt: instant(),
  receivedAt: instant(),
  handledAt: nullable(instant()),
  payload: json<unknown>(),
  outcome: nullable(text()),
  account: nullable(text()),
});
export type ProviderEvent = Row<typeof ProviderEvent>;

export type LedgerAccount =
  | 'provider balance'
  | 'landowner held'
  | 'sawyer payable'
  | 'refund payable'
  | 'platform fee'
  | 'provider fee'
  | 'sawyer receivable'
  | 'dispute loss';

export const LedgerGroup = table('ledger_group', {
  id: id(),
  at: instant(),
  cause: text(),
  causeId: text(),
  bookingId: nullable(ref()),
  actorId: nullable(ref()),
  note: filled(text()),
});

export const LedgerEntry = table('ledger_entry', {
  id: { options: { ...identity().options, primaryKey: true, autoIncrement: true }, given: true } as ReturnType<typeof identity>,
  groupId: ref(),
  account: text<LedgerAccount>(),
  bookingId: nullable(ref()),
  amountCents: whole(),
});

export const CardDispute = table('card_dispute', {
  id: keyText(),
  chargeId: ref(),
  bookingId: ref(),
  amountCents: whole(),
  status: filled(text<'open' | 'won' | 'lost'>()),
  openedAt: instant(),
  closedAt: nullable(instant()),
});
export type CardDispute = Row<typeof CardDispute>;

/** One line of a reconciliation's findings. */
export interface Finding {
  readonly what: string;
  readonly object: string;
  readonly booking?: number;
  readonly oursCents?: number;
  readonly theirsCents?: number;
}

export const Reconciliation = table('reconciliation', {
  id: id(),
  beganAt: instant(),
  finishedAt: nullable(instant()),
  ledgerCents: nullable(whole()),
  providerCents: nullable(whole()),
  repaired: filled(json<Finding[]>()),
  differences: filled(json<Finding[]>()),
});
export type Reconciliation = Row<typeof Reconciliation>;
