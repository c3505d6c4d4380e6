import type Stripe from 'stripe';
import { completeOnboarding, restrictAccount } from './accounts.ts';
import { move } from './balance.ts';
import { books, type Books } from './books.ts';
import { readCard } from './cards.ts';
import { expireSession, paySession } from './checkout.ts';
import type { Deliveries, DeliverySettings } from './deliveries.ts';
import { closeDispute, openDispute } from './disputes.ts';
import { ApiError } from './errors.ts';
import type { Fault, Faults } from './faults.ts';
import { catchUp } from './plans.ts';
import { find } from './reading.ts';
import { failRefund } from './refunds.ts';
import type { Kind, Kinds } from './store.ts';
import type { World } from './world.ts';

const SHOWN = ['account', 'balance_transaction', 'charge', 'delivery', 'dispute', 'event', 'payment_intent', 'payout', 'refund', 'session', 'transfer', 'transfer_reversal', 'webhook_endpoint'] as const satisfies readonly Kind[];

/** The switches of the stand-in: everything the world outside can do to a platform, and everything that can go wrong. */
export class Control {
  constructor(
    private readonly world: World,
    private readonly deliveries: Deliveries,
    private readonly faults: Faults,
    private readonly setUp: () => void,
  ) {}

  /** Changes how events are sent. */
  webhooks(settings: Partial<DeliverySettings>): DeliverySettings {
    return Object.assign(this.deliveries.settings, settings);
  }

  /** Sends again one event, or all that never arrived. Answers how many deliveries. */
  resend(event?: string): number {
    return this.deliveries.resend(event);
  }

  /** Waits until every event has arrived or been given up. */
  quiet(timeoutMs?: number): Promise<boolean> {
    return this.deliveries.quiet(timeoutMs);
  }

  /** Lets a trouble befall the next calls of a kind. */
  fault(fault: Fault): void {
    this.faults.add(fault);
  }

  clearFaults(): void {
    this.faults.clear();
  }

  /** The bank sends back the next `count` refunds. */
  failNextRefunds(count: number): void {
    this.world.store.change(() => this.world.setNote('refunds to fail', String(count)));
  }

  /** The bank sends back a refund that seemed to have succeeded. */
  failRefund(id: string): void {
    this.world.store.change(() => failRefund(this.world, find(this.world, 'refund', id).id));
  }

  /** A person pays on the card page. @throws ApiError when the card declines or the session is not open. */
  pay(session: string, cardNumber = '4242424242424242', email = 'payer@example.test'): Stripe.Checkout.Session {
    const card = readCard(cardNumber);
    if (!('shows' in card)) throw new ApiError(402, { type: 'card_error', code: card.code, message: card.message });
    const outcome = this.world.store.change(() => {
      try {
        return paySession(this.world, session, card, { name: 'Test Payer', email, postalCode: '54665' });
      } catch (error) {
        if (error instanceof ApiError && error.keepsWork) return error;
        throw error;
      }
    });
    if (outcome instanceof ApiError) throw outcome;
    return outcome;
  }

  expireSession(id: string): Stripe.Checkout.Session {
    return this.world.store.change(() => expireSession(this.world, find(this.world, 'session', id)));
  }

  /** A sawyer completes onboarding; `verified: false` leaves a document due. */
  onboard(account: string, options: { verified?: boolean; accountNumber?: string } = {}): Stripe.Account {
    return this.world.store.change(() =>
      completeOnboarding(this.world, account, { name: 'Test Person', routingNumber: '110000000', accountNumber: options.accountNumber ?? '000123456789', verified: options.verified ?? true }),
    );
  }

  restrict(account: string): Stripe.Account {
    return this.world.store.change(() => restrictAccount(this.world, find(this.world, 'account', account)));
  }

  openDispute(charge: string): Stripe.Dispute {
    return this.world.store.change(() => openDispute(this.world, find(this.world, 'charge', charge)));
  }

  closeDispute(dispute: string, outcome: 'won' | 'lost'): Stripe.Dispute {
    return this.world.store.change(() => closeDispute(this.world, find(this.world, 'dispute', dispute), outcome));
  }

  /** Moves the clock forward and does what has come due: money becomes available, sessions expire, payouts arrive. */
  advance(seconds: number): void {
    this.world.store.change(() => this.world.advance(seconds));
    catchUp(this.world);
  }

  /** The platform pays money of its own in, available at once: what it bears fees and whole refunds from. */
  topUp(cents: number): void {
    this.world.store.change(() => move(this.world, '', { amount: cents, type: 'topup', category: 'topup', source: this.world.id('tu'), description: 'Top-up' }));
    catchUp(this.world);
  }

  /** Everything of a kind, oldest first. */
  objects<K extends Kind>(kind: K): Kinds[K][] {
    return this.world.store.all(kind);
  }

  all(): { [kind: string]: unknown[] } {
    return Object.fromEntries(SHOWN.map((kind) => [kind, this.world.store.all(kind)]));
  }

  books(): Books {
    return books(this.world);
  }

  /** Forgets everything and all troubles. */
  reset(): void {
    this.deliveries.forget();
    this.faults.clear();
    this.world.store.clear();
    this.setUp();
  }
}
