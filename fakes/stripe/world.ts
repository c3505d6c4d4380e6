import { randomBytes } from 'node:crypto';
import type Stripe from 'stripe';
import { Store, type KeptPlan } from './store.ts';

export const API_VERSION = '2026-10-28.endive' satisfies Stripe.LatestApiVersion;

/** What a stand-in is set up with. Times in seconds are of its own clock, which `advance` moves. */
export interface WorldOptions {
  readonly folder: string | null;
  /** Address that people's browsers reach, for links in objects. */
  readonly baseUrl: () => string;
  readonly settleAfterS: number;
  readonly disputeAfterS: number;
  readonly payoutTakesS: number;
}

/** One request being answered: for the `request` field of events. */
export interface CurrentRequest {
  readonly id: string;
  readonly idempotencyKey: string | null;
}

type EventOf<T extends Stripe.Event['type']> = Extract<Stripe.Event, { type: T }>;

/** The books, the clock and the voice of the stand-in: everything a deed needs, and nothing of HTTP. */
export class World {
  readonly store: Store;
  request: CurrentRequest | null = null;
  /** Told of each new event, inside the change that made it. */
  onEvent: (event: Stripe.Event) => void = () => undefined;

  constructor(readonly options: WorldOptions) {
    this.store = new Store(options.folder);
  }

  private note(id: string): string | undefined {
    return this.store.get('note', id)?.value;
  }

  setNote(id: string, value: string): void {
    this.store.put('note', id, { id, value });
  }

  /** Whole seconds since 1970 on the stand-in's clock. */
  now(): number {
    return Math.floor(Date.now() / 1000) + Number(this.note('clock') ?? 0);
  }

  /** Moves the clock forward. */
  advance(seconds: number): void {
    this.setNote('clock', String(Number(this.note('clock') ?? 0) + seconds));
  }

  id(prefix: string): string {
    return `${prefix}_${randomBytes(18).toString('base64url').replace(/[-_]/g, 'x')}`;
  }

  plan(deed: KeptPlan['deed'], subject: string, afterS: number): void {
    const id = this.id('plan');
    this.store.put('plan', id, { id, at: this.now() + afterS, deed, subject });
  }

  /** Records an event with a copy of the object as it stands now. `account` is the connected account it concerns. */
  emit<T extends Stripe.Event['type']>(type: T, object: EventOf<T>['data']['object'], previous?: object, account = ''): void {
    const id = this.id('evt');
    const event = {
      id,
      object: 'event',
      ...(account === '' ? {} : { account }),
      api_version: API_VERSION,
      created: this.now(),
      data: { object: structuredClone(object), ...(previous === undefined ? {} : { previous_attributes: previous }) },
      livemode: false,
      pending_webhooks: 0,
      request: this.request === null ? { id: null, idempotency_key: null } : { id: this.request.id, idempotency_key: this.request.idempotencyKey },
      type,
    } satisfies Stripe.EventBase as unknown as Stripe.Event;
    this.store.put('event', id, event, account);
    this.onEvent(event);
  }
}

/** The id in a reference that may be an object. */
export function idOf(reference: string | { id: string } | null | undefined): string | null {
  if (reference === null || reference === undefined) return null;
  return typeof reference === 'string' ? reference : reference.id;
}
